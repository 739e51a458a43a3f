import { describe, expect, it } from 'vitest';
import type { NewObservation } from '#shared/journal/observation.ts';
import { clockCheck, fromRest, instantOf, journal, pulses } from '#tests/unit/pace/drives.ts';
import { act, fold, leg, look, sheetOf, us } from '#tests/unit/pace/folds.ts';
import { pack } from '#tests/unit/pace/packs.ts';

const motion = fromRest(2.5, 40, 0.4);
const releaseMs = pack.attempt.releaseMs as number;
const drive = pulses(motion, { until: 130 });
/** A sample at t seconds after the release that says the official clock reads so, off by some ms. */
const sample = (t: number, source: string, offMs: number, uncertaintyMs: number): NewObservation =>
  act(t, { type: 'clock.v1', source, officialMs: releaseMs + t * 1000 + offMs, uncertaintyMs });
const elapsedAt = (samples: NewObservation[], t = 120): number => look(pack, journal(drive, samples), [t])[0]?.elapsed as number;

describe('the official clock', () => {
  it('is the sample with the least uncertainty by now, the wall only if nothing else, the device last', () => {
    expect(elapsedAt([sample(-50, 'exchange', 0, 5), sample(-40, 'pps', 7, 1), sample(-30, 'nmea', 90, 80)])).toBeCloseTo(120.007, 9);
    expect(elapsedAt([sample(-50, 'wall', 500, 1), sample(-40, 'nmea', 90, 80)])).toBeCloseTo(120.09, 9);
    const epoch = act(-60, { type: 'epoch.v1', n: 0, mono: 0, wall: releaseMs - 60_000 + 300, bridgedBy: 'first', uncertaintyMs: 0 });
    expect(elapsedAt([epoch])).toBeCloseTo(120.3, 9);
    expect(elapsedAt([epoch, sample(-50, 'wall', 500, 3_000)])).toBeCloseTo(120.5, 9);
    const [none, device] = [look(pack, journal(drive), [10])[0], look(pack, journal(drive, [epoch]), [10])[0]];
    expect(none).toMatchObject({ official: null, elapsed: null, phase: 'grid' });
    expect(device?.warnings).toContainEqual({ code: 'clock-unchecked' });
  });

  it('grows less certain by 1 ppm of its age', () => {
    const [r] = look(pack, journal(drive, [sample(-50, 'exchange', 0, 3)]), [3550]);
    expect(r?.official?.age).toBeCloseTo(3600, 6);
    expect(r?.official?.sigma).toBeCloseTo(Math.hypot(0.003, 0.0036), 9);
    expect(look(pack, journal(drive, [sample(-50, 'exchange', 0, 3)]), [20])[0]?.warnings).toEqual([]);
  });

  it('is frozen from the release on, but for a clearly better one', () => {
    const before = [sample(-50, 'exchange', 0, 10)];
    expect(elapsedAt([...before, sample(60, 'exchange', 8, 6)])).toBeCloseTo(120, 9);
    expect(elapsedAt([...before, sample(60, 'exchange', 8, 4)])).toBeCloseTo(120.008, 9);
    expect(elapsedAt([...before, sample(-5, 'exchange', 8, 9)])).toBeCloseTo(120.008, 9);
  });

  it('does not follow a wall clock that is set during the run', () => {
    const steps = [sample(30, 'wall', 90_000, 1), sample(60, 'wall', -5_000, 0.1)];
    const pairs = [0, 10, 20, 30, 40].map((t) =>
      act(t, { type: 'clock-pair.v1', mono: t * 1000, wall: releaseMs + t * 1000 + (t >= 30 ? 90_000 : 0) }),
    );
    const list = journal([clockCheck(pack)], drive, steps, pairs);
    const [a, b] = [fold(pack, journal([clockCheck(pack)], drive)), fold(pack, list)];
    expect(b.derived).toEqual(a.derived);
    const [warned, later] = look(pack, list, [31, 120]);
    expect(warned?.warnings).toContainEqual({ code: 'slept' });
    expect(later?.warnings).not.toContainEqual({ code: 'slept' });
    expect(sheetOf(pack, list).warnings.join()).toContain('came apart by 90000 ms');
  });

  it('a page that died and came back costs certainty, not the clock', () => {
    const epoch = act(60, { type: 'epoch.v1', n: 1, mono: 5, wall: releaseMs + 999_000, bridgedBy: 'wall', uncertaintyMs: 40 });
    const [before, after] = look(pack, journal([clockCheck(pack)], drive, [epoch]), [59, 61]);
    expect(after?.elapsed).toBeCloseTo(61, 9);
    expect(before?.official?.sigma).toBeCloseTo(0.005, 4);
    expect(after?.official?.sigma).toBeCloseTo(Math.hypot(0.005, 0.04), 4);
    expect(after?.warnings).not.toContainEqual({ code: 'slept' });
  });

  it('costs what the box says once the box is heard again, not the guess before it as well', () => {
    const epoch = (t: number, n: number, bridgedBy: string, uncertaintyMs: number): NewObservation =>
      act(t, { type: 'epoch.v1', n, mono: 5, wall: releaseMs, bridgedBy, uncertaintyMs });
    const sigma = (...epochs: NewObservation[]): number =>
      (look(pack, journal([clockCheck(pack)], drive, epochs), [80])[0]?.official?.sigma as number) * 1000;
    const own = sigma();
    expect(sigma(epoch(60, 1, 'wall', 50), epoch(60.3, 1, 'box', 3))).toBeCloseTo(Math.hypot(own, 3), 6);
    expect(sigma(epoch(60, 1, 'page', 8), epoch(60.3, 1, 'box', 3))).toBeCloseTo(Math.hypot(own, 3), 6);
    // another life, and a sleep later in the same one, are gaps of their own
    expect(sigma(epoch(60, 1, 'wall', 50), epoch(70, 2, 'box', 3))).toBeCloseTo(Math.hypot(own, 50, 3), 6);
    expect(sigma(epoch(60, 1, 'wall', 50), epoch(60.3, 1, 'box', 3), epoch(75, 1, 'box', 4))).toBeCloseTo(Math.hypot(own, 3, 4), 6);
  });

  it('a check after the guess stands alone: what the box then says of that life is added to it', () => {
    const list = journal(drive, [
      sample(-50, 'exchange', 0, 5),
      act(-40, { type: 'epoch.v1', n: 1, mono: 5, wall: releaseMs, bridgedBy: 'wall', uncertaintyMs: 50 }),
      sample(-39, 'exchange', 0, 5),
      act(-38, { type: 'epoch.v1', n: 1, mono: 5, wall: releaseMs, bridgedBy: 'box', uncertaintyMs: 3 }),
    ]);
    expect(look(pack, list, [-37])[0]?.official?.sigma).toBeCloseTo(Math.hypot(0.005, 0.003), 6);
  });
});

describe('instants', () => {
  it('of passings are whole microseconds, elapsed from the release', () => {
    const sheet = sheetOf(pack, journal([clockCheck(pack)], drive));
    const row = leg(sheet, 'settle');
    expect(Number.isInteger(row.atUs)).toBe(true);
    expect(row.elapsedS).toBe(((row.atUs as number) - us(0)) / 1e6);
    expect(row.elapsedS).toBeCloseTo(instantOf(motion, 4_000), 1);
  });
});
