import type { RunHeader } from '#shared/journal/run-header.ts';
import { officialSeconds } from '#shared/pace/clock.ts';
import type { CourseModel, Place } from '#shared/pace/course-model.ts';
import { anchorAt, distanceOf } from '#shared/pace/distance.ts';
import type { LegRow, RunSheet, TapRow } from '#shared/pace/run-sheet.ts';
import { type DerivedTap, modelOf, type PlacePassing, type RunState } from '#shared/pace/run-state.ts';
import { targetTimeAt } from '#shared/pace/schedule.ts';
import { sheetWarnings } from '#shared/pace/sheet-warnings.ts';
import { finishPoint } from '#shared/pace/situation.ts';
import { knotAt, rawAt } from '#shared/pace/track.ts';

/** The run sheet of a state: derived now, changes nothing. */
export function sheetOf(state: RunState, header: RunHeader): RunSheet {
  const model = modelOf(state);
  const { derived, acts, odometer } = state;
  const finish = finishPoint(state, model);
  const { startAt } = derived;
  return {
    engine: state.engine,
    runId: header.runId,
    outcome: acts.ended?.outcome ?? (finish === null ? 'open' : 'finished'),
    practice: header.practice,
    clockRate: header.clockRate,
    releaseMs: state.changes.releaseMs,
    targetTimeS: model.schedule.targetTime,
    reactionS: startAt === null || derived.firstMovedAt === null ? null : (derived.firstMovedAt - startAt) / 1e6,
    legs: model.places.map((place, i) => legRow(state, model, place, derived.passings[i] as PlacePassing)),
    finish: finish === null ? null : { elapsedS: finish.elapsed, timeErrorS: finish.timeError, sigmaS: finish.sigma },
    shown: shownOf(state, finish),
    trace: traceOf(state, model),
    stops: acts.stops.map((stop) => stopRow(state, stop)),
    taps: derived.taps.map(tapRow),
    aidsUsed: aidsUsed(state),
    pulses: odometer.wheel.total,
    observations: state.observations,
    unknownTypes: [...state.unknownTypes].sort(),
    warnings: sheetWarnings(state, model),
  };
}

const tapRow = (t: DerivedTap): TapRow => ({
  seq: t.seq,
  checkpoint: t.checkpoint,
  verdict: t.verdict,
  movedM: t.moved,
  figures: { input: t.input, misfitM: t.misfit, varianceM2: t.variance, surveySigmaM: t.surveySigma, speed: t.speed },
});

function legRow(state: RunState, model: CourseModel, place: Place, passing: PlacePassing): LegRow {
  const { startAt } = state.derived;
  const skipped = passing.by !== 'tap' && state.acts.skipped.includes(place.checkpoint.id);
  const elapsedS = passing.at === null || startAt === null ? null : officialSeconds(state.clock, startAt, passing.at);
  const targetS = targetTimeAt(model.schedule, place.d);
  return {
    checkpointId: place.checkpoint.id,
    name: place.checkpoint.name,
    duty: place.checkpoint.duty,
    officialM: place.d,
    by: skipped ? 'skipped' : (passing.by ?? 'not reached'),
    atUs: passing.at,
    elapsedS,
    targetS,
    // after the finish there is no schedule left to be late against
    timeErrorS: elapsedS === null || place.d > model.finish ? null : elapsedS - targetS,
    plannedS: place.d >= model.finish ? 0 : model.plan.plannedErrorAt(place.d),
    measuredM: passing.measured,
    movedM: passing.moved,
    scaleBefore: passing.scaleBefore,
    scaleAfter: passing.scaleAfter,
    scaleKept: passing.scaleKept,
  };
}

/** What the figures rest on: sources of distance, and what the estimator compared with. */
function aidsUsed({ odometer, derived }: RunState): RunSheet['aidsUsed'] {
  const { sourceNodes, usedWheel, usedGnssSpeed, usedGnssPosition } = odometer;
  const compared = derived.anchors.some((a) => a.belief !== null);
  const speed = usedGnssSpeed || (compared && sourceNodes.some((n) => n.compared !== null));
  const position = usedGnssPosition || (compared && sourceNodes.some((n) => n.position !== null));
  return [
    ...(usedWheel ? (['wheel'] as const) : []),
    ...(speed ? (['gnss speed'] as const) : []),
    ...(position ? (['gnss position'] as const) : []),
  ];
}

function shownOf(state: RunState, finish: { elapsed: number; timeError: number } | null): RunSheet['shown'] {
  const shown = state.acts.finishShown;
  if (shown === null) return null;
  const same = (ms: number, s: number): boolean => Math.abs(ms - s * 1000) < 1;
  const agrees = finish !== null && same(shown.elapsedMs, finish.elapsed) && same(shown.timeErrorMs, finish.timeError);
  return { engine: shown.engine, elapsedS: shown.elapsedMs / 1000, timeErrorS: shown.timeErrorMs / 1000, agrees };
}

function stopRow(state: RunState, stop: { from: number; to: number | null }): RunSheet['stops'][number] {
  const { startAt, anchors } = state.derived;
  const zero = startAt ?? stop.from;
  const anchor = anchorAt(anchors, stop.from);
  const raw = rawAt(state.odometer.track, stop.from);
  return {
    fromS: (stop.from - zero) / 1e6,
    toS: stop.to === null ? null : (stop.to - zero) / 1e6,
    d: anchor === null || raw === null ? 0 : distanceOf(anchor, raw),
  };
}

const MOST_POINTS = 400;

/** Time error along the course from the sparse trace: start to finish, at most 400 points. */
function traceOf(state: RunState, model: CourseModel): RunSheet['trace'] {
  const { trace } = state.odometer.track;
  const { startAt, anchors, passings } = state.derived;
  const first = anchors[0];
  if (startAt === null || first === undefined) return [];
  const end = passings[model.finishIndex]?.at ?? Number.POSITIVE_INFINITY;
  const from = Math.max(first.at, startAt);
  const knots = trace.at.flatMap((at, i) => (at >= from && at <= end ? [i] : []));
  const chosen = decimate(knots);
  return chosen.map((i) => {
    const at = trace.at[i] as number;
    const d = distanceOf(anchorAt(anchors, at) ?? first, knotAt(trace, i));
    const elapsedS = officialSeconds(state.clock, startAt, at);
    return {
      d,
      elapsedS,
      timeErrorS: elapsedS - targetTimeAt(model.schedule, d),
      plannedS: d >= model.finish ? 0 : model.plan.plannedErrorAt(d),
      speed: speedAround(state, i),
    };
  });
}

/** Evenly spread, first and last included. */
function decimate(knots: readonly number[]): readonly number[] {
  if (knots.length <= MOST_POINTS) return knots;
  return Array.from({ length: MOST_POINTS }, (_, i) => knots[Math.round((i * (knots.length - 1)) / (MOST_POINTS - 1))] as number);
}

function speedAround(state: RunState, i: number): number {
  const { trace } = state.odometer.track;
  const [a, b] = [Math.max(0, i - 1), Math.min(trace.at.length - 1, i + 1)];
  const us = (trace.at[b] as number) - (trace.at[a] as number);
  if (us <= 0) return 0;
  const anchor = anchorAt(state.derived.anchors, trace.at[i] as number);
  const mm = anchor?.mmPerPulse ?? state.pack.wheel.mmPerPulse;
  const metres = (((trace.w[b] as number) - (trace.w[a] as number)) * mm) / 1000 + (trace.g[b] as number) - (trace.g[a] as number);
  return (metres * 1e6) / us;
}
