import { roundedDigits } from '#shared/course/format.ts';
import { fail, ok, type Result } from '#shared/result.ts';

/** The wheel scale to set up next time, from a finished run: official length against counts. */

/** A place whose official distance and count are both known: the start, every used tap, the finish by its official time. */
export interface ScalePoint {
  readonly officialM: number;
  /** Cumulative pulses there; where the run's model corrected them for cold tyres and speed, as corrected. */
  readonly pulses: number;
  /** Cumulative metres that GNSS stood in for the wheel; they teach the wheel nothing. */
  readonly gnssM: number;
  /** One sigma of the place, metres: touch scatter × speed, survey. */
  readonly sigmaM: number;
}

export interface NextScale {
  readonly mmPerPulse: number;
  /** One standard deviation as a fraction, next run's own difference included. */
  readonly scaleSigma: number;
  readonly source: 'run';
  readonly sentence: string;
}

export interface ScaleFault {
  readonly code: 'TOO_SHORT' | 'NOT_FORWARD';
  readonly message: string;
}

/** A shorter stretch says less than the tyre's own change from day to day. */
const LEAST_LENGTH_M = 1000;
/**
 * How far one wheel's scale is from the run before, one sigma as a fraction. Over the same road it was seen to spread by
 * 0.15–0.40 % in eleven passes; eleven normal figures spread by about 3.2 sigmas, and two of them differ by √2: 0.07–0.18 %.
 */
const REPEATS = 0.001;
/** Slips and lost pulses, m² per metre of leg. Own model; no source. */
const SLIPS = 6e-4;

/**
 * Least squares with weights 1/σ², slope free and intercept free: a habit common to all taps (a wrong lead) shifts every
 * place alike and leaves the slope. Variance of the slope: 1/Σw(n − n̄)² (textbook). Order of the points does not matter.
 */
export function scaleFromRun(points: readonly ScalePoint[], mmBefore: number): Result<NextScale, ScaleFault> {
  const sorted = [...points].sort((a, b) => a.officialM - b.officialM || a.pulses - b.pulses);
  const [first, last] = [sorted[0], sorted[sorted.length - 1]];
  const rolled = first === undefined || last === undefined ? 0 : last.officialM - first.officialM - (last.gnssM - first.gnssM);
  if (!(rolled >= LEAST_LENGTH_M)) {
    return fail({ code: 'TOO_SHORT', message: 'The wheel measured less than a kilometre between known places. Keep the scale you have.' });
  }
  if (sorted.some((p, i) => i > 0 && p.pulses < (sorted[i - 1] as ScalePoint).pulses)) {
    return fail({ code: 'NOT_FORWARD', message: 'Pulses run back between two places. Look at the run’s taps before taking its scale.' });
  }
  const { slope, variance } = line(sorted);
  if (!(slope > 0)) return fail({ code: 'NOT_FORWARD', message: 'No pulses were counted between the places. Keep the scale you have.' });
  const mmPerPulse = slope * 1000;
  const measured = Math.sqrt(variance / (slope * slope) + (SLIPS * rolled) / (rolled * rolled));
  const scaleSigma = Math.hypot(measured, REPEATS);
  return ok({ mmPerPulse, scaleSigma, source: 'run', sentence: words(mmPerPulse, mmBefore, scaleSigma, sorted.length, rolled) });
}

/** Rolled metres over pulses: slope in metres, and its variance. */
function line(points: readonly ScalePoint[]): { readonly slope: number; readonly variance: number } {
  const weighted = points.map((p) => ({ n: p.pulses, d: p.officialM - p.gnssM, w: 1 / (p.sigmaM * p.sigmaM) }));
  const total = weighted.reduce((sum, p) => sum + p.w, 0);
  const mean = (of: 'n' | 'd'): number => weighted.reduce((sum, p) => sum + p.w * p[of], 0) / total;
  const [n0, d0] = [mean('n'), mean('d')];
  const spread = weighted.reduce((sum, p) => sum + p.w * (p.n - n0) ** 2, 0);
  const together = weighted.reduce((sum, p) => sum + p.w * (p.n - n0) * (p.d - d0), 0);
  return spread > 0 ? { slope: together / spread, variance: 1 / spread } : { slope: 0, variance: 0 };
}

function words(mm: number, before: number, sigma: number, places: number, rolled: number): string {
  const change = (mm / before - 1) * 100;
  const digits = roundedDigits(change, 2);
  const changed = digits === '0.00' ? 'as before' : `${digits} % ${change > 0 ? 'longer' : 'shorter'} than before`;
  const from = `${places} places over ${roundedDigits(rolled / 1000, 1)} km`;
  return `${roundedDigits(mm, 3)} mm a pulse ±${roundedDigits(2 * sigma * 100, 2)} %, ${changed}, from ${from}.`;
}
