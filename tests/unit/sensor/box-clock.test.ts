import { describe, expect, it } from 'vitest';
import { createRandom } from '#shared/drive/random.ts';
import { createBoxClock } from '#shared/sensor/box-clock.ts';

const WRAP = 2 ** 32;

/** Sends one line each 20 ms through a path that delays by 3 ms and 0..16 ms of polling, with spikes of up to 400 ms. */
function sendAll(options: { readonly ppm: number; readonly seconds: number; readonly boot: number; readonly seed: number }) {
  const random = createRandom(options.seed, 'path');
  const clock = createBoxClock();
  const rows: { readonly t: number; readonly error: number; readonly late: number }[] = [];
  for (let t = 0; t < options.seconds * 1e6; t += 20_000) {
    const boxUs = Math.floor(options.boot + t * (1 + options.ppm * 1e-6)) % WRAP;
    const late = 3000 + random.range(0, 16_000) + (random.unit() < 0.01 ? random.range(0, 400_000) : 0);
    rows.push({ t, error: clock.map(boxUs, t + late) - (t + 3000), late: late - 3000 });
  }
  return { rows, clock };
}

const rms = (values: readonly number[]): number => Math.sqrt(values.reduce((sum, v) => sum + v * v, 0) / values.length);

describe('box clock', () => {
  it.each([-80, -20, 0, 20, 80])('takes the jitter of the path out of the instants (box fast by %d ppm)', (ppm) => {
    const { rows, clock } = sendAll({ ppm, seconds: 1500, boot: 12_345, seed: 7 });
    const settled = rows.filter((row) => row.t > 5e6);
    // The path's own jitter is far larger than what is left.
    expect(rms(settled.map((row) => row.late))).toBeGreaterThan(10_000);
    expect(rms(settled.map((row) => row.error))).toBeLessThan(700);
    expect(Math.max(...settled.map((row) => Math.abs(row.error)))).toBeLessThan(2500);
    expect(clock.restarts).toBe(0);
  });

  it('goes on over the wrap at 2^32 microseconds', () => {
    const { rows, clock } = sendAll({ ppm: 10, seconds: 60, boot: WRAP - 30e6, seed: 3 });
    expect(Math.max(...rows.filter((row) => row.t > 5e6).map((row) => Math.abs(row.error)))).toBeLessThan(2500);
    expect(clock.restarts).toBe(0);
  });

  it('goes on over a silence longer than a whole wrap', () => {
    const clock = createBoxClock();
    for (let t = 0; t < 1e6; t += 20_000) clock.map(t, t + 1000);
    const later = 2 * WRAP + 5e6;
    expect(Math.abs(clock.map(later % WRAP, later + 1000) - (later + 1000))).toBeLessThan(1);
    expect(clock.restarts).toBe(0);
  });

  it('takes a busy second of a quickened practice for a delay, not for a restart', () => {
    const pace = 10;
    const quick = createBoxClock(pace);
    const real = createBoxClock();
    // half a second of the wire's time in which every line is up to 1.2 s late: 12 s of session time
    for (let t = 0; t < 60e6; t += 200_000) {
      const late = t > 30e6 && t < 42e6 ? 42e6 - t : 0;
      quick.map(t, t + late + 3000);
      real.map(t, t + late + 3000);
    }
    expect(quick.restarts).toBe(0);
    expect(Math.abs(quick.map(60e6, 60e6 + 3000) - (60e6 + 3000))).toBeLessThan(10);
    expect(real.restarts).toBeGreaterThan(0);
  });

  it.each([
    ['running for 10 s', 10e6],
    ['running for 40 minutes', 2400e6],
    ['running for 71 minutes', 4290e6],
  ])('starts afresh when a box %s restarts', (_, uptime) => {
    const clock = createBoxClock();
    for (let t = 0; t < 2e6; t += 20_000) clock.map((uptime - 2e6 + t) % WRAP, t + 1000);
    const back = 4e6;
    const first = clock.map(500_000, back + 1000);
    expect(clock.restarts).toBe(1);
    expect(first).toBe(back + 1000);
    expect(clock.map(520_000, back + 60_000)).toBeLessThan(back + 21_000 + 10);
  });

  it('starts afresh, a few seconds late, where a restart hides behind a small step', () => {
    const clock = createBoxClock();
    for (let t = 0; t < 0.9e6; t += 20_000) clock.map(t, t + 1000);
    let last = 0;
    for (let t = 0; t < 12e6; t += 20_000) last = clock.map(100_000 + t, 5e6 + t + 1000);
    expect(clock.restarts).toBe(1);
    expect(Math.abs(last - (5e6 + 12e6 - 20_000 + 1000))).toBeLessThan(1000);
  });

  it('keeps its map through a stall that is caught up in a burst', () => {
    const clock = createBoxClock();
    for (let t = 0; t < 10e6; t += 20_000) clock.map(t, t + 1000);
    const stalled = [...Array(150).keys()].map((i) => 10e6 + i * 20_000);
    for (const t of stalled) expect(Math.abs(clock.map(t, 13e6 + 1000) - (t + 1000))).toBeLessThan(400);
    expect(clock.restarts).toBe(0);
  });
});
