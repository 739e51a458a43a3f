import { beforeAll, describe, expect, it } from 'vitest';
import { playedDrives } from '#tests/e2e/support/highway-drive.ts';
import { hasRecorded, recordedNote } from '#tests/e2e/support/recorded-data.ts';
import { type HighwayReplay, readStream, replayHighway } from '#tests/unit/drive/highway-replay.ts';

const HABITS = { leadMs: 80, scatterMs: 100 };
/** One wheel repeats within 0.15-0.40 % over the same gates (published beside the recordings). */
const WHEEL_REPEATS = 0.004;

const rms = (values: readonly number[]): number => Math.sqrt(values.reduce((sum, v) => sum + v * v, 0) / values.length);

const prepare = () => playedDrives().map((played) => ({ played, ...readStream(played.sentences(0)) }));

describe.skipIf(!hasRecorded)(`recorded highway drives${recordedNote}`, () => {
  let prepared: ReturnType<typeof prepare>;
  beforeAll(() => {
    prepared = prepare();
  }, 60_000);

  const drive = (index: number, seed: number | null): HighwayReplay => {
    const { played, arrived } = prepared[index] ?? expect.fail('no such drive');
    const pack = played.pack({ ...HABITS, releaseMs: played.utcAtStartMs + played.releaseAfterMs, scaleRule: 'ratio' });
    const result = replayHighway({ pack, arrived, drive: played, taps: seed === null ? [] : played.taps({ ...HABITS, seed }) });
    const places = result.errors.map((e) => `${e.error >= 0 ? '+' : ''}${e.error.toFixed(1)}`).join(' ');
    const { shown, truth, timeError } = result.finish;
    const how = seed === null ? 'no touches' : `touches ${seed}`;
    console.info(
      `drive ${index + 1}, ${how}: at places (m) ${places}; finish ${shown.toFixed(3)} s, true ${truth.toFixed(3)} s, late ${timeError.toFixed(2)} s`,
    );
    return result;
  };

  it('come through the sentence reader whole, over the wrap of counters and clock', () => {
    for (const { reader, arrived } of prepared) {
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
      expect(errors.map((e) => e.checkpoint)).toEqual([...(prepared[index]?.played.course.gates.keys() ?? [])]);
      expect(Math.abs(errors[0]?.error ?? 99)).toBeLessThan(0.5);
      for (const { printed, error } of errors.slice(1)) expect(Math.abs(error)).toBeLessThan(WHEEL_REPEATS * printed);
      expect(Math.abs(finish.shown - finish.truth)).toBeLessThan(1);
    },
    30_000,
  );

  it('with touches it is bound to the places, each leg within the wheel and the touch', () => {
    const [legs, finishes]: [number[], number[]] = [[], []];
    for (const index of [0, 1]) {
      for (const seed of [1, 2]) {
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
