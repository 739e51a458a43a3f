import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import type { Pack } from '#shared/course/pack.ts';
import { begin, readout, step } from '#shared/pace/run.ts';
import { shownSpeed } from '#shared/pace/shown-speed.ts';
import { micros } from '#shared/units.ts';
import { clockCheck, fromRest, instantOf, journal, type Motion, pulses, RELEASE_US } from '#tests/unit/pace/drives.ts';
import { act, look, sheetOf } from '#tests/unit/pace/folds.ts';
import { km, pack, withClass, withSettings } from '#tests/unit/pace/packs.ts';

const KMH = 1 / 3.6;
const drive = (motion: Motion, until: number) => [clockCheck(pack), ...pulses(motion, { until, hz: 20 })];
const speedOf = (r: ReturnType<typeof look>[number] | undefined): number =>
  r?.hold !== undefined && 'speed' in r.hold ? r.hold.speed / KMH : Number.NaN;

describe('the shown speed', () => {
  it('stands in steps of 2 km/h or 1 mph, never above the limit, never under the floor', () => {
    fc.assert(
      fc.property(
        fc.double({ min: 1, max: 70, noNaN: true }),
        fc.double({ min: 5, max: 70, noNaN: true }),
        fc.double({ min: 0, max: 30, noNaN: true }),
        fc.constantFrom('km/h' as const, 'mph' as const),
        (wanted, upper, lower, unit) => {
          const per = unit === 'km/h' ? KMH : 0.44704;
          const shown = shownSpeed(Math.min(wanted, upper), upper, lower, unit);
          expect(shown).toBeLessThanOrEqual(upper + 1e-5);
          if (lower + per <= upper) expect(shown).toBeGreaterThanOrEqual(lower - 1e-5);
          const units = shown / per;
          expect(Math.abs(units - Math.round(units))).toBeLessThan(1e-9);
        },
      ),
    );
    expect(shownSpeed(41.1, 60, 0, 'km/h') / KMH).toBeCloseTo(148, 9);
    expect(shownSpeed(45 * KMH, 45 * KMH, 0, 'km/h') / KMH).toBeCloseTo(45, 9);
    expect(shownSpeed(49.9, 49.9, 0, 'mph') / 0.44704).toBeCloseTo(111, 9);
  });

  it('changes at least 10 s apart on the open road, and not in the last 8 s', () => {
    // wavering between 36.5 and 44.5 m/s, on zero at the finish
    const motion: Motion = { metresAt: (t) => fromRest(2.5, 40.55, 0.4).metresAt(t) - 60 * (1 - Math.cos(Math.max(0, t - 20) / 15)) };
    const state = begin(pack);
    const changes: number[] = [];
    let [before, frozen] = [Number.NaN, 0];
    for (const o of journal(drive(motion, 790))) {
      step(state, o);
      const { hold, phase } = readout(state, micros(state.now));
      if (hold.kind === 'none' || phase !== 'running') continue;
      if (hold.speed !== before) changes.push(state.now);
      if (hold.kind === 'hold' && hold.frozen) frozen = frozen || state.now;
      before = hold.speed;
    }
    const finish = RELEASE_US + instantOf(motion, 30_000) * 1e6;
    expect(changes.length).toBeGreaterThan(8);
    for (let i = 2; i < changes.length; i++) expect((changes[i] as number) - (changes[i - 1] as number)).toBeGreaterThanOrEqual(10_000_000);
    expect((finish - frozen) / 1e6).toBeLessThan(8.5);
    expect((finish - frozen) / 1e6).toBeGreaterThan(5);
    expect(changes.every((at) => at < frozen)).toBe(true);
  });

  it('switches with a zone at once, shows its limit, and lets go at its end', () => {
    const zoned: Pack = {
      ...pack,
      crewZones: [{ id: 'z', name: 'Ford', from: km('10'), to: km('11'), limit: { text: '60', unit: 'km/h' }, source: 'crew' }],
    };
    const steady: Motion = fromRest(2.5, 40, 0.4);
    const t = instantOf(steady, 10_000);
    // 40 m/s down to 16.7 at 4 m/s² takes 165 m and begins 2 s × 40 m/s before that
    const [far, near, inside, out] = look(zoned, journal(drive(steady, 400)), [t - 8, t - 4, t + 5, t + 28]);
    expect(speedOf(far)).toBeGreaterThan(120);
    expect(speedOf(near)).toBeCloseTo(60, 9);
    expect(speedOf(inside)).toBeCloseTo(60, 9);
    expect(speedOf(out)).toBeGreaterThan(120);
    expect(inside?.zone).toMatchObject({ name: 'Ford' });
    expect(inside?.warnings).toContainEqual({ code: 'over-limit' });
    expect(far?.zoneAhead?.startsIn).toBeCloseTo(320, 0);
  });

  it('never passes the cap less its margin, and says what cannot be made up', () => {
    // 25 m/s where 40 are needed
    const [r] = look(pack, journal(drive(fromRest(2.5, 25, 0.4), 700)), [690]);
    expect(r?.hold.kind).toBe('cannot be made up');
    // cap 180 km/h less 2 % = 176.4
    expect(speedOf(r)).toBeCloseTo(176, 9);
    const left = 30_000 - (r?.distance as number);
    const fastest = (left - (49 ** 2 - 25 ** 2) / 5) / 49 + (49 - 25) / 2.5;
    expect(r?.hold.kind !== 'none' && r?.hold.kind !== 'hold' ? r?.hold.by : 0).toBeCloseTo(690 + fastest - 750, 0);
  });

  it('never falls under the floor, and says what cannot be given back', () => {
    const p = withClass(pack, { floor: { text: '130', unit: 'km/h' } });
    const [r] = look(p, journal(drive(fromRest(2.5, 49, 0), 560)), [550]);
    expect(r?.hold.kind).toBe('cannot be given back');
    expect(speedOf(r)).toBeCloseTo(130, 9);
  });

  it('asks in miles where the crew reads miles', () => {
    const [r] = look(withSettings(pack, { speedUnit: 'mph' }), journal(drive(fromRest(2.5, 40, 0.4), 200)), [190]);
    const mph = (speedOf(r) * KMH) / 0.44704;
    expect(Math.abs(mph - Math.round(mph))).toBeLessThan(1e-9);
  });
});

describe('the band', () => {
  const plan = fromRest(2.5, 40.3, 0);

  it('is level on plan, though 8 s late by the schedule', () => {
    const [r] = look(pack, journal(drive(plan, 40)), [20]);
    expect(r?.timeError).toBeCloseTo(8, 0);
    expect(r?.band).toMatchObject({ side: 'level', against: 'plan', decimals: 1 });
  });

  it('says below and above against the plan, late and early with hundredths near the finish', () => {
    const slow = fromRest(2.5, 38, 0);
    const [below, late] = look(pack, journal(drive(slow, 800)), [300, instantOf(slow, 29_800)]);
    expect(below?.band).toMatchObject({ side: 'below', against: 'plan', decimals: 1 });
    expect(below?.band?.magnitude).toBeCloseTo(below?.againstPlan as number, 9);
    expect(late?.band).toMatchObject({ side: 'late', against: 'schedule', decimals: 2 });
    const fast = fromRest(2.5, 42, 0);
    const [above, early] = look(pack, journal(drive(fast, 730)), [300, instantOf(fast, 29_800)]);
    expect(above?.band).toMatchObject({ side: 'above', against: 'plan' });
    expect(early?.band).toMatchObject({ side: 'early', against: 'schedule' });
  });

  it('is silent while stopped, under escort and after the end', () => {
    const list = journal(drive(plan, 400), [
      act(100, { type: 'run-stopped.v1' }),
      act(200, { type: 'run-resumed.v1', as: 'escort' }),
      act(300, { type: 'run-resumed.v1', as: 'racing' }),
      act(350, { type: 'run-ended.v1', outcome: 'rerun' }),
    ]);
    const [stopped, escort, racing, ended] = look(pack, list, [150, 250, 310, 390]);
    expect(stopped).toMatchObject({ phase: 'stopped', band: null, hold: { kind: 'none' } });
    expect(escort).toMatchObject({ phase: 'running', band: null, hold: { kind: 'none' } });
    expect(racing?.band).not.toBeNull();
    expect(racing?.hold.kind).toBe('hold');
    expect(ended).toMatchObject({ phase: 'ended', band: null, hold: { kind: 'none' }, next: null });
    const sheet = sheetOf(pack, list);
    expect(sheet.outcome).toBe('rerun');
    expect(sheet.stops).toHaveLength(1);
    expect(sheet.stops[0]).toMatchObject({ fromS: 100, toS: 200 });
    expect(Math.abs((sheet.stops[0]?.d as number) - plan.metresAt(100))).toBeLessThan(1);
  });
});

describe('the finish', () => {
  it('is passed by distance, with the stop board ahead and the figures standing still', () => {
    const motion = fromRest(2.5, 40.2, 0.4);
    const t = instantOf(motion, 30_000);
    const shown = act(t + 2, { type: 'finish-shown.v1', engine: '1.0.0', elapsedMs: 0, timeErrorMs: 0, sigmaMs: 10 });
    const list = journal(drive(motion, 790), [shown]);
    const [r, later] = look(pack, list, [t + 1, t + 20]);
    expect(r?.phase).toBe('finished');
    expect(r?.finish?.elapsed).toBeCloseTo(t, 1);
    expect(r?.finish?.timeError).toBeCloseTo(t - 750, 1);
    expect(r?.finish?.stopBoardIn).toBeCloseTo(1_400 - 40.2, 0);
    expect(r?.next?.checkpoint.id).toBe('board');
    expect(later?.finish?.elapsed).toBe(r?.finish?.elapsed);
    expect(later?.timeError).toBe(r?.timeError);
    const sheet = sheetOf(pack, list);
    expect(sheet.shown?.agrees).toBe(false);
    const honest = list.map((o) =>
      o.type === 'finish-shown.v1'
        ? {
            ...o,
            elapsedMs: Math.round((sheet.finish?.elapsedS as number) * 1000),
            timeErrorMs: Math.round((sheet.finish?.timeErrorS as number) * 1000),
          }
        : o,
    );
    expect(sheetOf(pack, honest).shown?.agrees).toBe(true);
    expect(sheet.trace.length).toBeLessThanOrEqual(400);
    expect(sheet.trace.length).toBeGreaterThan(300);
    expect(sheet.outcome).toBe('finished');
  });

  it('a type from a newer Evenline is named, and changes nothing', () => {
    const list = journal(drive(fromRest(2.5, 40, 0.4), 60), [act(30, { type: 'tyre-pressure.v3', bar: 2 })]);
    const [r] = look(pack, list, [50]);
    expect(r?.warnings).toContainEqual({ code: 'newer-evenline' });
    expect(sheetOf(pack, list)).toMatchObject({ unknownTypes: ['tyre-pressure.v3'], outcome: 'open' });
  });
});
