import { beforeAll, describe, expect, it } from 'vitest';
import { highwayCourse, highwayPack, highwayRun, highwayTaps } from '#tests/e2e/support/highway-course.ts';
import { HIGHWAY_DRIVES, type HighwayRecording, readHighway } from '#tests/e2e/support/highway-recording.ts';
import { highwayTrack } from '#tests/e2e/support/highway-track.ts';
import { hasRecorded, recordedNote } from '#tests/e2e/support/recorded-data.ts';
import { recordingToSentences } from '#tests/e2e/support/recording-to-sentences.ts';
import { type HighwayReplay, readStream, replayHighway } from '#tests/unit/drive/highway-replay.ts';

/** Receiver's times at which the cars stood before their starts, and the part of each recording that is driven here. */
const DRIVES = [
  { rest: 15, fromS: 11.5, toS: 520 },
  { rest: 11.5, fromS: 10, toS: 500 },
] as const;
const HABITS = { leadMs: 80, scatterMs: 100 };
/** One wheel repeats within 0.15-0.40 % over the same gates (published beside the recordings). */
const WHEEL_REPEATS = 0.004;

const rms = (values: readonly number[]): number => Math.sqrt(values.reduce((sum, v) => sum + v * v, 0) / values.length);

function countAt({ encoder }: HighwayRecording, hostS: number): number {
  const after = encoder.findIndex((row) => row.hostS >= hostS);
  const [a, b] = [encoder[after - 1], encoder[after]];
  if (a === undefined || b === undefined) throw new Error('outside the recording');
  return a.c2 + ((b.c2 - a.c2) * (hostS - a.hostS)) / (b.hostS - a.hostS);
}

function prepare() {
  const recordings = HIGHWAY_DRIVES.map(readHighway);
  const tracks = recordings.map(highwayTrack);
  const [survey] = tracks;
  if (survey === undefined) throw new Error('no recording');
  const course = highwayCourse(survey, DRIVES[0].rest);
  const drives = recordings.map((recording, i) => {
    const { rest, fromS, toS } = DRIVES[i] ?? DRIVES[0];
    const run = highwayRun(recording, tracks[i] ?? survey, course, rest);
    // The counters and the box's clock wrap half-way.
    return { recording, run, fromS, ...readStream(recordingToSentences(recording, { fromS, toS, wrapAtS: 250 })) };
  });
  const [first] = drives;
  if (first === undefined) throw new Error('no drive');
  const hostAt = (id: string): number => first.run.passings.find((p) => p.checkpoint === id)?.hostS ?? Number.NaN;
  const mmPerPulse = 9_000_000 / (countAt(first.recording, hostAt('gorse')) - countAt(first.recording, hostAt('alder')));
  return { course, drives, mmPerPulse };
}

describe.skipIf(!hasRecorded)(`recorded highway drives${recordedNote}`, () => {
  let prepared: ReturnType<typeof prepare>;
  beforeAll(() => {
    prepared = prepare();
  }, 60_000);

  const drive = (index: number, seed: number | null): HighwayReplay => {
    const { course, drives, mmPerPulse } = prepared;
    const { run, arrived, fromS } = drives[index] ?? expect.fail('no such drive');
    const settings = { ...HABITS, mmPerPulse, scaleSigma: 0.003, scaleRule: 'ratio' as const };
    const pack = highwayPack(course, { ...settings, releaseMs: run.releaseUtcMs, stagedBehindM: run.stagedBehindM });
    const result = replayHighway({ pack, arrived, fromS, run, taps: seed === null ? [] : highwayTaps(run, course, { ...HABITS, seed }) });
    const places = result.errors.map((e) => `${e.error >= 0 ? '+' : ''}${e.error.toFixed(1)}`).join(' ');
    const { shown, truth, timeError } = result.finish;
    const how = seed === null ? 'no touches' : `touches ${seed}`;
    console.info(
      `drive ${index + 1}, ${how}: at places (m) ${places}; finish ${shown.toFixed(3)} s, true ${truth.toFixed(3)} s, late ${timeError.toFixed(2)} s`,
    );
    return result;
  };

  it('come through the sentence reader whole, over the wrap of counters and clock', () => {
    for (const { reader, arrived } of prepared.drives) {
      expect(reader.garbledLines).toBe(0);
      expect(reader.boxRestarts).toBe(0);
      const counts = arrived.flatMap(({ observation: o }) => (o.type === 'pulse.v1' && o.channel === 0 ? [o.count] : []));
      expect(counts.length).toBeGreaterThan(45_000);
      expect(Math.max(...counts.slice(1).map((c, i) => (counts[i] ?? 0) - c))).toBeGreaterThan(4e9);
    }
  });

  it.each([0, 1])(
    'drive %#: without touches the distance stays within what one wheel repeats',
    (index) => {
      const { errors, finish } = drive(index, null);
      expect(errors.map((e) => e.checkpoint)).toEqual([...prepared.course.gates.keys()]);
      expect(Math.abs(errors[0]?.error ?? 99)).toBeLessThan(0.5);
      for (const { printed, error } of errors.slice(1)) expect(Math.abs(error)).toBeLessThan(WHEEL_REPEATS * printed);
      expect(Math.abs(finish.shown - finish.truth)).toBeLessThan(1);
    },
    30_000,
  );

  it('with touches it is bound to the places, each leg within the wheel and the touch', () => {
    const [legs, finishes]: [number[], number[]] = [[], []];
    for (const index of [0, 1]) {
      for (const seed of [1, 2, 3]) {
        const { errors, finish } = drive(index, seed);
        legs.push(...errors.slice(2).map((e) => e.error));
        finishes.push(finish.shown - finish.truth);
      }
    }
    console.info(`RMS at places ${rms(legs).toFixed(2)} m; at the finish ${rms(finishes).toFixed(3)} s`);
    // A touch scatters by 0.1 s, 2.7 m at 27 m/s; a leg of 1.5 km adds what the wheel does in it.
    expect(rms(legs)).toBeLessThan(Math.hypot(2.7, 0.002 * 1500));
    expect(Math.max(...legs.map(Math.abs))).toBeLessThan(3 * 2.7 + WHEEL_REPEATS * 1500);
    expect(rms(finishes)).toBeLessThan(0.25);
  }, 60_000);
});
