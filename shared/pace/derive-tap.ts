import type { CourseModel, Place } from '#shared/pace/course-model.ts';
import type { Anchor, DerivedTap, PlacePassing, RunState, TapAct } from '#shared/pace/run-state.ts';
import type { Misfit, TakenFor, TapJudge } from '#shared/pace/tap-judge.ts';
import { estimateJudge } from '#shared/pace/tap-judge-estimate.ts';
import { simpleJudge } from '#shared/pace/tap-judge-simple.ts';

/** What becomes of one tap, given everything before it and what it is taken for. */

export interface TapContext {
  readonly state: RunState;
  readonly model: CourseModel;
  /** The first one stands at the start; empty before it. */
  readonly anchors: readonly Anchor[];
  /** Taps before this one by the instant that counts. */
  readonly judged: readonly JudgedTap[];
  /** Places, by index, that a tap before this one holds. */
  readonly held: ReadonlySet<number>;
}

export interface JudgedTap {
  readonly tap: TapAct;
  readonly verdict: DerivedTap;
  /** Where the tap is used. */
  readonly use: { readonly anchor: Anchor; readonly place: number; readonly passing: PlacePassing } | null;
  /** Misfit² over its variance; null where there was nothing to compare, or where the navigator overrules. */
  readonly strain: number | null;
  /** −2 ln of how probable this is. */
  readonly cost: number;
}

/** A second touch so soon is the same hand, not another place. */
const DOUBLE_TOUCH_US = 2_000_000;
/** Beyond this many sigmas a tap that the navigator insists on tells of a wrong touch or a lost count. */
const GATE_SIGMAS = 3.5;
/** One touch is enough within this of the place, or within so many sigmas where distance is less sure. */
const LEAST_REACH_M = 150;
const REACH_SIGMAS = 4;
/** No wheel loses so much unnoticed: a touch further off belongs to another place, unless the navigator insists. */
const FARTHEST_M = 3000;
/** −2 ln of how rare a mistaken touch is (and how far it may be off), and a jump of distance or scale. Own judgement, tried by simulation. */
const COST_OF_MISTAKE = 23;
const COST_OF_JUMP = 14;
/** ln 2π, of the normal density. */
const LN_2_PI = Math.log(2 * Math.PI);

/** All taps by the instant that counts. */
export const tapQueue = (state: RunState): readonly TapAct[] => [...state.acts.taps].sort((a, b) => a.t - b.t || a.seq - b.seq);

/** How far from a place a touch still belongs to it, metres either side. */
export const reachOf = (variance: number): number => Math.max(LEAST_REACH_M, REACH_SIGMAS * Math.sqrt(variance));

export function judgeTap(context: TapContext, tap: TapAct, takenFor: TakenFor): JudgedTap {
  const { state, anchors } = context;
  const anchor = anchors[anchors.length - 1];
  const idle = (verdict: DerivedTap['verdict']): JudgedTap => unused(tap, verdict, anchor?.mmPerPulse ?? state.pack.wheel.mmPerPulse, 0);
  if (state.acts.voided.includes(tap.seq)) return idle('voided');
  if (tap.raw === null) return idle('provisional');
  if (anchor === undefined || tap.t < (anchors[0] as Anchor).at) return idle('no place near');
  const explicit = movedTo(state, tap.seq);
  const trusted = explicit !== null || state.acts.accepted.includes(tap.seq);
  if (!trusted && isDoubleTouch(context, tap)) return idle('repeated');
  const judge = (anchor.belief === null ? simpleJudge : estimateJudge)({ state, anchors, tap, raw: tap.raw });
  const choice = choosePlace(context, tap, judge.measured, explicit, reachOf(judge.grown));
  if (choice === 'repeated') return unused(tap, choice, judge.scale, 0);
  if (choice === 'no place near') return unused(tap, choice, judge.scale, COST_OF_MISTAKE);
  return judgeAt(context, tap, judge, choice, trusted ? 'trusted' : takenFor);
}

const unused = (tap: TapAct, verdict: DerivedTap['verdict'], scale: number, cost: number): JudgedTap => ({
  tap,
  verdict: { ...verdictAt(tap, tap.checkpoint, null), verdict, moved: 0, scaleBefore: scale, scaleAfter: scale, scaleKept: null },
  use: null,
  strain: null,
  cost,
});

type VerdictAt = Omit<DerivedTap, 'verdict' | 'moved' | 'scaleBefore' | 'scaleAfter' | 'scaleKept'>;

function verdictAt(tap: TapAct, checkpoint: string | null, misfit: (Misfit & { surveySigma: number }) | null): VerdictAt {
  return {
    seq: tap.seq,
    checkpoint,
    input: tap.input,
    misfit: misfit?.moved ?? 0,
    variance: misfit === null ? 0 : misfit.variance - misfit.own,
    surveySigma: misfit?.surveySigma ?? 0,
    speed: tap.raw?.v ?? 0,
  };
}

/** A tap at a place that it may belong to. */
function judgeAt({ model }: TapContext, tap: TapAct, judge: TapJudge, choice: number, takenFor: TakenFor | 'trusted'): JudgedTap {
  const place = model.places[choice] as Place;
  const misfit = judge.misfit(place);
  const { moved, variance } = misfit;
  const strain = (moved * moved) / variance;
  const about = verdictAt(tap, place.checkpoint.id, { ...misfit, surveySigma: place.surveySigma });
  const scale = judge.scale;
  if (takenFor === 'mistaken' || (takenFor !== 'trusted' && Math.abs(moved) > FARTHEST_M)) {
    const kept = { scaleBefore: scale, scaleAfter: scale, scaleKept: null };
    return { tap, verdict: { ...about, verdict: 'doubted', moved, ...kept }, use: null, strain, cost: COST_OF_MISTAKE };
  }
  const trusted = takenFor === 'trusted';
  const story = trusted ? (strain > GATE_SIGMAS * GATE_SIGMAS ? 'jump' : 'plain') : takenFor;
  const taken = judge.take(place, story);
  const scales = { scaleBefore: scale, scaleAfter: taken.scaleAfter, scaleKept: taken.kept };
  const at = Math.round(tap.t);
  const passing: PlacePassing = { by: 'tap', at, tap: tap.seq, measured: judge.measured, moved: taken.moved, ...scales };
  return {
    tap,
    verdict: { ...about, verdict: 'used', moved: taken.moved, ...scales },
    use: { place: choice, passing, anchor: taken.anchor },
    strain: trusted ? null : strain,
    cost:
      (story === 'plain' || trusted ? 0 : COST_OF_JUMP) + likelihoodCost(moved, story === 'plain' ? variance : variance + moved * moved),
  };
}

const likelihoodCost = (misfit: number, variance: number): number => (misfit * misfit) / variance + Math.log(variance) + LN_2_PI;

const movedTo = (state: RunState, seq: number): string | null => state.acts.moved.findLast((m) => m.tap === seq)?.checkpoint ?? null;

function isDoubleTouch({ judged }: TapContext, tap: TapAct): boolean {
  for (let i = judged.length - 1; i >= 0; i--) {
    const earlier = judged[i] as JudgedTap;
    if (tap.t - earlier.tap.t >= DOUBLE_TOUCH_US) return false;
    if (earlier.verdict.verdict === 'used' || earlier.verdict.verdict === 'doubted') return true;
  }
  return false;
}

/** Index of the place the tap belongs to, or why there is none. */
function choosePlace(
  context: TapContext,
  tap: TapAct,
  measured: number,
  explicit: string | null,
  reach: number,
): number | 'repeated' | 'no place near' {
  const { state, model, held } = context;
  const taken = (i: number): boolean => {
    const id = (model.places[i] as Place).checkpoint.id;
    const claimed = state.acts.moved.some((m) => m.checkpoint === id && m.tap !== tap.seq && stands(state, m.tap, id));
    return held.has(i) || (explicit === null && claimed);
  };
  const wanted = explicit ?? tap.checkpoint;
  const named = wanted === null ? -1 : model.places.findIndex((p) => p.checkpoint.id === wanted);
  if (named >= 0) return taken(named) ? 'repeated' : named;
  let nearest = -1;
  let nearestTaken = false;
  model.places.forEach((place, i) => {
    const away = Math.abs(place.d - measured);
    if (away > reach || state.acts.skipped.includes(place.checkpoint.id)) return;
    if (taken(i)) nearestTaken = true;
    else if (nearest < 0 || away < Math.abs((model.places[nearest] as Place).d - measured)) nearest = i;
  });
  if (nearest >= 0) return nearest;
  return nearestTaken ? 'repeated' : 'no place near';
}

/** A tap moved to a place holds it only while it is not voided or moved on. */
const stands = (state: RunState, seq: number, checkpoint: string): boolean =>
  !state.acts.voided.includes(seq) && movedTo(state, seq) === checkpoint && state.acts.taps.some((t) => t.seq === seq);
