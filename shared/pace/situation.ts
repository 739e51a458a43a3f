import { clockSigmaMs, officialSeconds } from '#shared/pace/clock.ts';
import type { CourseModel } from '#shared/pace/course-model.ts';
import { startGate } from '#shared/pace/derive-start.ts';
import { anchorAt, distanceAt, distanceOf, distanceVariance, scaleNow } from '#shared/pace/distance.ts';
import { odometerNow, unmeasuredNow } from '#shared/pace/odometer-now.ts';
import { planInForce } from '#shared/pace/plan-memory.ts';
import type { Phase } from '#shared/pace/readout.ts';
import { type Anchor, modelOf, type PlacePassing, type RunState } from '#shared/pace/run-state.ts';
import { targetSpeedAt, targetTimeAt } from '#shared/pace/schedule.ts';
import { heatNow, knotAt, lastKnotAt, tracedAt, withHeat } from '#shared/pace/track.ts';

/** Where the run stands at one instant: what advice, band and readout all rest on. Plain SI numbers. */
export interface Situation {
  readonly at: number;
  readonly model: CourseModel;
  readonly phase: Phase;
  readonly distance: number;
  readonly speed: number | null;
  readonly source: 'wheel' | 'gnss' | 'none';
  readonly mmPerPulse: number;
  readonly elapsed: number | null;
  readonly timeError: number | null;
  readonly planned: number;
  /** One sigma of the time error, seconds. */
  readonly sigma: number;
  /** One sigma² of the distance, m². */
  readonly variance: number;
  readonly finish: FinishPoint | null;
}

export interface FinishPoint {
  readonly at: number;
  readonly elapsed: number;
  readonly timeError: number;
  readonly sigma: number;
}

const COUNTDOWN_US = 60_000_000;
const HELD_US = 5_000_000;
/** One sigma of what nothing measures, as a share of what the last speed would make of it. */
const UNMEASURED_SHARE = 0.6;
/** Speed times this is how far off distance may be for lags that nobody measured, s. */
const LAG_S = 0.05;

export function situationAt(state: RunState, at: number): Situation {
  const model = modelOf(state);
  const { derived, odometer } = state;
  const anchor = anchorAt(derived.anchors, at);
  const mmPerPulse = scaleInForce(state, anchor);
  const now = odometerNow(odometer, at, mmPerPulse / 1000);
  const raw = withHeat(odometer.track, at, now);
  const last = lastKnotAt(odometer.track);
  const past = last !== null && at < last ? distanceAt(state, at) : null;
  const beforeStart = model.start - Math.max(0, state.changes.stagedBehindM);
  const distance = past ?? (anchor === null || at < anchor.at ? beforeStart : distanceOf(anchor, raw));
  const unmeasured = now.source === 'none' ? UNMEASURED_SHARE * unmeasuredNow(odometer, at, mmPerPulse / 1000) : 0;
  const grown = anchor === null ? 0 : distanceVariance(anchor, raw, at, (derived.anchors[0] as Anchor).at, odometer.losses);
  const variance = grown + unmeasured * unmeasured;
  const finish = finishPoint(state, model);
  const phase = phaseAt(state, at, finish);
  const over = finish !== null && at >= finish.at;
  const elapsed = over
    ? finish.elapsed
    : derived.startAt === null || at < derived.startAt
      ? null
      : officialSeconds(state.clock, derived.startAt, at);
  return {
    at,
    model,
    phase,
    distance,
    speed: now.speed,
    source: now.source,
    mmPerPulse,
    elapsed,
    timeError: over ? finish.timeError : elapsed === null ? null : elapsed - targetTimeAt(model.schedule, distance),
    planned: distance >= model.finish ? 0 : planInForce(state, model).plannedErrorAt(distance),
    sigma: over ? finish.sigma : timeSigma(state, model, distance, variance, now.speed ?? 0, at),
    variance,
    finish: over ? finish : null,
  };
}

/** Official mm per pulse now: what tyres and speed do to the scale included, where that is estimated. */
function scaleInForce(state: RunState, anchor: Anchor | null): number {
  if (anchor === null) return state.pack.wheel.mmPerPulse;
  const { track } = state.odometer;
  const { coldness, square } = heatNow(track);
  return scaleNow(anchor, coldness, square);
}

/** σ_E = √(P + (0.05·v)² + σ_s²)/V, joined by the clock's. */
export function timeSigma(state: RunState, model: CourseModel, x: number, variance: number, speed: number, at: number): number {
  const surveyed = (model.places[model.finishIndex] as { surveySigma: number }).surveySigma;
  // the estimator knows how unsure the lead is, the greatest lag of all
  const lag = state.pack.settings.scaleRule === 'estimator' ? 0 : LAG_S * speed;
  const metres = Math.sqrt(variance + lag * lag + surveyed * surveyed);
  const clock = clockSigmaMs(state.clock, at) / 1000;
  return Math.hypot(metres / targetSpeedAt(model.schedule, x), Number.isFinite(clock) ? clock : 0);
}

/** Elapsed time and time error of the finish, once it was passed and the start is known. */
export function finishPoint(state: RunState, model: CourseModel): FinishPoint | null {
  const { derived } = state;
  const passing = derived.passings[model.finishIndex];
  if (passing === undefined || passing.at === null || derived.startAt === null) return null;
  const elapsed = officialSeconds(state.clock, derived.startAt, passing.at);
  return { at: passing.at, elapsed, timeError: elapsed - model.schedule.targetTime, sigma: finishSigma(state, model, passing, passing.at) };
}

function finishSigma(state: RunState, model: CourseModel, passing: PlacePassing, at: number): number {
  const { derived, odometer } = state;
  const own = passing.by === 'tap' ? derived.anchors.find((a) => a.at === at) : undefined;
  const anchor = own ?? anchorAt(derived.anchors, at - 1);
  if (anchor === undefined || anchor === null) return timeSigma(state, model, model.finish, 0, 0, at);
  // counts and metres of GNSS from the anchor to the finish, as far as the run has come: enough for a sigma
  const { trace } = odometer.track;
  const there = tracedAt(odometer.track, at) ?? knotAt(trace, 0);
  const way = { ...there, w: anchor.w + ((model.finish - anchor.d) * 1000) / anchor.mmPerPulse, g: anchor.g };
  const variance = distanceVariance(anchor, way, at, (derived.anchors[0] as Anchor).at, odometer.losses);
  return timeSigma(state, model, model.finish, variance, targetSpeedAt(model.schedule, model.finish), at);
}

function phaseAt(state: RunState, at: number, finish: FinishPoint | null): Phase {
  const { acts, derived } = state;
  if (acts.ended !== null && at >= acts.ended.at) return 'ended';
  if (finish !== null && at >= finish.at) return 'finished';
  const stop = acts.stops[acts.stops.length - 1];
  if (stop !== undefined && stop.to === null && at >= stop.from) return 'stopped';
  const gate = startGate(state, derived.releaseAt);
  if (gate === null) return 'grid';
  if (at < gate)
    return gate - at <= COUNTDOWN_US && derived.start === 'standing' ? 'countdown' : derived.start === 'standing' ? 'grid' : 'countdown';
  return at - gate >= HELD_US && !isUnderWay(state, at) ? 'held' : 'running';
}

function isUnderWay(state: RunState, at: number): boolean {
  if (state.derived.start === 'standing') return false;
  const { current } = state.odometer.launches;
  // a shuffle that came to rest again is no launch
  return current === null || state.derived.anchors.length !== 1 || at - (current.t[current.t.length - 1] as number) < HELD_US;
}
