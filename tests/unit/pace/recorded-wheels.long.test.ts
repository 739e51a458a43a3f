import { existsSync, readFileSync } from 'node:fs';
import { describe, expect, it } from 'vitest';
import { createRandom } from '#shared/drive/random.ts';
import type { PulseV1 } from '#shared/journal/observation.ts';
import { merged, metresOf, roll } from '#tests/unit/pace/faulty-sensor.ts';

/**
 * Two rear wheel encoders of a van at 100 Hz (recordings that nobody on this project made; skipped where they are absent): nothing
 * is filled that was counted, what is taken out is put back, and left and right agree to the end. c1 runs negative.
 */
const DATA = new URL('../../../../shared/data/wheel_gnss/', import.meta.url);
const skipped = existsSync(DATA) ? '' : ' (skipped: the recordings are not beside this repository)';
const COUNT = 1 / 20_180;
const WHEELS = { channel: 0, secondChannel: 1 };

/** Every nth record; `coarse` counts make one pulse. */
function recorded(file: string, column: 1 | 2, channel: number, nth = 1, coarse = 1): PulseV1[] {
  const rows = readFileSync(new URL(`${file}_encoder.csv`, DATA), 'utf8')
    .split('\n')
    .slice(2);
  const list: PulseV1[] = [];
  rows.forEach((row, i) => {
    if (row === '' || i % nth !== 0) return;
    const cells = row.split(',').map(Number);
    const at = Math.round((cells[0] as number) * 1e6) + 10_000_000;
    list.push({ type: 'pulse.v1', at, channel, count: Math.floor((cells[column] as number) / coarse) >>> 0, boxUs: at % 2 ** 32, seq: i });
  });
  return list;
}

/** The same, with nothing counted while any of the gaps lasts. */
function without(list: readonly PulseV1[], gaps: readonly (readonly [from: number, to: number])[]): PulseV1[] {
  let [missed, last] = [0, 0];
  return list.map((o, i) => {
    if (i > 0 && gaps.some(([from, to]) => o.at > from && o.at <= to)) missed += (o.count - last) | 0;
    last = o.count;
    return { ...o, count: (o.count - missed) >>> 0 };
  });
}

describe.skipIf(!existsSync(DATA))(`recorded wheels${skipped}`, () => {
  const drives = ['highway/2024-07-11-12-41-42', 'highway/2024-07-11-14-34-05'];

  const wheels = drives.flatMap((file) => ([1, 2] as const).map((column) => [file, column] as const));

  it.each(wheels)('%s, c%d: nothing is filled and nothing lost, at 100 to 2 Hz, down to one pulse a quarter of a metre', (file, column) => {
    for (const [nth, coarse] of [
      [1, 1],
      [5, 400],
      [50, 1],
      [50, 5_045],
      [1, 5_045],
    ] as const) {
      const o = roll(recorded(file, column, 0, nth, coarse), coarse * COUNT);
      expect(o.fills.count + o.losses.length).toBe(0);
      expect(o.w).toBe(o.wheel.total);
      // 12.87 and 12.88 km by the receiver; wheels within 0.4 %, and the encoders ran a little longer
      expect(Math.abs(metresOf(o, coarse * COUNT) - 12_876)).toBeLessThan(0.006 * 12_876);
      expect(o.wheel.sign).toBe(column === 1 ? -1 : 1);
    }
  });

  it.each(drives)('%s: gaps of 0.1 to 1.9 s cut into it are filled to within a twentieth of what was cut', (file) => {
    const random = createRandom(7, 'cuts');
    const whole = recorded(file, 2, 0);
    const span = (whole.at(-1) as PulseV1).at - (whole[0] as PulseV1).at;
    const gaps = Array.from({ length: 12 }, (_, i): [number, number] => {
      const from = (whole[0] as PulseV1).at + span * ((i + 1) / 14);
      return [from, from + random.range(0.1, 1.9) * 1e6];
    });
    const truth = metresOf(roll(whole, COUNT), COUNT);
    const cut = roll(without(whole, gaps), COUNT);
    const taken = truth - cut.wheel.total * COUNT;
    expect(taken).toBeGreaterThan(100);
    expect(cut.fills.count).toBeGreaterThanOrEqual(11);
    expect(Math.abs(metresOf(cut, COUNT) - truth)).toBeLessThan(0.05 * taken);
  });

  it.each(drives)('%s: left and right agree, and one stands in for the other to 0.4 percent', (file) => {
    const [left, right] = [recorded(file, 1, 1), recorded(file, 2, 0)];
    const o = roll(merged(right, left), COUNT, WHEELS);
    expect(o.second.pair.disagreements).toBe(0);
    expect(o.second.standIns).toBe(0);
    expect(Math.abs(Math.abs(o.second.pair.ratio as number) - 1)).toBeLessThan(0.004);
    const from = (right[0] as PulseV1).at + 250_000_000;
    const dead = roll(merged(without(right, [[from, from + 120_000_000]]), left), COUNT, WHEELS);
    expect(dead.second.standIns).toBe(1);
    expect(dead.second.standInMetres).toBeGreaterThan(2_000);
    expect(Math.abs(metresOf(dead, COUNT) - metresOf(o, COUNT))).toBeLessThan(0.004 * dead.second.standInMetres);
  });
});
