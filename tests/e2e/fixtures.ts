import { type BrowserContext, test as base, type ConsoleMessage, expect, type Page } from 'playwright/test';
import { type Served, serve } from './served.ts';

/**
 * `test` for every browser test: the built application behind its own server and database, one a worker, and a page that
 * fails the test on anything wrong that it did not expect: an uncaught error, an error on the console, a breach of the
 * content security policy, a part of the application that does not load.
 */
interface TestFixtures {
  /** What this test provokes on purpose. */
  expectedErrors: readonly RegExp[];
  /** Collects what went wrong in every page of the context; checked at the end. */
  troubles: string[];
}

const isApi = (url: string): boolean => URL.canParse(url) && new URL(url).pathname.startsWith('/api/');

function consoleTrouble(message: ConsoleMessage): string | null {
  if (message.type() !== 'error') return null;
  // The browser itself logs every refused or unreachable request; for /api that is part of the conversation.
  if (message.text().startsWith('Failed to load resource') && isApi(message.location().url)) return null;
  return `console: ${message.text()} (${message.location().url})`;
}

function watchPage(page: Page, troubles: string[]): void {
  page.on('pageerror', (error) => troubles.push(`uncaught: ${error.stack ?? error.message}`));
  page.on('crash', () => troubles.push('the page crashed'));
}

async function watchContext(context: BrowserContext, troubles: string[]): Promise<void> {
  context.on('page', (page) => watchPage(page, troubles));
  context.on('console', (message) => {
    const trouble = consoleTrouble(message);
    if (trouble !== null) troubles.push(trouble);
  });
  context.on('response', (response) => {
    if (response.status() >= 400 && !isApi(response.url())) troubles.push(`${response.status()} for ${response.url()}`);
  });
  await context.addInitScript(() => {
    addEventListener('securitypolicyviolation', (event) => {
      console.error(`content security policy: ${event.violatedDirective} ${event.blockedURI} ${event.sourceFile}:${event.lineNumber}`);
    });
  });
}

export const test = base.extend<TestFixtures, { served: Served }>({
  served: [
    // biome-ignore lint/correctness/noEmptyPattern: the runner reads the fixtures wanted from this pattern
    async ({}, use) => {
      const served = await serve();
      await use(served);
      await served.remove();
    },
    { scope: 'worker', timeout: 60_000 },
  ],
  baseURL: async ({ served }, use) => use(served.origin),
  expectedErrors: [[], { option: true }],
  // biome-ignore lint/correctness/noEmptyPattern: the runner reads the fixtures wanted from this pattern
  troubles: async ({}, use) => use([]),
  context: async ({ context, troubles, expectedErrors }, use) => {
    await watchContext(context, troubles);
    await use(context);
    const unexpected = troubles.filter((trouble) => !expectedErrors.some((expected) => expected.test(trouble)));
    expect(unexpected, 'errors on the page').toEqual([]);
  },
});

export { expect };
