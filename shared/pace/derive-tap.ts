import type { CourseModel, Place } from '#shared/pace/course-model.ts';
import { correctScale } from '#shared/pace/derive-scale.ts';
import { distanceOf, distanceVariance, lossVariance } from '#shared/pace/distance.ts';
import type { Anchor, DerivedTap, PlacePassing, RunState, TapAct } from '#shared/pace/run-state.ts';
import { placeSigma } from '#shared/pace/scale.ts';

/** What becomes of one tap, given everything before it and what it is taken for. */

/**
 * plain: a touch at its place, which teaches the scale by its rule. rescale: the same, but the tyre had changed more than tyres
 * do, so less is thought of the scale before it. jump: right, but the distance had jumped before it (counts lost or wrong), so
 * it places and teaches nothing. mistaken: a touch too late or at another place.
 */
export type TakenFor = 'plain' | 'rescale' | 'jump' | 'mistaken';

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
/** Variance of reading between two pulses, m². */
const PULSE_VARIANCE = 0.1;
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
  const scale = anchor?.mmPerPulse ?? state.pack.wheel.mmPerPulse;
  const unused = (
    verdict: DerivedTap['verdict'],
    cost = 0,
    checkpoint = tap.checkpoint,
    moved = 0,
    strain: number | null = null,
  ): JudgedTap => ({
    tap,
    verdict: { seq: tap.seq, checkpoint, verdict, moved, scaleBefore: scale, scaleAfter: scale, scaleKept: null },
    use: null,
    strain,
    cost,
  });
  if (state.acts.voided.includes(tap.seq)) return unused('voided');
  if (tap.raw === null) return unused('provisional');
  if (anchor === undefined || tap.t < anchor.at) return unused('no place near');
  const explicit = movedTo(state, tap.seq);
  const trusted = explicit !== null || state.acts.accepted.includes(tap.seq);
  if (!trusted && isDoubleTouch(context, tap)) return unused('repeated');
  const measured = distanceOf(anchor, tap.raw);
  const grown = distanceVariance(anchor, tap.raw, tap.t, (anchors[0] as Anchor).at, state.odometer.losses);
  const choice = choosePlace(context, tap, measured, explicit, reachOf(grown));
  if (choice === 'repeated') return unused(choice);
  if (choice === 'no place near') return unused(choice, COST_OF_MISTAKE);
  const place = context.model.places[choice] as Place;
  const moved = place.d - measured;
  const sigma = placeSigma(state.pack.settings.tapScatterMs / 1000, tap.raw.v, place.surveySigma);
  const variance = grown + sigma * sigma + PULSE_VARIANCE;
  const strain = (moved * moved) / variance;
  if (takenFor === 'mistaken' && !trusted) return unused('doubted', COST_OF_MISTAKE, place.checkpoint.id, moved, strain);
  const story = trusted ? (strain > GATE_SIGMAS * GATE_SIGMAS ? 'jump' : 'plain') : takenFor;
  const rarity = story === 'plain' || trusted ? 0 : COST_OF_JUMP;
  const cost = rarity + likelihoodCost(moved, story === 'plain' ? variance : variance + moved * moved);
  const used = use(context, tap, { anchor, index: choice, place, sigma, moved, story });
  return { tap, ...used, strain: trusted ? null : strain, cost };
}

const likelihoodCost = (misfit: number, variance: number): number => (misfit * misfit) / variance + Math.log(variance) + LN_2_PI;

interface Use {
  readonly anchor: Anchor;
  readonly index: number;
  readonly place: Place;
  readonly sigma: number;
  readonly moved: number;
  readonly story: TakenFor;
}

function use(
  { state, anchors }: TapContext,
  tap: TapAct,
  { anchor, index, place, sigma, moved, story }: Use,
): Pick<JudgedTap, 'verdict' | 'use'> {
  const raw = tap.raw as NonNullable<TapAct['raw']>;
  const at = Math.round(tap.t);
  const { duty, id } = place.checkpoint;
  const { kept, ...scale } = correctScale({
    rule: state.pack.settings.scaleRule,
    // after a jump the counts of the leg are not to be trusted: it places, and must not teach the scale
    duty: story === 'jump' && duty === 'scale' ? 'place' : duty,
    anchor,
    raw,
    at,
    d: place.d,
    sigma,
    movedAt: (anchors[0] as Anchor).at,
    lost: lossVariance(state.odometer.losses, anchor.scaleFrom.at, at),
    changed: story === 'rescale' && place.d > anchor.d ? (moved / (place.d - anchor.d)) ** 2 : 0,
  });
  const here = { at, d: place.d, w: raw.w, g: raw.g };
  const scales = { scaleBefore: anchor.mmPerPulse, scaleAfter: scale.mmPerPulse, scaleKept: kept };
  return {
    verdict: { seq: tap.seq, checkpoint: id, verdict: 'used', moved, ...scales },
    use: {
      place: index,
      passing: { by: 'tap', at, tap: tap.seq, measured: place.d - moved, moved, ...scales },
      anchor: {
        ...here,
        ...scale,
        variance: sigma * sigma + PULSE_VARIANCE,
        scaleFrom: kept === null || story === 'jump' || duty === 'settle' ? here : anchor.scaleFrom,
      },
    },
  };
}

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
