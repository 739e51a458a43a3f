import fc from 'fast-check';
import type { PlanRequest } from '#shared/pace/plan.ts';
import type { Schedule } from '#shared/pace/schedule.ts';
import { metres, metresPerSecond, seconds } from '#shared/units.ts';

/** Courses for the planner's checks. */

export function scheduleOf(edges: readonly (readonly [to: number, speed: number, neutral?: 'neutral'])[]): Schedule {
  let [from, begins] = [0, 0];
  const sections = edges.map(([to, speed, neutral]) => {
    const section = {
      from: metres(from),
      to: metres(to),
      begins: seconds(begins),
      speed: metresPerSecond(speed),
      neutral: neutral === 'neutral',
    };
    begins += (to - from) / speed;
    from = to;
    return section;
  });
  return { start: metres(0), finish: metres(from), targetTime: seconds(begins), difference: seconds(0), sections };
}

/** 120 km at 50 m/s, cap 58, four zones: the base course of the project's pace mathematics. */
export const base: PlanRequest = {
  schedule: scheduleOf([[120_000, 50]]),
  zones: [
    { from: 18_000, to: 19_000, limit: 35 },
    { from: 40_000, to: 40_600, limit: 28 },
    { from: 70_000, to: 72_000, limit: 40 },
    { from: 100_000, to: 100_800, limit: 32 },
  ],
  top: 58,
  floor: null,
  acceleration: 2.5,
  deceleration: 4,
  from: { x: 0, v: 0, t: 0 },
  mode: 'finish',
};
export const bare: PlanRequest = { ...base, zones: [] };

const zoneArb = fc.record({
  from: fc.double({ min: 500, max: 28_000, noNaN: true }),
  length: fc.double({ min: 20, max: 1_500, noNaN: true }),
  limit: fc.double({ min: 5, max: 45, noNaN: true }),
});

export const LENGTH = 30_000;
export const CAP = 45;

/** 30 km, cap 45 m/s, up to eight zones and four averages, from any speed at the start. */
export const requestArb = fc
  .record({
    zones: fc.array(zoneArb, { maxLength: 8 }),
    averages: fc.array(fc.double({ min: 10, max: 40, noNaN: true }), { minLength: 1, maxLength: 4 }),
    stretch: fc.double({ min: 1.0, max: 1.4, noNaN: true }),
    v: fc.double({ min: 0, max: CAP, noNaN: true }),
    mode: fc.constantFrom('finish' as const, 'sections' as const),
  })
  .map(({ zones, averages, stretch, v, mode }): PlanRequest => {
    const speeds = averages.map((a) => a / stretch);
    const schedule = scheduleOf(speeds.map((speed, i) => [((i + 1) * LENGTH) / speeds.length, speed]));
    return {
      ...base,
      schedule,
      zones: zones.map((z) => ({ from: z.from, to: z.from + z.length, limit: z.limit })),
      top: CAP,
      from: { x: 0, v, t: 0 },
      mode,
    };
  });
