import { roundedDigits } from '#shared/course/format.ts';
import type { TapInput } from '#shared/pace/learn-lead.ts';
import type { TapRow } from '#shared/pace/run-sheet.ts';
import type { DerivedTap } from '#shared/pace/run-state.ts';

/** What a run's taps say of their scatter: the spread of one touch about the navigator's own lead. */

/** One tap of a run, as the run sheet gives it. */
export interface TapFigures {
  readonly input: TapInput;
  readonly verdict: DerivedTap['verdict'];
  /** Official less believed distance at the instant that counts, metres, before the tap was taken in. */
  readonly misfitM: number;
  /** Variance of the believed distance then, m²: without this tap's own error, the lead's part included. */
  readonly varianceM2: number;
  readonly surveySigmaM: number;
  /** m/s at the touch. */
  readonly speed: number;
}

/** The taps of a run sheet; one made by an engine that did not yet tell the figures has none. */
export const tapFigures = (taps: readonly TapRow[]): readonly TapFigures[] =>
  taps.flatMap(({ figures, verdict }) => (figures === undefined ? [] : [{ ...figures, verdict }]));

export interface Scatter {
  /** One standard deviation, ms. */
  readonly scatterMs: number;
  /** How many taps, free of every other error, this is worth. */
  readonly taps: number;
}

export interface ScatterLesson {
  readonly scatter: Scatter;
  /** Taps looked at, and left out as mistaken or too slow. */
  readonly used: number;
  readonly left: number;
  readonly sentence: string;
}

/** Nobody has compared this navigator's taps yet. Judgement, no source. */
export const UNLEARNT_SCATTER: Scatter = { scatterMs: 100, taps: 10 };

/** A tap beyond three sigmas counts as one at three: one odd touch must not decide. */
const MOST_STRAIN = 9;
/** What is known grows no heavier than this, so that a hand may change. Judgement, no source. */
const MOST_TAPS = 60;
/** Below walking pace a touch says nothing of time. */
const LEAST_SPEED = 2;
/** Hands are neither surer nor wilder than this, ms. */
const LEAST_MS = 20;
const MOST_MS = 1000;

/**
 * Scatter of one input after a run. Each tap gives (ν² − P − σ_s²)/v², which is right on average, and counts by how much of the misfit's
 * variance is the hand's own: weight (σ_t²v²/S)², the inverse variance of that figure against one with nothing else in it
 * (derivation: Var ν² = 2S²). The weights come from the figure before, so that no tap weighs itself.
 */
export function learnScatter(prior: Scatter, taps: readonly TapFigures[], input: TapInput): ScatterLesson {
  const before = (prior.scatterMs / 1000) ** 2;
  let weights = Math.min(prior.taps, MOST_TAPS);
  let sum = weights * before;
  let used = 0;
  const mine = taps.filter((t) => t.input === input && t.verdict !== 'voided' && t.verdict !== 'provisional' && t.verdict !== 'repeated');
  for (const tap of mine) {
    if (tap.verdict !== 'used' || !(tap.speed >= LEAST_SPEED)) continue;
    const v2 = tap.speed * tap.speed;
    const others = tap.varianceM2 + tap.surveySigmaM * tap.surveySigmaM;
    const all = others + before * v2;
    const weight = ((before * v2) / all) ** 2;
    sum += weight * ((Math.min(tap.misfitM * tap.misfitM, MOST_STRAIN * all) - others) / v2);
    weights += weight;
    used++;
  }
  const scatterMs = Math.min(MOST_MS, Math.max(LEAST_MS, Math.sqrt(Math.max(0, sum / weights)) * 1000));
  const scatter = { scatterMs, taps: Math.min(weights, MOST_TAPS) };
  return { scatter, used, left: mine.length - used, sentence: words(scatter, used, mine.length - used, input) };
}

function words({ scatterMs, taps }: Scatter, used: number, left: number, input: TapInput): string {
  const on = input === 'glass' ? 'on glass' : 'on the wired button';
  const spread = `Touches ${on} spread by ${roundedDigits(scatterMs / 1000, 2)} s`;
  const sure = `, known to about ${roundedDigits(100 / Math.sqrt(2 * taps), 0)} %`;
  const rest = left === 0 ? '' : `, ${left} left out`;
  return used === 0
    ? `${spread}; this run had no tap to learn from${rest}.`
    : `${spread}${sure}, with ${used} ${used === 1 ? 'tap' : 'taps'} of this run${rest}.`;
}
