import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { makePlan, type PlanRequest } from '#shared/pace/plan.ts';
import { fastestTime, pointOfNoReturn } from '#shared/pace/plan-bounds.ts';
import { atBeginning, evaluate, makeEvaluation, type Piece, pieceMotion } from '#shared/pace/plan-solver.ts';
import { targetTimeAt } from '#shared/pace/schedule.ts';
import { bare, base, requestArb, scheduleOf } from '#tests/unit/pace/plan-requests.ts';

/** Expected figures: the worked values of the project's pace mathematics, computed there by other code. */

describe('worked values', () => {
  it('5: a start to the target speed costs v/2a; to another speed v/a − v²/2aV', () => {
    const at = (v: number): number => {
      const plan = makePlan({ ...bare, top: v });
      return plan.plannedErrorAt((v * v) / (2 * 2.5) + 1e-6);
    };
    expect(at(50)).toBeCloseTo(10, 6);
    expect(at(45)).toBeCloseTo(45 / 2.5 - 45 ** 2 / (2 * 2.5 * 50), 6);
  });

  it('6: without zones s = a(T − √(T² − 2L/a)); none where T² < 2L/a', () => {
    expect(makePlan(bare).s).toBeCloseTo(2.5 * (2400 - Math.sqrt(2400 ** 2 - 240_000 / 2.5)), 7);
    expect(makePlan(bare).s).toBeCloseTo(50.2100877, 6);
    const hopeless = scheduleOf([[120_000, 120_000 / 300]]);
    expect(makePlan({ ...bare, schedule: hopeless, top: null }).outcome).toBe('cannot be made up');
  });

  it('7: what a zone costs against the cruise speed', () => {
    const zone = { from: 60_000, to: 61_000, limit: 30 };
    const s = 50;
    const pieces = (zones: boolean): Piece[] =>
      zones
        ? [
            { from: 0, to: zone.from, top: 58, weight: 1, floor: 0 },
            { from: zone.from, to: zone.to, top: zone.limit, weight: 1, floor: 0 },
            { from: zone.to, to: 120_000, top: 58, weight: 1, floor: 0 },
          ]
        : [{ from: 0, to: 120_000, top: 58, weight: 1, floor: 0 }];
    const car = { acceleration: 2.5, deceleration: 4 };
    const time = (zones: boolean): number =>
      evaluate(pieces(zones), car, atBeginning(pieces(zones), 0), s, makeEvaluation(zones ? 3 : 1)).time;
    const loss = 1000 * (1 / 30 - 1 / s) + ((s - 30) ** 2 / (2 * s)) * (1 / 2.5 + 1 / 4);
    expect(time(true) - time(false)).toBeCloseTo(loss, 8);
  });

  it('8: the base course', () => {
    const plan = makePlan(base);
    expect(plan.s).toBeCloseTo(51.229462, 6);
    expect(plan.iterations).toBeLessThanOrEqual(5);
    expect(fastestTime(base)).toBeCloseTo(2143.314, 3);
    const errors: [number, number][] = [
      [12_000, 4.486],
      [18_000, 2.249],
      [19_000, 10.82],
      [40_000, 3.086],
      [70_000, 0.817],
      [100_000, -1.228],
      [100_800, 7.772],
      [120_000, 0],
    ];
    for (const [x, e] of errors) expect(Math.abs(plan.plannedErrorAt(x) - e)).toBeLessThan(0.00051);
    const slow = makePlan({ ...base, top: 51 });
    expect(slow.outcome).toBe('cannot be made up');
    expect(slow.by).toBeCloseTo(9.941, 3);
  });

  it('9: planning again at 60 km, 8 s late', () => {
    const late: PlanRequest = { ...base, from: { x: 60_000, v: 50, t: 60_000 / 50 + 8 } };
    expect(makePlan(late).s).toBeCloseTo(51.35544, 5);
    expect(makePlan({ ...late, zones: [] }).s).toBeCloseTo(50.335589, 6);
    expect(pointOfNoReturn(late)).toBeCloseTo(109_133.4, 0);
  });

  it('10: point of no return without zones', () => {
    const late: PlanRequest = { ...bare, from: { x: 60_000, v: 50, t: 60_000 / 50 + 2 } };
    const left = (2 + (58 - 50) ** 2 / (2 * 58 * 2.5)) / (1 / 50 - 1 / 58);
    expect(120_000 - (pointOfNoReturn(late) as number)).toBeCloseTo(left, 3);
    expect(left).toBeCloseTo(805, 1);
  });

  it('11: one zone near the finish', () => {
    const one: PlanRequest = { ...base, zones: [{ from: 118_900, to: 119_700, limit: 32 }] };
    const most = 2400 - fastestTime({ ...one, from: { x: 118_900, v: 32, t: 0 } }) - 118_900 / 50;
    expect(most).toBeCloseTo(-10.2958, 4);
    expect(makePlan(one).s).toBeCloseTo(50.450389, 6);
  });

  it('12: several averages, one ratio to all of them', () => {
    const schedule = scheduleOf([
      [8_000, 14],
      [15_000, 11],
      [27_000, 16],
      [40_000, 12.5],
    ]);
    expect(schedule.targetTime).toBeCloseTo(2997.7922, 4);
    const zones = [
      { from: 5_000, to: 5_400, limit: 9 },
      { from: 20_000, to: 20_500, limit: 12 },
    ];
    const plan = makePlan({ ...base, schedule, zones, top: 25, acceleration: 2, deceleration: 3, mode: 'sections' });
    expect(plan.s).toBeCloseTo(1.010904, 6);
  });

  it('13: a piece too short to reach the limit; the fastest that can still brake', () => {
    const car = { acceleration: 2.5, deceleration: 4 };
    expect(pieceMotion(100, 10, 12, 58, car).peak).toBeCloseTo(20.6062, 4);
    const into = (v: number): boolean =>
      makePlan({ ...bare, zones: [{ from: 60_150, to: 60_650, limit: 32 }], from: { x: 60_000, v, t: 1200 } }).cannotBrake;
    expect(into(47.1592)).toBe(false);
    expect(into(47.1595)).toBe(true);
  });
});

describe('edges of a plan', () => {
  it('holds the floor where time cannot be given back', () => {
    const early: PlanRequest = { ...bare, floor: 45, from: { x: 100_000, v: 50, t: 100_000 / 50 - 60 } };
    const plan = makePlan(early);
    expect(plan.outcome).toBe('cannot be given back');
    // from 50 down to 45 at 4 m/s², then steady: what is left of the time given
    const braking = (50 ** 2 - 45 ** 2) / 8;
    expect(plan.by).toBeCloseTo(460 - (5 / 4 + (20_000 - braking) / 45), 6);
    expect(plan.holdAt(100_000)).toBe(45);
  });

  it('has nothing left to plan at the finish', () => {
    const plan = makePlan({ ...base, from: { x: 120_000, v: 50, t: 2401 } });
    expect(plan.plannedErrorAt(120_000)).toBe(1);
    expect(pointOfNoReturn({ ...base, from: { x: 120_000, v: 50, t: 2401 } })).toBe(120_000);
  });

  it('the lowest of overlapping zones holds', () => {
    const plan = makePlan({
      ...base,
      zones: [
        { from: 10_000, to: 12_000, limit: 30 },
        { from: 11_000, to: 13_000, limit: 20 },
      ],
    });
    expect(plan.speedAt(11_500)).toBe(20);
    expect(plan.speedAt(10_500)).toBe(30);
  });
});

describe('whatever the course', () => {
  it('a solved plan ends on zero, keeps every limit and asks no more of the car than it has', () => {
    fc.assert(
      fc.property(requestArb, (request) => {
        const plan = makePlan(request);
        if (plan.outcome !== 'on zero') return;
        expect(Math.abs(plan.timeAt(30_000) - request.schedule.targetTime)).toBeLessThan(1e-6);
        let [v, t] = [plan.speedAt(0), plan.timeAt(0)];
        let [most, least, over] = [0, 0, 0];
        let goesOn = true;
        for (let x = 25; x <= 30_000; x += 25) {
          const [v1, t1] = [plan.speedAt(x), plan.timeAt(x)];
          const acceleration = (v1 * v1 - v * v) / 50;
          most = Math.max(most, acceleration);
          least = Math.min(least, acceleration);
          goesOn &&= t1 > t;
          [v, t] = [v1, t1];
          const limits = request.zones.filter((z) => x > z.from && x < z.to).map((z) => z.limit);
          over = Math.max(over, v1 - Math.min(45, ...limits));
        }
        expect(goesOn).toBe(true);
        expect(most).toBeLessThan(2.5 + 1e-6);
        expect(least).toBeGreaterThan(-4 - 1e-6);
        if (!plan.cannotBrake) expect(over).toBeLessThan(1e-9);
      }),
      { numRuns: 60 },
    );
  });

  it('planning again on the planned trajectory gives the same s, and a zone more never lowers it', () => {
    fc.assert(
      fc.property(requestArb, fc.double({ min: 0.05, max: 0.9, noNaN: true }), (request, share) => {
        const plan = makePlan(request);
        if (plan.outcome !== 'on zero' || plan.cannotBrake) return;
        const x = share * 30_000;
        const again = makePlan({ ...request, from: { x, v: plan.speedAt(x), t: plan.timeAt(x) } });
        // where every limit ahead binds, s is not determined; the time still is
        expect(Math.abs(again.timeAt(30_000) - request.schedule.targetTime)).toBeLessThan(1e-5);
        const more = makePlan({ ...request, zones: [...request.zones, { from: 12_000, to: 12_600, limit: 8 }] });
        if (more.outcome === 'on zero' && !more.cannotBrake) expect(more.s).toBeGreaterThanOrEqual(plan.s - 1e-6);
      }),
      { numRuns: 60 },
    );
  });

  it('time never grows with s, and its derivative is the true one', () => {
    fc.assert(
      fc.property(requestArb, fc.double({ min: 0.6, max: 1.3, noNaN: true }), (request, ratio) => {
        const { sections } = request.schedule;
        const pieces = sections.map((s) => ({
          from: s.from as number,
          to: s.to as number,
          top: 45,
          weight: request.mode === 'finish' ? 1 : (s.speed as number),
          floor: 0,
        }));
        const s = request.mode === 'finish' ? ratio * 30 : ratio;
        const car = { acceleration: 2.5, deceleration: 4 };
        const time = (x: number): number =>
          evaluate(pieces, car, atBeginning(pieces, request.from.v), x, makeEvaluation(pieces.length)).time;
        const { slope } = evaluate(pieces, car, atBeginning(pieces, request.from.v), s, makeEvaluation(pieces.length));
        const h = s * 1e-6;
        const [left, right] = [(time(s) - time(s - h)) / h, (time(s + h) - time(s)) / h];
        expect(time(s + h)).toBeLessThanOrEqual(time(s) + 1e-9);
        // at a kink (a limit that begins to bind) the derivative is one of the two sides
        const off = Math.min(Math.abs(slope - left), Math.abs(slope - right)) / (1 + Math.abs(left));
        expect(off).toBeLessThan(1e-3);
      }),
      { numRuns: 150 },
    );
  });

  it('the planned curve is the planned time less the target time', () => {
    fc.assert(
      fc.property(requestArb, fc.double({ min: 0, max: 30_000, noNaN: true }), (request, x) => {
        const plan = makePlan(request);
        expect(plan.plannedErrorAt(x)).toBeCloseTo(plan.timeAt(x) - targetTimeAt(request.schedule, x), 9);
      }),
      { numRuns: 50 },
    );
  });
});
