import { officialSeconds } from '#shared/pace/clock.ts';
import { anchorAt, distanceOf } from '#shared/pace/distance.ts';
import { modelOf, type RunState } from '#shared/pace/run-state.ts';
import { targetTimeAt } from '#shared/pace/schedule.ts';
import { knotAt } from '#shared/pace/track.ts';

export interface TracePoint {
  /** Index of the knot in the sparse trace. */
  readonly knot: number;
  /** Official metres. */
  readonly d: number;
  /** Seconds since the start of the time, by the official clock. */
  readonly elapsedS: number;
  /** Seconds, positive = late. */
  readonly timeErrorS: number;
}

const MOST_POINTS = 400;

/** Time error along the course from the sparse trace: start to finish, at most 400 points; empty before the start. */
export function traceOf(state: RunState): TracePoint[] {
  const { schedule, finishIndex } = modelOf(state);
  const { trace } = state.odometer.track;
  const { startAt, anchors, passings } = state.derived;
  const first = anchors[0];
  if (startAt === null || first === undefined) return [];
  const end = passings[finishIndex]?.at ?? Number.POSITIVE_INFINITY;
  const from = Math.max(first.at, startAt);
  const knots = trace.at.flatMap((at, i) => (at >= from && at <= end ? [i] : []));
  return decimate(knots).map((knot) => {
    const at = trace.at[knot] as number;
    const d = distanceOf(anchorAt(anchors, at) ?? first, knotAt(trace, knot));
    const elapsedS = officialSeconds(state.clock, startAt, at);
    return { knot, d, elapsedS, timeErrorS: elapsedS - targetTimeAt(schedule, d) };
  });
}

/** Evenly spread, first and last included. */
function decimate(knots: readonly number[]): readonly number[] {
  if (knots.length <= MOST_POINTS) return knots;
  return Array.from({ length: MOST_POINTS }, (_, i) => knots[Math.round((i * (knots.length - 1)) / (MOST_POINTS - 1))] as number);
}
