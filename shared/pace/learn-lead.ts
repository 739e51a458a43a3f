import { roundedDigits } from '#shared/course/format.ts';
import type { TapV1 } from '#shared/journal/observation.ts';

/**
 * What a finished run says of a navigator's lead: by how much the touch comes after the instant that counts (negative =
 * before it). One lead for each input, as a glove finds glass and a wired button differently. All times in milliseconds.
 * Kalman's update of one figure, common knowledge of estimation theory; nothing is forgotten between events, so the gain
 * falls with every one.
 */

export type TapInput = TapV1['input'];
const INPUTS: readonly TapInput[] = ['glass', 'wired'];

export interface Lead {
  readonly leadMs: number;
  /** One standard deviation. */
  readonly sigmaMs: number;
}
export type Leads = Readonly<Record<TapInput, Lead>>;

/** The official finish against the run's own. */
export interface FinishEvidence {
  /** Time error at the finish as the run made it out, and by the officials; positive = late. */
  readonly ownMs: number;
  readonly officialMs: number;
  /** One sigma of their difference by everything but the leads: distance, survey of the finish line, both clocks. */
  readonly sigmaMs: number;
  /** The leads that the run was made out with, its own corrections to them included. */
  readonly inForceMs: Readonly<Record<TapInput, number>>;
  /**
   * By how much the finish comes late for each millisecond that a lead is too small: 1 where all taps are by that input, 0 for
   * an input without taps. By the estimator: its covariance of distance and lead at the finish over the lead's variance, over
   * target speed.
   */
  readonly share: Readonly<Record<TapInput, number>>;
}

/** A touch at a place where officials timed the car. */
export interface TimedTouch {
  readonly input: TapInput;
  /** The touch itself (no lead taken off), and the official passing of the car's nose: instants of the official clock. */
  readonly touchMs: number;
  readonly officialMs: number;
  /** The navigator's eye passes so many metres later than the nose, at so many m/s. */
  readonly seatM: number;
  readonly speed: number;
  /** Scatter of one touch, and one sigma of the official passing (clock, and place over speed). */
  readonly scatterMs: number;
  readonly sigmaMs: number;
}

export interface LeadLesson {
  readonly leads: Leads;
  /** False where the evidence was too far from everything known: the leads are those before. */
  readonly learnt: boolean;
  readonly sentence: string;
}

/** Farther off than so many sigmas tells of a mistake, not of a habit. Own judgement, no source. */
const GATE_SIGMAS = 4;

/** b += g·(own − official), with the gain from the variances. @throws RangeError if a sigma is not above zero. */
export function learnLeadFromFinish(prior: Leads, evidence: FinishEvidence): LeadLesson {
  const { share, inForceMs } = evidence;
  const expected = INPUTS.reduce((sum, i) => sum + share[i] * (prior[i].leadMs - inForceMs[i]), 0);
  return update(prior, share, evidence.ownMs - evidence.officialMs - expected, positive(evidence.sigmaMs), 'the official finish');
}

/** Touches at timed places, one after the other. @throws RangeError if a sigma is not above zero. */
export function learnLeadFromTouches(prior: Leads, touches: readonly TimedTouch[]): LeadLesson {
  let leads = prior;
  let used = 0;
  for (const touch of touches) {
    if (!(touch.speed > 0)) continue;
    const seatMs = (touch.seatM / touch.speed) * 1000;
    const misfit = touch.touchMs - touch.officialMs - seatMs - leads[touch.input].leadMs;
    const share = { glass: 0, wired: 0, [touch.input]: 1 };
    const sigma = Math.hypot(positive(touch.scatterMs), touch.sigmaMs);
    const lesson = update(leads, share, misfit, sigma, 'a timed place');
    if (lesson.learnt) used++;
    leads = lesson.leads;
  }
  const of = `${used} of ${touches.length} touches at timed places used`;
  return { leads, learnt: used > 0, sentence: used === 0 ? `Leads kept: ${of}.` : `${leadWords(leads)}: ${of}.` };
}

function update(prior: Leads, share: Readonly<Record<TapInput, number>>, misfit: number, sigma: number, by: string): LeadLesson {
  const variance = INPUTS.reduce((sum, i) => sum + (share[i] * prior[i].sigmaMs) ** 2, sigma * sigma);
  if (!(Math.abs(misfit) <= GATE_SIGMAS * Math.sqrt(variance))) {
    const off = `${seconds(Math.abs(misfit))} s off, more than a habit explains`;
    return { leads: prior, learnt: false, sentence: `Leads kept: ${by} is ${off}. Look for a wrong time or a mistaken tap.` };
  }
  const learn = (i: TapInput): Lead => {
    const { leadMs, sigmaMs } = prior[i];
    const gain = (share[i] * sigmaMs * sigmaMs) / variance;
    return { leadMs: leadMs + gain * misfit, sigmaMs: sigmaMs * Math.sqrt(1 - gain * share[i]) };
  };
  const leads = { glass: learn('glass'), wired: learn('wired') };
  return { leads, learnt: true, sentence: `${leadWords(leads)}, by ${by}.` };
}

function positive(sigma: number): number {
  if (!(sigma > 0)) throw new RangeError(`a sigma must be above zero, got ${sigma}`);
  return sigma;
}

const seconds = (ms: number): string => roundedDigits(ms / 1000, 2);

/** ± is two sigmas, as everywhere. */
function leadWords({ glass, wired }: Leads): string {
  const one = ({ leadMs, sigmaMs }: Lead): string => {
    const size = seconds(leadMs);
    const where = size === '0.00' ? 'on the place' : `${size} s ${leadMs > 0 ? 'late' : 'early'}`;
    return `${where} ±${seconds(2 * sigmaMs)} s`;
  };
  return `Touches on glass come ${one(glass)}, wired ${one(wired)}`;
}
