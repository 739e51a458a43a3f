import type { Page } from 'playwright/test';
import { expect, test } from './fixtures.ts';
import { expectAccessible, signIn } from './support/cockpit-pages.ts';

async function openPage(page: Page, name: string): Promise<void> {
  await page.getByRole('navigation', { name: 'pages' }).getByRole('link', { name }).click();
}

test('a new team signs up past the cautions, makes a practice event, stores its pack and opens the cockpit', async ({ page }) => {
  await page.goto('/');
  await page.getByRole('link', { name: 'new here: sign up' }).click();
  await page.getByLabel('your name').fill('Nora Tell');
  await page.getByLabel('team').fill('Oxbow');
  await page.getByLabel('email').fill('nora@oxbow.example');
  await page.getByLabel('password').fill('a level pool of time');
  await expect(page.getByRole('list', { name: 'cautions' }).getByRole('listitem')).not.toHaveCount(0);
  await page.getByRole('button', { name: 'sign up' }).click();
  await expect(page.getByText('Read the cautions and tick the box to go on.')).toBeVisible();
  await page.getByRole('checkbox').check();
  await page.getByRole('button', { name: 'sign up' }).click();

  await page.getByRole('button', { name: 'make a practice event' }).click();
  const store = page.getByRole('button', { name: 'store pack on this tablet' }).first();
  await store.click();
  const next = page.getByRole('region', { name: /^next, for attempt/ });
  await expect(next.getByText(/^pack stored \d\d:\d\d$/)).toBeVisible();
  await next.getByRole('link', { name: 'open cockpit' }).click();
  await expect(page).toHaveURL(/\/cockpit\/[0-9a-f-]{36}$/);
  await expect(page.getByText('Oxbow').or(page.getByText(/grid/i)).first()).toBeVisible();
});

test('a changed release says that the pack is out of date until it is stored again', async ({ page }) => {
  await signIn(page);
  await page
    .getByRole('button', { name: /store pack on this tablet|store the pack again/ })
    .first()
    .click();
  const next = page.getByRole('region', { name: /^next, for attempt/ });
  await expect(next.getByText(/^pack stored/)).toBeVisible();
  const which = /attempt \d+ of number \S+/.exec((await next.getByRole('heading').textContent()) ?? '')?.[0] ?? '';
  await page.getByRole('region', { name: which, exact: true }).getByRole('button', { name: 'change', exact: true }).click();
  await page.getByRole('textbox', { name: 'release' }).fill('25:00');
  await page.getByRole('button', { name: 'set release' }).click();
  await expect(page.getByText('Type hours, minutes and seconds')).toBeVisible();
  await page.getByRole('textbox', { name: 'release' }).fill('10:47:30');
  await page.getByRole('button', { name: 'set release' }).click();
  await expect(next.getByText(/^release 10:47:30 /)).toBeVisible();
  await expect(next.getByText('pack on this tablet is out of date')).toBeVisible();
  await next.getByRole('button', { name: 'store the pack again' }).click();
  await expect(next.getByText(/^pack stored/)).toBeVisible();
});

test('cockpit settings that were changed reach the tablet once its pack is stored again', async ({ page }) => {
  await signIn(page);
  await openPage(page, 'Plan');
  await page
    .getByRole('button', { name: /store pack on this tablet|store the pack again/ })
    .first()
    .click();
  const settings = page.getByRole('region', { name: 'Cockpit settings' });
  const rule = (value: string) => settings.locator(`input[type="radio"][value="${value}"]`);
  const choose = async (value: string, reserve: string): Promise<void> => {
    await rule(value).check();
    await settings.getByRole('spinbutton', { name: 'reserve in hand' }).fill(reserve);
    await settings.getByRole('button', { name: 'save settings' }).click();
  };
  const before = await settings.getByRole('radio', { checked: true }).inputValue();
  expect(['estimator', 'ratio']).toContain(before);
  await choose('gain', '');
  await expect(settings.getByText('Type seconds from 0 to 30.')).toBeVisible();
  await choose('gain', '2');
  await expect(settings.getByText(/^Saved\. A tablet goes on with what it has/)).toBeVisible();
  await settings.getByRole('button', { name: 'store the pack again' }).click();
  await expect(settings.getByText(/^Saved, and the pack on this tablet has them/)).toBeVisible();
  await page.reload();
  await expect(rule('gain')).toBeChecked();
  await expect(settings.getByRole('spinbutton', { name: 'reserve in hand' })).toHaveValue('2');
  await expect(settings.getByRole('button', { name: 'store the pack again' })).toHaveCount(0);
  await choose(before, '0');
  await settings.getByRole('button', { name: 'store the pack again' }).click();
  await expect(settings.getByText(/^Saved, and the pack on this tablet has them/)).toBeVisible();
});

test('the demo navigator reads a run sheet, chart and legs, and may let it count', async ({ page }) => {
  await signIn(page);
  await openPage(page, 'Runs');
  await page.getByRole('table', { name: 'runs, newest first' }).getByRole('link').first().click();
  await expect(page.getByRole('heading', { name: 'Run sheet' })).toBeVisible();
  const legs = page.getByRole('table', { name: 'checkpoints' });
  await expect(legs.getByRole('row')).not.toHaveCount(1);
  await expect(legs.getByRole('row', { name: /finish, by distance|finish, touched/ })).toContainText(/\d\.\d\d (late|early|level)/);
  await expect(page.getByRole('img', { name: /time error along the course/ }).locator('canvas')).toBeVisible();
  await expect(page.getByText('safe on server')).toBeVisible();
  await expect(page.getByText(/^The cockpit showed/)).toBeVisible();
  const [journal] = await Promise.all([page.waitForEvent('download'), page.getByRole('link', { name: 'download journal' }).click()]);
  expect(journal.suggestedFilename()).toMatch(/\.ndjson$/);
});

test('every page is accessible and keeps to the content policy, by day and by night, wide and narrow', async ({ page }) => {
  await page.goto('/sign-up');
  await expectAccessible(page);
  await signIn(page);
  await page
    .getByRole('button', { name: /store pack on this tablet|store the pack again/ })
    .first()
    .click();
  await expect(page.getByText(/^pack stored/).first()).toBeVisible();
  for (const [theme, width] of [
    ['noon', 1280],
    ['night', 390],
  ] as const) {
    await page.evaluate((name) => localStorage.setItem('evenline.theme', name), theme);
    await page.setViewportSize({ width, height: 844 });
    await page.reload();
    for (const name of ['Event', 'Plan', 'Garage', 'Runs', 'Team']) {
      await openPage(page, name);
      await expect(page.getByText('loading', { exact: true })).toHaveCount(0);
      await expect(page.getByRole('heading', { level: 1 })).toBeVisible();
      await expectAccessible(page);
    }
  }
});

test('without a connection a reload shows what was kept, and signing out clears it', async ({ page, context }) => {
  await signIn(page);
  await openPage(page, 'Garage');
  await expect(page.getByRole('table').first()).toBeVisible();
  await page.evaluate(async () => void (await navigator.serviceWorker.ready));
  await expect.poll(() => page.evaluate(() => localStorage.getItem('evenline.paddock')?.includes('garage'))).toBe(true);
  await context.setOffline(true);
  await page.reload();
  await expect(page.getByText('No connection.')).toBeVisible();
  await expect(page.getByRole('table').first()).toBeVisible();
  await expect(page.getByText(/^As of /)).toBeVisible();
  await context.setOffline(false);
  await openPage(page, 'Team');
  await page.getByRole('button', { name: 'sign out' }).click();
  await expect(page.getByRole('heading', { name: 'Sign in' })).toBeVisible();
  await expect.poll(() => page.evaluate(() => localStorage.getItem('evenline.paddock') ?? '')).not.toContain('garage');
});

test('a wrong password and an unknown address get the same sentence', async ({ page }) => {
  await page.goto('/sign-in');
  const sentences: string[] = [];
  for (const email of ['navigator@evenline.example', 'nobody@evenline.example']) {
    await page.getByLabel('email').fill(email);
    await page.getByLabel('password').fill('not the password');
    const answered = page.waitForResponse((response) => response.url().endsWith('/api/auth/sign-in'));
    await page.getByRole('button', { name: 'sign in' }).click();
    await answered;
    sentences.push(((await page.getByRole('alert').filter({ hasText: /\w/ }).first().textContent()) ?? '').replace(/request .*/, ''));
  }
  expect(sentences[0]).toBe(sentences[1]);
  expect(sentences[0]).not.toBe('');
});
