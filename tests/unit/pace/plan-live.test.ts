import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { makePlan } from '#shared/pace/plan.ts';
import { makeLivePlanner, planLive } from '#shared/pace/plan-live.ts';
import { planPieces } from '#shared/pace/plan-pieces.ts';
import { shownSpeed } from '#shared/pace/shown-speed.ts';
import { bare, base, CAP, LENGTH, requestArb, scheduleOf } from '#tests/unit/pace/plan-requests.ts';

/** The plan made anew every second, from whatever state a car may be in. */

const place = fc.double({ min: 0, max: LENGTH - 1, noNaN: true });
const speed = fc.double({ min: 0, max: 60, noNaN: true });
const elapsed = fc.double({ min: 0, max: 4_000, noNaN: true });
const floor = fc.option(fc.double({ min: 5, max: 50, noNaN: true }));

describe('the live plan', () => {
  it('at 60 km, 8 s late: the worked value 9, from a cold and from a warm beginning', () => {
    const planner = makeLivePlanner(base, planPieces(base));
    const cold = planLive(planner, 60_000, 50, 1_208, null);
    expect(cold?.s).toBeCloseTo(51.35544, 5);
    expect(planLive(planner, 60_000, 50, 1_208, 45)?.s).toBeCloseTo(cold?.s as number, 6);
    expect(cold?.here).toMatchObject({ to: 70_000, top: 58, hold: cold?.s });
    expect(cold?.next).toMatchObject({ to: 72_000, top: 40, hold: 40 });
    // from s down to 40 at 4 m/s²
    expect(cold?.here.brakingFrom).toBeCloseTo(70_000 - ((cold?.s as number) ** 2 - 40 ** 2) / 8, 6);
    expect(planLive(planner, 120_000, 50, 2_400, null)).toBeNull();
  });

  it('is the whole plan made from there, seen from where the car is', () => {
    fc.assert(
      fc.property(requestArb, place, speed, elapsed, floor, (request, x, v, t, least) => {
        const wanted = { ...request, floor: least, from: { x, v, t } };
        const live = planLive(makeLivePlanner(wanted, planPieces({ ...wanted, from: { x: 0, v: 0, t: 0 } })), x, v, t, null);
        const plan = makePlan(wanted);
        expect(live?.outcome).toBe(plan.outcome);
        expect(live?.by).toBeCloseTo(plan.by, 5);
        const arrives = plan.timeAt(LENGTH) - request.schedule.targetTime;
        const expected = { 'on zero': 0, 'cannot be made up': plan.by, 'cannot be given back': -plan.by }[plan.outcome];
        expect(Math.abs(arrives - expected)).toBeLessThan(0.001);
      }),
      // braking to a standstill takes all the way that is left: only waiting would be slow enough
      { numRuns: 200, examples: [[{ ...bare, schedule: scheduleOf([[LENGTH, 10]]), top: CAP }, 29_550, 59.999_999_999_999_79, 0, null]] },
    );
  });

  it('never shows a speed above the zone, nor above the cap, nor under the floor unless a limit is lower', () => {
    fc.assert(
      fc.property(
        requestArb,
        place,
        speed,
        elapsed,
        floor,
        fc.constantFrom('km/h' as const, 'mph' as const),
        (request, x, v, t, least, unit) => {
          const wanted = { ...request, floor: least };
          const live = planLive(makeLivePlanner(wanted, planPieces(wanted)), x, v, t, null);
          for (const stretch of [live?.here, live?.next]) {
            if (stretch === undefined || stretch === null) continue;
            const middle = ((stretch === live?.here ? x : (live?.here.to as number)) + stretch.to) / 2;
            const limits = request.zones.filter((z) => middle > z.from && middle < z.to).map((z) => z.limit);
            const most = Math.min(CAP, ...limits);
            const shown = shownSpeed(stretch.hold, stretch.top, stretch.floor, unit);
            expect(shown).toBeLessThanOrEqual(most + 1e-5);
            const whole = unit === 'km/h' ? 1 / 3.6 : 0.44704;
            if (least !== null) expect(shown).toBeGreaterThanOrEqual(Math.min(least, most - whole) - 1e-5);
          }
        },
      ),
      { numRuns: 300 },
    );
  });

  it('a later state never gets a lower hold speed', () => {
    fc.assert(
      fc.property(requestArb, place, speed, elapsed, fc.double({ min: 0, max: 60, noNaN: true }), (request, x, v, t, later) => {
        const planner = makeLivePlanner(request, planPieces(request));
        const [now, then] = [planLive(planner, x, v, t, null), planLive(planner, x, v, t + later, null)];
        expect(then?.here.hold).toBeGreaterThanOrEqual((now?.here.hold as number) - 1e-6);
      }),
      { numRuns: 200 },
    );
  });

  it('on the planned trajectory it finds the same s again', () => {
    fc.assert(
      fc.property(requestArb, place, (request, x) => {
        const plan = makePlan(request);
        if (plan.outcome !== 'on zero' || plan.cannotBrake) return;
        const planner = makeLivePlanner(request, planPieces(request));
        const live = planLive(planner, x, plan.speedAt(x), plan.timeAt(x), plan.s);
        expect(live?.outcome).toBe('on zero');
        // where every limit ahead binds, any s will do; elsewhere the time's own precision decides
        const { slope } = planner.evaluation;
        if (slope < -0.2) expect(Math.abs((live?.s as number) - plan.s)).toBeLessThan(1e-6);
      }),
      { numRuns: 200 },
    );
  });
});
