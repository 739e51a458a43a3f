import { readFile } from 'node:fs/promises';
import AxeBuilder from '@axe-core/playwright';
import type { Page } from 'playwright/test';
import { fromNdjson, type JournalText } from '#shared/journal/ndjson.ts';
import { expect } from '#tests/e2e/fixtures.ts';

/** The way of a demo navigator into the cockpit, as a person goes it. */
const PASSWORD = 'even-line-demo';

export async function signIn(page: Page): Promise<void> {
  await page.goto('/sign-in');
  await page.getByLabel('email').fill('navigator@evenline.example');
  await page.getByLabel('password').fill(PASSWORD);
  await page.getByRole('button', { name: 'sign in' }).click();
  await expect(page.getByRole('navigation', { name: 'pages' })).toBeVisible();
}

/** Signs in, stores the pack of the next attempt on the tablet and opens its page in the cockpit. */
export async function openCockpit(page: Page): Promise<void> {
  await signIn(page);
  await page
    .getByRole('button', { name: /store pack on this tablet|store the pack again/ })
    .first()
    .click();
  await enterCockpit(page);
}

/** From the Event page, with the next attempt's pack stored, into the cockpit. */
export async function enterCockpit(page: Page): Promise<void> {
  const next = page.getByRole('region', { name: /^next, for attempt/ });
  await expect(next.getByText(/^pack stored/)).toBeVisible();
  await next.getByRole('link', { name: 'open cockpit' }).click();
  await expect(page.getByRole('button', { name: 'grid check' })).toBeVisible();
}

/** Practice by the simulator: the grid check of a run with this rate of the clock. */
export async function beginPractice(page: Page, rate: 1 | 10 | 30): Promise<void> {
  await page.getByRole('button', { name: `practice ${rate}×` }).click();
  await expect(page.getByRole('region', { name: 'grid check' })).toBeVisible();
  await expect(page.getByText(/^simulator, \d+ good/)).toBeVisible();
}

/** From the grid check to the run screen, by the practice release. */
export async function release(page: Page): Promise<void> {
  await page.getByRole('button', { name: 'in 0:30' }).click();
  await expect(page.getByRole('region', { name: 'next checkpoint' })).toBeVisible({ timeout: 45_000 });
}

export async function expectAccessible(page: Page): Promise<void> {
  const { violations } = await new AxeBuilder({ page }).withTags(['wcag2a', 'wcag2aa', 'wcag21a', 'wcag21aa']).analyze();
  expect(violations.map(({ id, nodes }) => `${id}: ${nodes.map(({ html }) => html).join(' | ')}`)).toEqual([]);
}

/** A steady touch of a little more than the second that the key asks for. */
export async function hold(page: Page, name: string): Promise<void> {
  const box = await page.getByRole('button', { name }).boundingBox();
  if (box === null) throw new Error(`no key ${name}`);
  await page.mouse.move(box.x + box.width / 2, box.y + box.height / 2);
  await page.mouse.down();
  await expect(page.getByRole('button', { name })).toHaveCount(0);
  await page.mouse.up();
}

/** The journal as the person takes it out of the tablet, by the key on the page. */
export async function exportJournal(page: Page): Promise<JournalText> {
  const [download] = await Promise.all([page.waitForEvent('download'), page.getByRole('button', { name: 'export journal' }).click()]);
  const journal = fromNdjson(await readFile(await download.path(), 'utf8'));
  if (!journal.ok) throw new Error(journal.error.message);
  return journal.value;
}
