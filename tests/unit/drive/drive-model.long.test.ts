import { describe, expect, it, vi } from 'vitest';
import { createDrive } from '#shared/drive/drive-model.ts';
import type { DriveOptions } from '#shared/drive/drive-options.ts';
import type { NewObservation } from '#shared/journal/observation.ts';
import { BASE_PACK, SHORT_PACK } from '#tests/unit/drive/base-pack.ts';
import { type OfType, ofType } from '#tests/unit/sensor/reading.ts';

/** Whole drives are many steps; a busy machine needs its time. */
vi.setConfig({ testTimeout: 60_000 });

const RELEASE = 5e6;
const WHOLE_RUN = 2600e6;
const WRAP = 2 ** 32;

function drive(seed: number, options: Partial<DriveOptions> = {}, until = WHOLE_RUN) {
  const model = createDrive({ pack: BASE_PACK, seed, releaseAt: RELEASE, ...options });
  return { model, observations: model.advance(until, null) };
}

const passing = (model: ReturnType<typeof createDrive>, id: string): number =>
  model.passings().find((p) => p.checkpoint === id)?.at ?? Number.NaN;
const mean = (values: readonly number[]): number => values.reduce((sum, v) => sum + v, 0) / values.length;
const sigma = (values: readonly number[]): number => Math.sqrt(mean(values.map((v) => (v - mean(values)) ** 2)));
/** Pulses between two of a channel's observations; counters wrap. */
const turned = (from: OfType<'pulse.v1'>, to: OfType<'pulse.v1'>): number => (to.count - from.count + WRAP) % WRAP;

describe('drive model', () => {
  it('is the same for the same seed, however often it is asked, and another for another', () => {
    const whole = drive(11, {}, 300e6).observations;
    const sliced = createDrive({ pack: BASE_PACK, seed: 11, releaseAt: RELEASE });
    const parts: NewObservation[] = [];
    for (let t = 0; t < 300e6; t += 137_777) parts.push(...sliced.advance(t, null));
    parts.push(...sliced.advance(300e6, null));
    expect(parts).toEqual(whole);
    expect(drive(12, {}, 300e6).observations).not.toEqual(whole);
  });

  it('never breaks the limits of the car, the zones and the cap, and stands at the stop board', () => {
    const { model } = drive(3);
    const zones = [
      [18_000, 19_000, 35],
      [40_000, 40_600, 28],
      [70_000, 72_000, 40],
      [100_000, 100_800, 32],
    ] as const;
    let last = model.truth(0);
    for (let t = 10_000; t < WHOLE_RUN - 1e6; t += 20_000) {
      const now = model.truth(t);
      const a = (now.speed - last.speed) / 0.02;
      if (a > 2.5 + 1e-6 || a < -4 - 1e-6) expect.fail(`acceleration ${a} m/s² at ${t}`);
      if (now.distance < last.distance || now.speed > 58) expect.fail(`distance or cap at ${t}`);
      for (const [from, to, limit] of zones) {
        if (now.distance > from && now.distance < to && now.speed > limit + 0.1)
          expect.fail(`${now.speed} m/s in the zone at ${now.distance} m`);
      }
      last = now;
    }
    expect(last.speed).toBe(0);
    expect(121_500 - last.distance).toBeGreaterThan(0);
    expect(121_500 - last.distance).toBeLessThan(10);
  });

  it('stands behind the line, reacts to the release, and finishes close to the target by its own true distance', () => {
    const errors: number[] = [];
    const reactions: number[] = [];
    for (let seed = 1; seed <= 40; seed += 1) {
      const { model } = drive(seed, { pack: SHORT_PACK, navigator: null }, 270e6);
      expect(model.truth(RELEASE)).toEqual({ distance: -3, speed: 0 });
      reactions.push(((model.movedAt ?? Number.NaN) - RELEASE) / 1e6);
      errors.push((passing(model, 'finish') - RELEASE) / 1e6 - 240);
    }
    expect(Math.min(...reactions)).toBeGreaterThanOrEqual(0.15);
    expect(mean(reactions)).toBeCloseTo(0.4, 1);
    // A driver who knows the true distance is left with his own unsteadiness and the surveyed finish (2 m, 40 ms).
    expect(Math.sqrt(mean(errors.map((e) => e * e)))).toBeLessThan(0.15);
    expect(sigma(errors)).toBeGreaterThan(0.01);
  });

  it('has a wheel scale of its own that grows as the tyre warms', () => {
    const [cold, warm]: [number[], number[]] = [[], []];
    for (let seed = 1; seed <= 40; seed += 1) {
      const { model, observations } = drive(seed, { pack: SHORT_PACK }, 240e6);
      const pulses = ofType(observations, 'pulse.v1');
      const at = (t: number): OfType<'pulse.v1'> => pulses.findLast((p) => p.at <= t) ?? expect.fail('no pulse');
      const growth = (from: number, to: number): number => {
        const [a, b] = [at(from), at(to)];
        return ((model.truth(b.at).distance - model.truth(a.at).distance) * 1000) / turned(a, b) / SHORT_PACK.wheel.mmPerPulse - 1;
      };
      cold.push(growth(40e6, 80e6));
      warm.push(growth(190e6, 230e6));
    }
    const factors = warm;
    expect(mean(warm) - mean(cold)).toBeGreaterThan(0.0003);
    expect(mean(warm) - mean(cold)).toBeLessThan(0.002);
    // Pack scale 0.3 % and driven line 0.1 % around a mean of tyre growth by heat and speed.
    expect(sigma(factors)).toBeGreaterThan(0.0015);
    expect(sigma(factors)).toBeLessThan(0.006);
    expect(mean(factors)).toBeGreaterThan(0.0005);
  });

  it('reports whole pulses with the instant of the newest, by a box clock that wraps', () => {
    const { model, observations } = drive(5, {}, 200e6);
    const pulses = ofType(observations, 'pulse.v1');
    const odd = pulses.slice(1).filter((to, i) => {
      const from = pulses[i] ?? to;
      const boxStep = (to.boxUs - from.boxUs + WRAP) % WRAP;
      return !(to.at > from.at && turned(from, to) < 20 && Math.abs(boxStep - (to.at - from.at)) < 200);
    });
    expect(odd).toEqual([]);
    const moving = pulses.filter((p) => p.at > 100e6 && p.at < 101e6);
    expect(moving.length).toBeGreaterThanOrEqual(48);
    // Between two edges of the wheel lie whole pulses: distance by count is exact at each, not a pulse too short.
    const [a, b] = [moving[0] ?? expect.fail(), moving.at(-1) ?? expect.fail()];
    const perPulse = (model.truth(b.at).distance - model.truth(a.at).distance) / turned(a, b);
    expect(Math.abs(perPulse / 0.5 - 1)).toBeLessThan(0.01);
    expect(ofType(observations, 'pulse.v1').filter((p) => p.at < RELEASE).length).toBeGreaterThanOrEqual(4);
  });

  it('gives fixes late, with noise of the right size', () => {
    const { model, observations } = drive(6, { utcMsAtZero: Date.UTC(2026, 5, 1) }, 900e6);
    const fixes = ofType(observations, 'fix.v1');
    expect(fixes.length / 900).toBeCloseTo(5, 1);
    const delays = fixes.map((f) => f.at / 1000 - ((f.utcMs ?? 0) - Date.UTC(2026, 5, 1)));
    expect(Math.min(...delays)).toBeGreaterThanOrEqual(149);
    expect(Math.max(...delays)).toBeLessThanOrEqual(181);
    const errors = fixes
      .filter((f) => f.at > 60e6)
      .map((f) => (f.speed ?? 0) - model.truth(((f.utcMs ?? 0) - Date.UTC(2026, 5, 1)) * 1000).speed);
    expect(sigma(errors)).toBeGreaterThan(0.06);
    expect(sigma(errors)).toBeLessThan(0.1);
  });

  it('stops for a red flag and goes on', () => {
    const model = createDrive({ pack: BASE_PACK, seed: 8, releaseAt: RELEASE });
    model.advance(120e6, null);
    model.advance(150e6, { at: 120e6, holdSpeed: null, toRelease: null, stopped: true });
    expect(model.truth(149e6).speed).toBe(0);
    model.advance(190e6, null);
    expect(model.truth(189e6).speed).toBeGreaterThan(45);
  });

  it('follows a shown speed and a release that is told on the way', () => {
    const model = createDrive({ pack: BASE_PACK, seed: 9 });
    model.advance(10e6, null);
    expect(model.movedAt).toBeNull();
    model.advance(15e6, { at: 10e6, holdSpeed: 40, toRelease: 8 });
    model.advance(90e6, { at: 15e6, holdSpeed: 40, toRelease: 3 });
    expect((model.movedAt ?? 0) / 1e6).toBeCloseTo(18.4, 0);
    const speeds = Array.from({ length: 40 }, (_, i) => model.truth(45e6 + i * 1e6).speed);
    expect(mean(speeds)).toBeCloseTo(40, 0);
    expect(sigma(speeds)).toBeGreaterThan(0.1);
  });

  it('goes on from the middle of a run with the counters it had', () => {
    const resume = { distance: 30_000, speed: 50, count: WRAP - 5, boxUs: WRAP - 10_000 };
    const { model, observations } = drive(4, { beginAt: 620e6, resume }, 640e6);
    const pulses = ofType(observations, 'pulse.v1');
    // 20 ms at 50 m/s are two pulses of half a metre.
    expect((pulses[0]?.count ?? 0) - resume.count).toBeLessThanOrEqual(3);
    expect(((pulses[0]?.boxUs ?? 0) - resume.boxUs + WRAP) % WRAP).toBeLessThan(25_000);
    expect(turned(pulses[0] ?? expect.fail(), pulses.at(-1) ?? expect.fail()) / 2).toBeGreaterThan(900);
    expect(model.truth(639e6).distance).toBeGreaterThan(30_900);
  });
});

describe('simulated navigator', () => {
  it('touches late or early by a habit, with real scatter, and misses some', () => {
    const within: number[] = [];
    const leads: number[] = [];
    let touches = 0;
    for (let seed = 1; seed <= 100; seed += 1) {
      const { model, observations } = drive(seed, { pack: SHORT_PACK }, 255e6);
      const late = ofType(observations, 'tap.v1').map((tap) => (tap.at - passing(model, tap.checkpoint ?? '')) / 1000);
      touches += late.length;
      leads.push(mean(late));
      within.push(...late.map((l) => (l - mean(late)) * Math.sqrt(late.length / (late.length - 1))));
    }
    expect(sigma(within)).toBeGreaterThan(85);
    expect(sigma(within)).toBeLessThan(115);
    expect(sigma(leads)).toBeGreaterThan(30);
    // Seven places, one in twenty missed.
    expect(touches / 700).toBeGreaterThan(0.92);
    expect(touches / 700).toBeLessThan(0.98);
  });

  it('makes gross mistakes when asked to', () => {
    const { model, observations } = drive(2, { pack: SHORT_PACK, navigator: { mistaken: 1, missed: 0 } }, 280e6);
    const off = ofType(observations, 'tap.v1').map((tap) => Math.abs(tap.at - passing(model, tap.checkpoint ?? '')) / 1e6);
    expect(off).toHaveLength(7);
    for (const seconds of off) expect(seconds).toBeGreaterThan(2.5);
  });
});
