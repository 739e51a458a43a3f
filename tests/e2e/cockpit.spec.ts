import type { EpochV1, TapV1 } from '#shared/journal/observation.ts';
import { expect, test } from './fixtures.ts';
import { beginPractice, expectAccessible, exportJournal, hold, openCockpit, release } from './support/cockpit-pages.ts';

/** `performance` stamp of an instant in the journal's first epoch, ms. */
const stampOf = (epoch: EpochV1, at: number, rate: number): number => epoch.mono + (at - epoch.at) / (1000 * rate);

test('grid check and run screens are accessible by day and by night, in every shape of tablet', async ({ page }) => {
  await openCockpit(page);
  await expectAccessible(page);
  await beginPractice(page, 10);
  for (const theme of ['night', 'noon', 'dusk', 'red']) {
    await page.evaluate((name) => document.documentElement.setAttribute('data-theme', name), theme);
    await expectAccessible(page);
  }
  await page.getByRole('button', { name: /^release/ }).click();
  await expectAccessible(page);
  await page.getByRole('button', { name: 'back' }).click();
  await release(page);
  for (const [width, height] of [
    [1280, 800],
    [1024, 768],
    [800, 1280],
  ] as const) {
    await page.setViewportSize({ width, height });
    await expectAccessible(page);
    const cut = await page.evaluate(() =>
      [...document.querySelectorAll<HTMLElement>('button, dd, h2, .band-figure, .band-word, .floor-figure, .floor-schedule')]
        .filter((e) => {
          const { left, right, top, bottom } = e.getBoundingClientRect();
          return left < -1 || top < -1 || right > innerWidth + 1 || bottom > innerHeight + 1 || e.scrollWidth > e.clientWidth + 1;
        })
        .map((e) => `${e.className} ${e.textContent}`),
    );
    expect(cut, `cut off at ${width}x${height}`).toEqual([]);
  }
  await hold(page, 'Stopped');
  await expect(page.getByText(/^Car .*, stopped at/)).toBeVisible();
  await expectAccessible(page);
});

test('a touch is journalled within 2 ms of its own instant on a slow and busy tablet', async ({ page }) => {
  await openCockpit(page);
  await beginPractice(page, 1);
  const devtools = await page.context().newCDPSession(page);
  await devtools.send('Emulation.setCPUThrottlingRate', { rate: 6 });
  await page.evaluate(() => {
    const seen: { stamp: number; handled: number }[] = [];
    Object.assign(globalThis, { seen });
    addEventListener('pointerdown', (event) => seen.push({ stamp: event.timeStamp, handled: performance.now() }), true);
    // A task of 60 ms, again and again.
    const burn = (): void => {
      const end = performance.now() + 60;
      while (performance.now() < end);
      setTimeout(burn, 20);
    };
    burn();
  });
  const box = await page.getByRole('button', { name: /^touch / }).boundingBox();
  if (box === null) throw new Error('no button');
  const at = { x: box.x + box.width / 2, y: box.y + box.height / 2, button: 'left', clickCount: 1 } as const;
  for (let i = 0; i < 12; i++) {
    await devtools.send('Input.dispatchMouseEvent', { type: 'mousePressed', ...at });
    await devtools.send('Input.dispatchMouseEvent', { type: 'mouseReleased', ...at });
  }
  const seen = await page.evaluate(() => (globalThis as unknown as { seen: { stamp: number; handled: number }[] }).seen);
  expect(seen).toHaveLength(12);
  await devtools.send('Emulation.setCPUThrottlingRate', { rate: 1 });
  await release(page);
  await hold(page, 'Stopped');
  await hold(page, 'void');
  const { header, observations } = await exportJournal(page);
  const epoch = observations.find((o): o is EpochV1 => o.type === 'epoch.v1');
  const taps = observations.filter((o): o is TapV1 => o.type === 'tap.v1');
  if (epoch === undefined) throw new Error('no epoch');
  const off = taps.map((tap, i) => Math.abs(stampOf(epoch, tap.at, header.clockRate) - (seen[i]?.stamp ?? Number.NaN)));
  expect(off).toHaveLength(12);
  expect(Math.max(...off)).toBeLessThanOrEqual(2);
  // The handler itself was late, or the test would prove nothing.
  expect(Math.max(...seen.map(({ stamp, handled }) => handled - stamp))).toBeGreaterThan(5);
});

test('a killed page comes back in the run, which goes on to the finish and is told the same afterwards', async ({ page, context }) => {
  test.setTimeout(180_000);
  await openCockpit(page);
  await page.evaluate(async () => void (await navigator.serviceWorker.ready));
  await context.setOffline(true);
  await beginPractice(page, 30);
  await release(page);
  const distance = async (): Promise<number> => Number.parseFloat((await page.locator('.panel-here dd').first().textContent()) ?? '');
  await expect.poll(distance, { timeout: 30_000 }).toBeGreaterThan(10);
  const before = await distance();
  await page.reload();
  await expect(page.getByRole('region', { name: 'next checkpoint' })).toBeVisible();
  const after = await distance();
  // Sensors are committed every quarter of a second: at this rate of the clock that is 0.4 km of road.
  expect(after).toBeGreaterThan(before - 0.5);
  await expect.poll(distance, { timeout: 30_000 }).toBeGreaterThan(after + 3);
  await expect(page.getByText(/^slow/)).toBeVisible({ timeout: 90_000 });
  const shown = (await page.locator('.finish-own dd').last().textContent()) ?? '';
  await hold(page, 'end the run');
  const figure = (await page.locator('.shell-figure').textContent()) ?? '';
  expect(shown.replace(/\s+/g, ' ')).toContain(figure.trim().replace(/\s+/g, ' '));
  const { observations } = await exportJournal(page);
  expect(observations.map((o) => o.seq)).toEqual(observations.map((_, i) => i));
  const lives = observations.filter((o): o is EpochV1 => o.type === 'epoch.v1').map((epoch) => epoch.n);
  expect([...new Set(lives)]).toEqual([0, 1]);
});

test('a second window reads and does not touch', async ({ page, context }) => {
  await openCockpit(page);
  await beginPractice(page, 10);
  await release(page);
  const second = await context.newPage();
  await second.goto(page.url());
  await expect(second.getByText('reading from the other window')).toBeVisible();
  await expect(second.getByRole('button', { name: 'Stopped' })).toBeDisabled();
});
