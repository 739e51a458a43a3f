import { statSync } from 'node:fs';
import { join } from 'node:path';
import { type Browser, chromium, type Page } from 'playwright/test';
import { expect } from '#tests/e2e/fixtures.ts';
import globalSetup from '#tests/e2e/global-setup.ts';
import { type Served, serve } from '#tests/e2e/served.ts';
import { beginPractice, enterCockpit, hold, release, signIn } from '#tests/e2e/support/cockpit-pages.ts';
import { CHROMIUM } from '#tests/setup/chromium.mjs';

/** The pictures of the README, taken by walking through the demo as the tour there tells it. */
const FOLDER = import.meta.dirname;
const SIZE = { width: 1280, height: 800 };
/** A reader of the README waits for five of them. */
const MOST_BYTES = 160_000;
/** Quick enough to reach the finish in two minutes, slow enough for the moment to stand still while it is taken. */
const RATE = 10;

async function picture(page: Page, name: string): Promise<void> {
  await page.evaluate(async () => void (await document.fonts.ready));
  const path = join(FOLDER, `${name}.png`);
  await page.screenshot({ path, animations: 'disabled' });
  const { size } = statSync(path);
  if (size > MOST_BYTES) throw new Error(`${path} has ${size} bytes; at most ${MOST_BYTES} are wanted.`);
  console.log(`${path}, ${Math.round(size / 1000)} kB`);
}

/** Day in the paddock, night in the cockpit: a device on which no theme was chosen takes the one it prefers. */
async function light(page: Page, colorScheme: 'light' | 'dark'): Promise<void> {
  await page.emulateMedia({ colorScheme });
}

async function openPage(page: Page, name: string): Promise<void> {
  await page.getByRole('navigation', { name: 'pages' }).getByRole('link', { name }).click();
  await expect(page.getByText('loading', { exact: true })).toHaveCount(0);
}

/** What comes next, before the pack is on the device; the plan, which is made from the pack. */
async function prepared(page: Page): Promise<void> {
  await signIn(page);
  await expect(page.getByRole('button', { name: 'store pack on this tablet' }).first()).toBeVisible();
  await picture(page, 'event');
  await openPage(page, 'Plan');
  await page.getByRole('button', { name: 'store pack on this tablet' }).click();
  await expect(page.locator('canvas').first()).toBeVisible();
  await picture(page, 'plan');
  await openPage(page, 'Event');
}

/** On the grid, on the road with less in hand than planned, and over the line. */
async function driven(page: Page): Promise<void> {
  await beginPractice(page, RATE);
  await expect(page.getByText(/^by (exchange|server), ±/)).toBeVisible();
  await expect(page.getByText(/^simulator, [1-9]\d* good/)).toBeVisible();
  await picture(page, 'grid-check');
  await release(page);
  // Behind the first limit, where the plan is late by design.
  await expect(page.locator('.panel-count')).toContainText(/^[^\d]*[5-9] of/, { timeout: 120_000 });
  await expect(page.locator('.band[data-side="below"] .band-figure')).toHaveText(/^(0\.[3-9]|[1-9])/, { timeout: 60_000 });
  await picture(page, 'run');
  await expect(page.getByRole('button', { name: 'end the run' })).toBeVisible({ timeout: 240_000 });
  await hold(page, 'end the run');
}

/** The server's run sheet, once the tablet has sent the journal. */
async function told(page: Page): Promise<void> {
  await page.getByRole('link', { name: 'run sheet' }).click();
  await expect(page.getByText('safe on server')).toBeVisible({ timeout: 60_000 });
  await expect(page.getByRole('link', { name: 'download journal' })).toBeVisible({ timeout: 60_000 });
  await expect(page.getByText(/^The cockpit showed/)).toBeVisible({ timeout: 60_000 });
  await expect(page.getByRole('img', { name: /time error along the course/ }).locator('canvas')).toBeVisible();
  await picture(page, 'run-sheet');
}

async function tour(browser: Browser, served: Served): Promise<void> {
  const context = await browser.newContext({ baseURL: served.origin, viewport: SIZE, deviceScaleFactor: 1 });
  const page = await context.newPage();
  await light(page, 'light');
  await prepared(page);
  await light(page, 'dark');
  await enterCockpit(page);
  await driven(page);
  await light(page, 'light');
  await told(page);
}

const remove = await globalSetup();
try {
  const served = await serve();
  const browser = await chromium.launch({ executablePath: CHROMIUM, args: ['--no-sandbox', '--disable-background-networking'] });
  try {
    await tour(browser, served);
  } finally {
    await browser.close();
    await served.remove();
  }
} finally {
  await remove();
}
