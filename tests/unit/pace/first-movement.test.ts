import { describe, expect, it } from 'vitest';
import { createRandom } from '#shared/drive/random.ts';
import type { Motion } from '#tests/unit/pace/drives.ts';
import { records, roll } from '#tests/unit/pace/faulty-sensor.ts';

/** Errors of the first movement in seconds over seeded launches: pull, place within the pulse and within a record at random. */
function errors(
  hz: number,
  metresPerPulse: number,
  wheel: (a: number, spin: number) => (u: number) => number,
): { mean: number; rms: number } {
  const random = createRandom(Math.round(hz + 1000 * metresPerPulse), 'launch');
  let [sum, squares] = [0, 0];
  const runs = 80;
  for (let i = 0; i < runs; i++) {
    const turned = wheel(random.range(1.5, 4), random.range(5, 20));
    const begin = 5 + random.unit();
    const motion: Motion = { metresAt: (t) => (t > begin ? turned(t - begin) : 0) };
    const o = roll(records(motion, 13, { hz, metresPerPulse, phase: random.unit() }), metresPerPulse);
    const launch = o.launches.done[0];
    if (launch === undefined) throw new Error('no launch');
    expect(launch.first.within).toBeGreaterThanOrEqual(0);
    expect(launch.first.within).toBeLessThanOrEqual(metresPerPulse);
    const error = (launch.first.at - 50_000_000) / 1e6 - begin;
    sum += error;
    squares += error * error;
  }
  return { mean: sum / runs, rms: Math.sqrt(squares / runs) };
}

const grip = (a: number) => (u: number) => (a * u * u) / 2;
/** Wheels spin 5 to 20 m away, as a share of the way up to 12 m/s. */
const spinning = (a: number, spin: number) => (u: number) => {
  const [d, over] = [(a * u * u) / 2, 72 / a];
  return d * (1 + spin / over) - Math.max(0, d - over) * (spin / over);
};
/** All at once: the wheel runs away from the car by several m/s within 0.3 s, and it dies down over 1.5 s. */
const bursting = (a: number, spin: number) => (u: number) => {
  const [rise, fall] = [0.3, 1.5];
  const slipped = fall * (1 - Math.exp(-u / fall)) - rise * (1 - Math.exp(-u / rise));
  return (a * u * u) / 2 + (spin * slipped) / (fall - rise);
};

describe('first movement, extrapolated back to rest', () => {
  const pulses = [1 / 20_180, 0.05, 0.25, 0.5, 1, 2];

  it.each(pulses)('pulses of %d m: the mean is within 0.05 s at 20 to 100 records a second, spin or none', (metresPerPulse) => {
    for (const hz of [20, 50, 100]) {
      for (const wheel of [grip, spinning]) {
        const { mean, rms } = errors(hz, metresPerPulse, wheel);
        expect(Math.abs(mean)).toBeLessThan(0.05);
        expect(rms).toBeLessThan(metresPerPulse <= 0.5 || hz > 20 ? 0.06 : 0.12);
      }
    }
  });

  it.each([2, 5, 10])('%d records a second: still within a tenth on the mean', (hz) => {
    for (const metresPerPulse of [1 / 20_180, 0.25]) expect(Math.abs(errors(hz, metresPerPulse, grip).mean)).toBeLessThan(0.1);
  });

  it('wheels that burst into spin do not pull it far before the last record at rest, where pulses are many', () => {
    expect(errors(100, 1 / 20_180, bursting).rms).toBeLessThan(0.03);
    expect(errors(100, 0.05, bursting).rms).toBeLessThan(0.06);
    expect(errors(50, 0.25, bursting).rms).toBeLessThan(0.2);
  });
});
