import { describe, expect, it } from 'vitest';
import type { Pack } from '#shared/course/pack.ts';
import { begin, readout, snapshot, step } from '#shared/pace/run.ts';
import { micros } from '#shared/units.ts';
import { clockCheck, fromRest, instantOf, journal, type Motion, pulses } from '#tests/unit/pace/drives.ts';
import { look, us } from '#tests/unit/pace/folds.ts';
import { km, pack } from '#tests/unit/pace/packs.ts';

/** What driver and navigator are told while the run strays from its first plan. */

const KMH = 1 / 3.6;
const drive = (motion: Motion, until: number, p: Pack = pack) => journal([clockCheck(p)], pulses(motion, { until, hz: 20 }));

/** `first` until so many seconds after the release, then a change of speed at `a` m/s² to `v`. */
function thenAt(first: Motion, seconds: number, v0: number, v: number, a: number): Motion {
  const ramp = Math.abs(v - v0) / a;
  return {
    metresAt(t) {
      if (t <= seconds) return first.metresAt(t);
      const u = t - seconds;
      const ramped = Math.min(u, ramp);
      return first.metresAt(seconds) + v0 * ramped + (Math.sign(v - v0) * a * ramped ** 2) / 2 + v * (u - ramped);
    },
  };
}

describe('the plan in force', () => {
  it('band and hold speed ask for the same: a car that keeps the shown speed is brought level within the minute', () => {
    // away 4 s late, then at once the 146 km/h that the live plan asks for
    const late = fromRest(2.5, 146 * KMH, 4);
    const [first, then] = look(pack, drive(late, 120), [24, 110]);
    expect(first?.band?.side).toBe('below');
    expect(then?.hold).toMatchObject({ kind: 'hold' });
    expect(then?.hold.kind === 'hold' ? then.hold.speed / KMH : 0).toBeCloseTo(146, 9);
    expect(then?.band?.side).toBe('level');
    // against the schedule nothing is hidden: standing start 8.1 s, 4 s late away, less what 146 over 144 has repaid
    const driven = late.metresAt(110);
    expect(then?.timeError).toBeCloseTo(110 - driven / 40, 1);
    expect(then?.againstPlan).toBeCloseTo(0, 0);
    expect(then?.next?.planned).toBeGreaterThan(5);
  });

  it('a car that does not keep it stays below, and is asked for more', () => {
    const slow = fromRest(2.5, 138 * KMH, 0);
    const [early, later] = look(pack, drive(slow, 400), [150, 390]);
    for (const r of [early, later]) expect(r?.band).toMatchObject({ side: 'below', against: 'plan' });
    expect(later?.band?.magnitude).toBeGreaterThan((early?.band?.magnitude as number) + 5);
    const speeds = [early, later].map((r) => (r?.hold.kind === 'hold' ? r.hold.speed : 0));
    expect(speeds[1]).toBeGreaterThan(speeds[0] as number);
  });

  it('a run taken up again from a snapshot goes on with the same plan, to the last bit', () => {
    const list = drive(fromRest(2.5, 146 * KMH, 4), 200);
    const whole = begin(pack);
    for (const o of list) step(whole, o);
    const half = begin(pack);
    for (const o of list.slice(0, 2_600)) step(half, o);
    const restored = JSON.parse(JSON.stringify(snapshot(half))) as typeof half;
    expect(restored.shown.plan.origin).not.toBeNull();
    for (const o of list.slice(2_600)) step(restored, o);
    expect(restored.shown).toEqual(whole.shown);
    expect(readout(restored, micros(us(200)))).toEqual(readout(whole, micros(us(200))));
  });

  it('a reserve is in hand where the plan has it, and the band is level on it', () => {
    const p: Pack = { ...pack, plan: { ...pack.plan, reserveS: 2 } };
    const state = begin(p);
    const late = readout(state, micros(0)).next;
    expect(late?.planned).toBeGreaterThan(0);
    // 146.5 km/h repays the standing start and 2 s by the first quarter of 30 km: 7.5 km / 40 = 187.5 s
    const v = 7_500 / (187.5 - 2 - 8.4);
    const [r] = look(p, drive(fromRest(2.5, v, 0), 190), [instantOf(fromRest(2.5, v, 0), 7_490)]);
    expect(r?.timeError).toBeLessThan(-1.5);
    expect(r?.planned).toBeCloseTo(-2, 1);
    expect(r?.band?.side).toBe('level');
  });
});

describe('the place of no return', () => {
  const zero = 30_000;
  // steady 37 m/s where 40 are needed: 49 m/s is the cap of 180 km/h less 2 %
  const slow = fromRest(2.5, 37, 0);

  it('is told while it is near, by the formula, and is silent before, behind it and on plan', () => {
    // holding v: t(x) + (49 − v)²/(2·49·2.5) + (L − x)/49 = 750
    const t0 = 37 / 5;
    const ramp = (49 - 37) ** 2 / (2 * 49 * 2.5);
    const x = (750 - ramp - t0 - zero / 49) / (1 / 37 - 1 / 49);
    const t = instantOf(slow, x);
    const [far, near, nearer, past] = look(pack, drive(slow, t + 30), [t - 90, t - 40, t - 10, t + 20]);
    expect(far?.noReturn).toBeNull();
    expect(near?.noReturn?.at).toBeCloseTo(x, -1);
    expect(near?.noReturn?.in).toBeCloseTo(40, 0);
    expect(nearer?.noReturn?.in).toBeCloseTo(10, 0);
    expect(past?.noReturn).toBeNull();
    expect(past?.hold.kind).toBe('cannot be made up');
    const onPlan = fromRest(2.5, 40.45, 0);
    for (const r of look(pack, drive(onPlan, 745), [300, 700, 730, 740])) expect(r.noReturn).toBeNull();
  });

  it('is no alarm in a zone, nor while the car speeds up behind it', () => {
    const p: Pack = {
      ...pack,
      crewZones: [{ id: 'z', name: 'Ford', from: km('25'), to: km('25.5'), limit: { text: '60', unit: 'km/h' }, source: 'crew' }],
    };
    // 12 s in hand before the zone: there is time for it, and holding the zone's speed to the finish would lose that within the minute
    const away = fromRest(2.5, 43, 0);
    const braking = instantOf(away, 25_000 - (43 ** 2 - (59 * KMH) ** 2) / 8);
    const inZone = thenAt(away, braking, 43, 59 * KMH, 4);
    const out = instantOf(inZone, 25_510);
    const again = thenAt(inZone, out, 59 * KMH, 43, 2.5);
    const times = Array.from({ length: 40 }, (_, i) => braking - 5 + 1.5 * i);
    for (const r of look(p, drive(again, braking + 60), times)) expect(r.noReturn).toBeNull();
  });
});

describe('at a standstill', () => {
  it('the time error only grows, at the pace of the clock', () => {
    const stop = thenAt(fromRest(2.5, 40, 0), 200, 40, 0, 4);
    const times = Array.from({ length: 60 }, (_, i) => 215 + i * 0.37);
    const errors = look(pack, drive(stop, 240), times).map((r) => r.timeError as number);
    for (let i = 1; i < errors.length; i++) expect((errors[i] as number) - (errors[i - 1] as number)).toBeCloseTo(0.37, 2);
  });
});
