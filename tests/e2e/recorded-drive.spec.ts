import type { Page } from 'playwright/test';
import type { JournalText } from '#shared/journal/ndjson.ts';
import type { Observation, PulseV1 } from '#shared/journal/observation.ts';
import { replay } from '#shared/journal/replay.ts';
import { begin, readout, step } from '#shared/pace/run.ts';
import { runSheet } from '#shared/pace/sheet.ts';
import { writeButton } from '#shared/sensor/sentence-writer.ts';
import { micros } from '#shared/units.ts';
import { expect, test } from './fixtures.ts';
import { beginPractice, exportJournal, hold, signIn } from './support/cockpit-pages.ts';
import { scriptSerial } from './support/fake-serial-script.ts';
import { type PlayedDrive, playedDrives } from './support/highway-drive.ts';
import { hasRecorded, recordedNote } from './support/recorded-data.ts';
import { openSerialFeeder } from './support/serial-feeder.ts';
import { stageEvent } from './support/stage-recorded-event.ts';
import type { TimedText } from './support/timed-text.ts';

/**
 * Real input through the real path: bytes of a recorded drive into the serial worker, observations into the engine, presses of
 * the wired button, all at ten times the pace through the session clock; then the official distance against the RTK track.
 */
const RATE = 10;
const HABITS = { leadMs: 80, scatterMs: 100 };
/** One wheel repeats within 0.15-0.40 % over the same gates (published beside the recordings). */
const WHEEL_REPEATS = 0.004;
/** A press scatters by 0.1 s: 3 sigma at 30 m/s. */
const TOUCH_M = 3 * 0.1 * 30;

test.skip(!hasRecorded, `the recordings are not beside this checkout${recordedNote}`);

/** Waits on the page for the official clock to show a new second; gives that second and when it came, by the wall clock. */
async function officialSecond(page: Page): Promise<{ readonly second: number; readonly wallMs: number }> {
  return page.evaluate(async () => {
    const read = (): string => document.querySelector('.grid-now')?.textContent?.match(/\d\d:\d\d:\d\d/)?.[0] ?? '';
    const first = read();
    while (read() === first) await new Promise(requestAnimationFrame);
    const [h = 0, m = 0, s = 0] = read().split(':').map(Number);
    return { second: h * 3600 + m * 60 + s, wallMs: Date.now() };
  });
}

async function typedRelease(page: Page, second: number): Promise<void> {
  const digits = [3600, 60, 1].map((unit, i) => String(Math.floor(second / unit) % (i === 0 ? 24 : 60)).padStart(2, '0')).join('');
  await page.getByRole('button', { name: /^release/ }).click();
  for (const digit of digits) await page.getByRole('button', { name: digit, exact: true }).click();
  await page.getByRole('button', { name: 'set', exact: true }).click();
}

/**
 * The stream with the navigator's presses of the wired button in it, stamped by the box as the pulses are. Touches on the glass
 * would meet the delay of this rig's wire, ten times as long as a real one's; how exactly they are stamped is tested elsewhere.
 */
function withPresses(drive: PlayedDrive, seed: number, utcShiftMs: number): TimedText[] {
  const stream = [...drive.sentences(utcShiftMs)];
  drive.taps({ seed, ...HABITS }).forEach(({ afterMs }, i) => {
    const after = stream.findIndex(({ atMs }) => atMs > afterMs);
    const before = stream.slice(0, after).findLast(({ text }) => text.includes('$PEVLW,0'));
    if (before === undefined) throw new Error('no pulse before the press');
    const boxUs = Number(/\$PEVLW,0,\d+,(\d+)\*/.exec(before.text)?.[1]) + (afterMs - before.atMs) * 1000;
    stream.splice(after, 0, { atMs: afterMs, text: writeButton(0, i + 1, Math.round(boxUs) % 2 ** 32) });
  });
  // the box says once, while the car stands, that nothing was pressed yet
  const first = Number(/\$PEVLW,0,\d+,(\d+)\*/.exec(stream.find(({ text }) => text.includes('$PEVLW,0'))?.text ?? '')?.[1]);
  return [{ atMs: 0, text: writeButton(0, 0, first) }, ...stream];
}

/**
 * Session instants of the drive's own, by the pulses around them, which carry both clocks. What this rig's wire delays, ten times
 * as long as a real one and longer on a busy machine, moves pulses and places alike.
 */
function sessionInstants(drive: PlayedDrive, observations: readonly { readonly type: string }[]): (afterMs: number) => number {
  const first = /\$PEVLW,0,\d+,(\d+)\*/.exec(drive.sentences(0).find(({ text }) => text.includes('$PEVLW,0'))?.text ?? '');
  const box = Number(first?.[1]);
  const pulses = observations
    .filter((o): o is PulseV1 => o.type === 'pulse.v1' && (o as PulseV1).channel === 0)
    .map((o) => ({ at: o.at, afterUs: (o.boxUs - box + 2 ** 32) % 2 ** 32 }))
    .sort((a, b) => a.afterUs - b.afterUs);
  return (afterMs) => {
    const i = pulses.findIndex(({ afterUs }) => afterUs >= afterMs * 1000);
    const [a, b] = [pulses[i - 1], pulses[i]];
    if (a === undefined || b === undefined) return Number.NaN;
    return a.at + ((b.at - a.at) * (afterMs * 1000 - a.afterUs)) / (b.afterUs - a.afterUs);
  };
}

for (const [index, seed] of [
  [0, 4],
  [1, 5],
] as const) {
  test(`recorded drive ${index + 1} through the serial port keeps official distance within what the wheel repeats`, async ({
    page,
    context,
    served,
  }) => {
    test.setTimeout(240_000);
    const drive = playedDrives()[index];
    await scriptSerial(context);
    const today = Math.floor(Date.now() / 1000) * 1000;
    const pack = drive.pack({ releaseMs: today + 3_600_000, ...HABITS, scaleRule: 'ratio' });
    const settings = { ...pack.settings, tapLeadMs: { glass: 0, wired: HABITS.leadMs } };
    const { attemptId } = await stageEvent(served.databaseUrl, 'navigator@evenline.example', { ...pack, settings });
    await signIn(page);
    await page.goto(`/plan/${attemptId}`);
    await page.getByRole('button', { name: 'store pack on this tablet' }).click();
    await expect(page.getByRole('table').first()).toBeVisible();
    await page.goto(`/cockpit/${attemptId}`);
    const feeder = await openSerialFeeder(context, `${served.origin}/favicon.svg`);
    await page.bringToFront();
    await beginPractice(page, RATE);
    await page.getByRole('button', { name: 'pulse box' }).click();

    const { second, wallMs } = await officialSecond(page);
    const releaseSecond = second + 120;
    const releaseWallMs = wallMs + 120_000 / RATE;
    const streamWallMs = releaseWallMs - drive.releaseAfterMs / RATE;
    await typedRelease(page, releaseSecond);
    const sentences = withPresses(drive, seed, today - drive.utcAtStartMs);
    await new Promise((resolve) => setTimeout(resolve, streamWallMs - Date.now()));
    const stream = feeder.stream(sentences, { rate: RATE });

    await expect(page.getByRole('region', { name: 'next checkpoint' })).toBeVisible({ timeout: 30_000 });
    await expect(page.getByText(/^slow|no stop board|unofficial/i).first()).toBeVisible({ timeout: 90_000 });
    stream.stop();
    await hold(page, 'end the run');
    const journal = await exportJournal(page);
    const sheet = runSheet(replay(journal.header, journal.observations), journal.header);

    const instantOf = sessionInstants(drive, journal.observations);
    const truth = new Map(drive.passings.map(({ checkpoint, afterMs }) => [checkpoint, instantOf(afterMs)]));
    const errors = distancesShown(journal, truth);
    const line = truth.get('finish') ?? Number.NaN;
    const finishErrorS = ((sheet.legs.find((leg) => leg.checkpointId === 'finish')?.atUs ?? Number.NaN) - line) / 1e6;
    console.info(
      `drive ${index + 1}: at places, before the touch (m) ${errors.map((e) => e.error.toFixed(1)).join(' ')}; ` +
        `finish ${finishErrorS.toFixed(3)} s from the RTK track; ${sheet.pulses} pulses, ${sheet.observations} observations; ` +
        `taps ${sheet.taps.map((tap) => tap.verdict).join(' ')}`,
    );
    expect(sheet.taps.filter((tap) => tap.verdict === 'used')).toHaveLength(sheet.taps.length);
    expect(sheet.taps.length).toBe(7);
    let anchored = 0;
    for (const { printed, error } of errors.slice(1)) {
      expect(Math.abs(error)).toBeLessThan(TOUCH_M + WHEEL_REPEATS * (printed - anchored));
      anchored = printed;
    }
    expect(Math.abs(finishErrorS)).toBeLessThan(0.4);
  });
}

/** Official distance that the engine showed at each true passing, before any touch there. */
function distancesShown({ header, observations }: JournalText, truth: ReadonlyMap<string, number>) {
  const state = begin(header.pack);
  const shown: { readonly checkpoint: string; readonly printed: number; readonly error: number }[] = [];
  const due = [...truth].sort((a, b) => a[1] - b[1]);
  for (const observation of observations) {
    const { at } = observation as Observation;
    for (let next = due[0]; next !== undefined && next[1] <= at && observation.type === 'pulse.v1'; next = due[0]) {
      due.shift();
      const place = header.pack.courseBook.checkpoints.find((c) => c.id === next?.[0]);
      const printed = Number(place?.at.text) * 1000;
      shown.push({ checkpoint: next[0], printed, error: readout(state, micros(next[1])).distance - printed });
    }
    step(state, observation);
  }
  return shown;
}
