import type { RunHeader } from '#shared/journal/run-header.ts';
import { officialSeconds } from '#shared/pace/clock.ts';
import type { CourseModel, Place } from '#shared/pace/course-model.ts';
import { anchorAt, distanceOf } from '#shared/pace/distance.ts';
import type { LegRow, RunSheet, TapRow } from '#shared/pace/run-sheet.ts';
import { type DerivedTap, modelOf, type PlacePassing, type RunState } from '#shared/pace/run-state.ts';
import { targetTimeAt } from '#shared/pace/schedule.ts';
import { sheetWarnings } from '#shared/pace/sheet-warnings.ts';
import { finishPoint } from '#shared/pace/situation.ts';
import { type TracePoint, traceOf } from '#shared/pace/trace.ts';
import { rawAt } from '#shared/pace/track.ts';

/** The story of the run so far, told by leg: derived now, changes nothing. Apart from `run.ts`, for no run needs it under way. */
export function runSheet(state: RunState, header: RunHeader): RunSheet {
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
    trace: traceOf(state).map((point) => traceRow(state, model, point)),
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

function traceRow(state: RunState, model: CourseModel, { knot, d, elapsedS, timeErrorS }: TracePoint): RunSheet['trace'][number] {
  return { d, elapsedS, timeErrorS, plannedS: d >= model.finish ? 0 : model.plan.plannedErrorAt(d), speed: speedAround(state, knot) };
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
