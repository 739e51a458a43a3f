import type { Page } from 'playwright/test';
import { runResponseSchema } from '#shared/api/runs.ts';
import { makeDriveCourse } from '#shared/drive/drive-course.ts';
import { createDriveNavigator, usualHabits } from '#shared/drive/drive-navigator.ts';
import { USUAL_PARAMETERS } from '#shared/drive/drive-parameters.ts';
import { createRandom } from '#shared/drive/random.ts';
import { seedOf } from '#shared/drive/seed-of.ts';
import type { TapV1 } from '#shared/journal/observation.ts';
import { replay } from '#shared/journal/replay.ts';
import type { RunHeader } from '#shared/journal/run-header.ts';
import { runSheet } from '#shared/pace/sheet.ts';
import { expect, test } from './fixtures.ts';
import { beginPractice, exportJournal, hold, openCockpit, release } from './support/cockpit-pages.ts';

/**
 * The whole job in one go, as a crew lives it: sign in, store the pack, lose the connection, be released on the second, pass the
 * places, be killed on the way, finish, get the connection back, and read the run sheet that the server derived.
 */

/** How many places the practice navigator of a run touches: it forgets some, at random. */
function touchesOf({ runId, pack }: RunHeader): number {
  const seed = seedOf(runId);
  const { places } = makeDriveCourse(pack, createRandom(seed, 'survey'), USUAL_PARAMETERS.surveySigma);
  return createDriveNavigator(places, usualHabits(pack, seed), seed, pack.car.behindNose?.seatM ?? 0).targets.length;
}

/** What a run sheet page shows, word by word: the finish and every row of its table. */
async function readSheet(page: Page): Promise<{ readonly finish: string; readonly rows: readonly string[] }> {
  const rows = page.getByRole('table', { name: 'checkpoints' }).getByRole('row');
  await expect(rows).not.toHaveCount(0, { timeout: 60_000 });
  const finish = (await page.getByText('finish, own and unofficial').locator('..').textContent()) ?? '';
  return { finish: finish.replace(/\s+/g, ' '), rows: (await rows.allTextContents()).map((row) => row.replace(/\s+/g, ' ')) };
}

const kilometres = async (page: Page): Promise<number> =>
  Number.parseFloat((await page.locator('.panel-here dd').first().textContent()) ?? '');

test('the main job: from the paddock over a course without a connection to the run sheet that the server derived', async ({
  page,
  context,
}) => {
  test.setTimeout(240_000);
  await openCockpit(page);
  await page.evaluate(async () => void (await navigator.serviceWorker.ready));

  await beginPractice(page, 30);
  await expect(page.getByText(/^by (exchange|server), ±/)).toBeVisible();
  await context.setOffline(true);
  await page.reload();
  await release(page);
  await expect.poll(() => kilometres(page), { timeout: 60_000 }).toBeGreaterThan(25);
  const before = await kilometres(page);
  await page.reload();
  await expect(page.getByRole('region', { name: 'next checkpoint' })).toBeVisible();
  // a reload may lose the sensor data of the last 250 ms, which at this rate of the clock are 7.5 s at under 58 m/s
  expect(await kilometres(page)).toBeGreaterThanOrEqual(before - 0.435);

  await expect(page.getByText(/^slow/)).toBeVisible({ timeout: 120_000 });
  const shownAtFinish = ((await page.locator('.finish-own dd').last().textContent()) ?? '').replace(/\s+/g, ' ').trim();
  await hold(page, 'end the run');

  // the cockpit's own account, taken out of the tablet without a server
  const journal = await exportJournal(page);
  const own = runSheet(replay(journal.header, journal.observations), journal.header);
  expect(own.finish?.elapsedS).toBeGreaterThan(20 * 60);
  const taps = journal.observations.filter((o): o is TapV1 => o.type === 'tap.v1');
  const touched = own.legs.filter((leg) => leg.by === 'tap');
  // the run's own number is the drive's: whom of the places its navigator touches follows from it; the reload may cost one
  const targets = touchesOf(journal.header);
  expect(targets).toBeGreaterThan(0);
  expect(touched.length).toBeGreaterThanOrEqual(targets - 1);
  expect(taps.length).toBeGreaterThanOrEqual(touched.length);
  expect(taps.length).toBeLessThanOrEqual(targets);
  // nothing was skipped while the clock ran fast: the car's counts cover the course
  const { mmPerPulse } = journal.header.pack.wheel;
  expect(Math.abs((own.pulses * mmPerPulse) / 1000 / 61_000 - 1)).toBeLessThan(0.03);

  // the tablet's own run sheet, still without a connection
  await page.getByRole('link', { name: 'run sheet' }).click();
  const local = await readSheet(page);
  expect(local.finish).toContain(shownAtFinish.replace(/ .*/, ''));

  await context.setOffline(false);
  await page.goto(`/runs/${journal.header.runId}`);
  await expect(page.getByText('safe on server')).toBeVisible({ timeout: 60_000 });
  await expect(page.getByText(/^The cockpit showed the same at the finish/)).toBeVisible({ timeout: 60_000 });
  const derived = async () => runResponseSchema.parse(await (await page.request.get(`/api/runs/${journal.header.runId}`)).json());
  await expect.poll(async () => (await derived()).run.status, { timeout: 60_000 }).toBe('ready');
  const { sheet } = await derived();
  expect(sheet).toEqual(own);
  expect(sheet?.shown?.agrees).toBe(true);
  await page.reload();
  expect(await readSheet(page)).toEqual(local);
});
