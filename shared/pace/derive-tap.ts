import type { CourseModel, Place } from '#shared/pace/course-model.ts';
import { correctScale, type ScaleOutcome } from '#shared/pace/derive-scale.ts';
import { distanceOf, distanceVariance } from '#shared/pace/distance.ts';
import type { Anchor, Derived, DerivedTap, PlacePassing, RunState, TapAct } from '#shared/pace/run-state.ts';
import { placeSigma } from '#shared/pace/scale.ts';

/** What becomes of one tap, given everything before it. */

export interface TapContext {
  readonly state: RunState;
  readonly model: CourseModel;
  readonly derived: Derived;
  readonly firstLeg: boolean;
}

export interface JudgedTap {
  readonly verdict: DerivedTap;
  /** The new anchor, where the tap is used. */
  readonly anchor: Anchor | null;
  readonly place: number;
}

/** A second touch so soon is the same hand, not another place. */
const DOUBLE_TOUCH_US = 2_000_000;
/** Beyond this many sigmas a tap is doubted: not used, offered. */
const GATE_SIGMAS = 3.5;
/** One touch is enough within this of the place, or within so many sigmas where distance is less sure. */
const LEAST_REACH_M = 150;
const REACH_SIGMAS = 4;
/** Variance of reading between two pulses, m². */
const PULSE_VARIANCE = 0.1;

/** All taps by the instant that counts. */
export const tapQueue = (state: RunState): readonly TapAct[] => [...state.acts.taps].sort((a, b) => a.t - b.t || a.seq - b.seq);

/** How far from a place a touch still belongs to it, metres either side. */
export const reachOf = (variance: number): number => Math.max(LEAST_REACH_M, REACH_SIGMAS * Math.sqrt(variance));

export function judgeTap(context: TapContext, tap: TapAct): JudgedTap {
  const { state, derived } = context;
  const anchor = derived.anchors[derived.anchors.length - 1];
  const scale = anchor?.mmPerPulse ?? state.pack.wheel.mmPerPulse;
  const plain = (verdict: DerivedTap['verdict'], checkpoint = tap.checkpoint, moved = 0): JudgedTap => ({
    verdict: { seq: tap.seq, checkpoint, verdict, moved, scaleBefore: scale, scaleAfter: scale, scaleKept: null },
    anchor: null,
    place: -1,
  });
  if (state.acts.voided.includes(tap.seq)) return plain('voided');
  if (tap.raw === null) return plain('provisional');
  if (anchor === undefined || tap.t < anchor.at) return plain('no place near');
  const explicit = movedTo(state, tap.seq);
  const trusted = explicit !== null || state.acts.accepted.includes(tap.seq);
  if (!trusted && isDoubleTouch(context, tap)) return plain('repeated');
  const measured = distanceOf(anchor, tap.raw);
  const grown = distanceVariance(anchor, tap.raw, tap.t, context.firstLeg, state.odometer.losses);
  const choice = choosePlace(context, tap, measured, explicit, reachOf(grown));
  if (typeof choice === 'string') return plain(choice);
  const place = context.model.places[choice] as Place;
  const moved = place.d - measured;
  const sigma = placeSigma(state.pack.settings.tapScatterMs / 1000, tap.raw.v, place.surveySigma);
  const doubtful = Math.abs(moved) > GATE_SIGMAS * Math.sqrt(grown + sigma * sigma + PULSE_VARIANCE);
  if (doubtful && !trusted) return plain('doubted', place.checkpoint.id, moved);
  return use(context, tap, { anchor, index: choice, place, sigma, moved, doubtful });
}

interface Use {
  readonly anchor: Anchor;
  readonly index: number;
  readonly place: Place;
  readonly sigma: number;
  readonly moved: number;
  readonly doubtful: boolean;
}

function use({ state, derived }: TapContext, tap: TapAct, { anchor, index, place, sigma, moved, doubtful }: Use): JudgedTap {
  const raw = tap.raw as NonNullable<TapAct['raw']>;
  const corrected = derived.passings.some((p) => p.by === 'tap' && p.scaleKept === null);
  const scale: ScaleOutcome = correctScale({
    rule: state.pack.settings.scaleRule,
    // a doubted tap that was accepted tells of a wrong touch or a lost count: it places, and must not teach the scale
    duty: doubtful && place.checkpoint.duty === 'scale' ? 'place' : place.checkpoint.duty,
    anchor,
    raw,
    d: place.d,
    sigma,
    corrected,
  });
  const at = Math.round(tap.t);
  const passing: PlacePassing = {
    by: 'tap',
    at,
    tap: tap.seq,
    measured: place.d - moved,
    moved,
    scaleBefore: anchor.mmPerPulse,
    scaleAfter: scale.mmPerPulse,
    scaleKept: scale.kept,
  };
  derived.passings[index] = passing;
  return {
    verdict: {
      seq: tap.seq,
      checkpoint: place.checkpoint.id,
      verdict: 'used',
      moved,
      scaleBefore: anchor.mmPerPulse,
      scaleAfter: scale.mmPerPulse,
      scaleKept: scale.kept,
    },
    anchor: {
      at,
      d: place.d,
      w: raw.w,
      g: raw.g,
      mmPerPulse: scale.mmPerPulse,
      scaleVariance: scale.variance,
      variance: sigma * sigma + PULSE_VARIANCE,
    },
    place: index,
  };
}

const movedTo = (state: RunState, seq: number): string | null => state.acts.moved.findLast((m) => m.tap === seq)?.checkpoint ?? null;

function isDoubleTouch({ state, derived }: TapContext, tap: TapAct): boolean {
  return derived.taps.some((earlier) => {
    if (earlier.verdict !== 'used' && earlier.verdict !== 'doubted') return false;
    const act = state.acts.taps.find((t) => t.seq === earlier.seq);
    return act !== undefined && Math.abs(tap.t - act.t) < DOUBLE_TOUCH_US;
  });
}

/** Index of the place the tap belongs to, or why there is none. */
function choosePlace(
  context: TapContext,
  tap: TapAct,
  measured: number,
  explicit: string | null,
  reach: number,
): number | 'repeated' | 'no place near' {
  const { state, model, derived } = context;
  const taken = (i: number): boolean => {
    const id = (model.places[i] as Place).checkpoint.id;
    const claimed = state.acts.moved.some((m) => m.checkpoint === id && m.tap !== tap.seq && stands(state, m.tap, id));
    return (derived.passings[i] as PlacePassing).by === 'tap' || (explicit === null && claimed);
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
