import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { makePlan, type PlanRequest } from '#shared/pace/plan.ts';
import { errorBounds, findNoReturn, makeFastestHome, neededInHand, timeHome } from '#shared/pace/plan-bounds.ts';
import { planPieces, reserveWaypoints, zoneWaypoints } from '#shared/pace/plan-pieces.ts';
import { evaluate, makeEvaluation, pieceAt } from '#shared/pace/plan-solver.ts';
import { bare, base, CAP, LENGTH, requestArb, scheduleOf } from '#tests/unit/pace/plan-requests.ts';

/** Closed forms of uniform acceleration, worked out beside each check. */

const share = fc.double({ min: 0, max: 0.99, noNaN: true });
const speed = fc.double({ min: 0, max: 60, noNaN: true });

describe('what can still be reached', () => {
  it('at the cap, without zones, E_max = (L − x)(1/V − 1/c)', () => {
    fc.assert(
      fc.property(fc.double({ min: 0, max: 119_999, noNaN: true }), (x) => {
        expect(errorBounds(bare, x, 58).latest).toBeCloseTo((120_000 - x) * (1 / 50 - 1 / 58), 8);
      }),
    );
  });

  it('from below the cap, the ramp costs (c − v)²/2ac more', () => {
    const { latest } = errorBounds(bare, 100_000, 50);
    expect(latest).toBeCloseTo(20_000 * (1 / 50 - 1 / 58) - (58 - 50) ** 2 / (2 * 2.5 * 58), 9);
  });

  it('down to the floor, E_min = (L − x)(1/V − 1/f) + (v − f)²/2df; without a floor there is none', () => {
    const { earliest } = errorBounds({ ...bare, floor: 45 }, 100_000, 50);
    expect(earliest).toBeCloseTo(20_000 * (1 / 50 - 1 / 45) + (50 - 45) ** 2 / (2 * 4 * 45), 9);
    expect(errorBounds(bare, 100_000, 50).earliest).toBeNull();
    // time given in a neutral stretch can always be waited out
    const neutral = scheduleOf([
      [10_000, 20],
      [12_000, 5, 'neutral'],
      [30_000, 20],
    ]);
    expect(errorBounds({ ...bare, schedule: neutral, floor: 15 }, 5_000, 20).earliest).toBeNull();
  });

  it('asks in hand before a zone only for what the rest of the course cannot repay', () => {
    const late = { from: 118_900, to: 119_700, limit: 32 };
    // 800 m at 32, then 300 m on which 58 is not reached: v² = 32² + 2·2.5·300
    const rest = 800 / 32 + (Math.sqrt(32 ** 2 + 5 * 300) - 32) / 2.5;
    expect(neededInHand({ ...base, zones: [late] }, late)).toBeCloseTo(rest - 1_100 / 50, 9);
    for (const zone of base.zones) expect(neededInHand(base, zone)).toBe(0);
  });

  it('the way home from any state is the one that the planner would find', () => {
    fc.assert(
      fc.property(requestArb, share, speed, (request, part, v) => {
        const pieces = planPieces({ ...request, mode: 'finish' });
        const x = part * LENGTH;
        const first = pieceAt(pieces, x);
        const whole = evaluate(pieces, request, { first, x, v }, CAP, makeEvaluation(pieces.length)).time;
        expect(timeHome(makeFastestHome(pieces, request), first, x, v)).toBeCloseTo(whole, 6);
      }),
      { numRuns: 300 },
    );
  });

  it('up to the place of no return zero can be reached, there just so, and behind it no more', () => {
    fc.assert(
      fc.property(requestArb, share, fc.double({ min: 1, max: CAP, noNaN: true }), speed, (request, part, v, spare) => {
        const pieces = planPieces({ ...request, mode: 'finish' });
        const home = makeFastestHome(pieces, request);
        const x = part * LENGTH;
        const first = pieceAt(pieces, x);
        const left = timeHome(home, first, x, v) + spare;
        const found = findNoReturn(home, x, v, left);
        expect(found).not.toBeNull();
        if (found === null) return;
        const held = evaluate(home.pieces, request, { first, x, v }, v, makeEvaluation(pieces.length));
        if (found.x >= LENGTH) expect(held.time).toBeLessThanOrEqual(left + 1e-9);
        else {
          const from = { x, v, t: 0 };
          // the held speed as a plan of its own: cap and target are what holding gives
          const plan = makePlan({ ...request, mode: 'finish', top: v, from: { ...from, t: request.schedule.targetTime - held.time } });
          const reached = { v: plan.speedAt(found.x), t: plan.timeAt(found.x) - (request.schedule.targetTime - held.time) };
          expect(reached.t).toBeCloseTo(found.in, 5);
          expect(reached.t + timeHome(home, pieceAt(pieces, found.x), found.x, reached.v)).toBeCloseTo(left, 5);
        }
        expect(findNoReturn(home, x, v, timeHome(home, first, x, v) - 0.001)).toBeNull();
      }),
      { numRuns: 200 },
    );
  });
});

describe('a plan through places of its own', () => {
  it('keeps a reserve in hand from the first quarter until the last tenth, and ends on zero', () => {
    const plan = makePlan({ ...base, via: reserveWaypoints(base.schedule, 2) });
    expect(plan.outcome).toBe('on zero');
    const [first, main, last] = [plan.holdAt(25_000), plan.holdAt(50_000), plan.holdAt(110_000)];
    expect(main).toBeGreaterThan(last);
    // between two parts the car brakes from p to q, which costs (p − q)²/2dp: a few milliseconds, repaid over the whole course
    const braking = ((first - main) ** 2 + (main - last) ** 2) / (2 * 4 * last);
    expect(Math.abs(plan.plannedErrorAt(30_000) + 2)).toBeLessThan(braking);
    expect(Math.abs(plan.plannedErrorAt(108_000) + 2)).toBeLessThan(braking);
    expect(plan.plannedErrorAt(120_000)).toBeCloseTo(0, 6);
    expect(plan.s).toBeCloseTo(1, 4);
    expect(reserveWaypoints(base.schedule, 0)).toEqual([]);
  });

  it('builds the reserve as soon as it can where the first quarter is too short for it', () => {
    const plan = makePlan({ ...bare, top: 50.5, via: reserveWaypoints(bare.schedule, 2) });
    // flat out at 50.5 the standing start is repaid at x·(1/50 − 1/50.5) = 50.5/5: past 51 km
    const braking = (50.5 - plan.holdAt(50_000)) ** 2 / (2 * 4 * 50.5);
    expect(plan.plannedErrorAt(30_000)).toBeCloseTo(50.5 / 5 - 30_000 * (1 / 50 - 1 / 50.5) + braking, 6);
    expect(plan.plannedErrorAt(108_000)).toBeCloseTo(-2, 2);
    expect(plan.plannedErrorAt(120_000)).toBeCloseTo(0, 6);
  });

  it('leaves every zone on zero where that is wanted', () => {
    const plan = makePlan({ ...base, via: zoneWaypoints(base.zones) });
    for (const zone of base.zones) expect(plan.plannedErrorAt(zone.to)).toBeCloseTo(0, 4);
    expect(plan.plannedErrorAt(120_000)).toBeCloseTo(0, 6);
    // in hand at the entry: what the zone costs against V, less the ramp up that is driven behind it
    const entry = base.zones[3] as (typeof base.zones)[number];
    expect(plan.plannedErrorAt(entry.from)).toBeCloseTo(-800 * (1 / 32 - 1 / 50), 4);
  });

  it('a floor does not bind in a neutral stretch', () => {
    const schedule = scheduleOf([
      [10_000, 40],
      [12_000, 5, 'neutral'],
      [30_000, 40],
    ]);
    const request: PlanRequest = { ...bare, schedule, top: CAP, floor: 30, mode: 'sections' };
    const plan = makePlan(request);
    expect(plan.outcome).toBe('on zero');
    expect(plan.holdAt(11_000)).toBeLessThan(6);
    expect(plan.plannedErrorAt(30_000)).toBeCloseTo(0, 6);
  });
});
