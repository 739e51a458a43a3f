/**
 * How late GNSS tells of the car, learnt from the motion itself: while speed changes, a reading that is δ s later than held is
 * v·δ behind. One small Kalman filter over three unknowns: what GNSS's metres should read now, how many metres by GNSS the
 * wheel's nominal metre is, and the lateness. Own derivation: reading(t) = ρ·wheel(t − L) + constant, made linear about the
 * lateness held so far.
 */
export interface Latency {
  /** Expected reading of GNSS's metres, m; GNSS metres per nominal metre of the wheel; lateness, s. */
  reading: number;
  ratio: number;
  lag: number;
  /** Covariance, upper triangle by rows: reading, ratio, lag. */
  p: [number, number, number, number, number, number];
}

/** A sample against the one before. */
export interface Step {
  /** Nominal metres by the wheel, metres by whatever stood in for it, as of the lateness held. */
  readonly wheel: number;
  readonly other: number;
  /** Change of speed, m/s. */
  readonly dv: number;
  /** Seconds, and Σ of squared fix intervals, s². */
  readonly dt: number;
  readonly spread: number;
  /** How unsteady the wheel's grip is: see `gripNoise`. */
  readonly grip: number;
}

/** The nominal scale may be off by this, one sigma. */
const RATIO_SIGMA = 0.01;

export const makeLatency = (lag: number, sigma: number): Latency => ({
  reading: 0,
  ratio: 1,
  lag,
  p: [1, 0, 0, RATIO_SIGMA * RATIO_SIGMA, 0, sigma * sigma],
});

/** Noise of GNSS speed, independent from fix to fix, m/s; and what its metres gather otherwise, m²/s. Judgement, no source. */
const WHITE = 0.08;
const WANDER = 0.002;
/** The ratio wanders as tyres warm and receivers wander: variance per second. So does the lateness, s²/s. */
const RATIO_WANDER = 1e-6 / 60;
const LAG_WANDER = 8e-5 / 60;
/** Noise of one reading against the wheel: instants (s), metres. */
const INSTANT = 0.004;
const METRES = 0.1;

/** Variance of one reading against the wheel, m²: the count is whole at both ends, instants jitter. */
export const readingNoise = (perPulse: number, v: number): number => METRES * METRES + (perPulse * perPulse) / 6 + (INSTANT * v) ** 2;

const SLOW = 10;
/**
 * Variance per second by which counts and road may come apart, m²/s: wheels that pull away spin or scrub below 10 m/s, and
 * nothing about lateness is to be learnt from that.
 */
export const gripNoise = (driven: boolean, v: number): number => (v < SLOW && v > 0.5 ? (driven ? 4 : 0.3) : driven ? 0.01 : 0.001);

/** Carries the filter to the next sample. */
export function predict(f: Latency, s: Step): void {
  const [cc, cr, cl, rr, rl, ll] = f.p;
  f.reading += f.ratio * s.wheel + s.other;
  const [a, b] = [s.wheel, -s.dv];
  f.p = [
    cc + 2 * (a * cr + b * cl + a * b * rl) + a * a * rr + b * b * ll + WHITE * WHITE * s.spread + (WANDER + s.grip) * s.dt,
    cr + a * rr + b * rl,
    cl + a * rl + b * ll,
    rr + RATIO_WANDER * s.dt,
    rl,
    ll + LAG_WANDER * s.dt,
  ];
}

/** Latest that is believed, s. */
const LATEST = 2.5;
/** A reading further off than this many sigma teaches nothing. */
const GATE = 4;

/** Takes a reading in; true when it taught. */
export function learn(f: Latency, reading: number, noise: number): boolean {
  const [cc, cr, cl, rr, rl, ll] = f.p;
  const s = cc + noise;
  const off = reading - f.reading;
  if (off * off > GATE * GATE * s) return false;
  const [k0, k1, k2] = [cc / s, cr / s, cl / s];
  f.reading += k0 * off;
  f.ratio += k1 * off;
  f.lag = Math.min(Math.max(f.lag + k2 * off, 0), LATEST);
  f.p = [cc - k0 * cc, cr - k0 * cr, cl - k0 * cl, rr - k1 * cr, rl - k1 * cl, ll - k2 * cl];
  return true;
}

/** The two were not comparable for a while: begins anew at a reading, keeping what is known of ratio and lateness. */
export function rebase(f: Latency, reading: number, noise: number): void {
  f.reading = reading;
  f.p = [noise, 0, 0, f.p[3], f.p[4], f.p[5]];
}

/** Lateness is as unknown as before anything was learnt. */
export function doubtLag(f: Latency, sigma: number): void {
  f.p[5] = Math.max(f.p[5], sigma * sigma);
  f.p[2] = 0;
  f.p[4] = 0;
}

/** Never believed to be better known than this, s. */
const LEAST_SIGMA = 0.004;

export const lagSigma = (f: Latency): number => Math.hypot(Math.sqrt(Math.max(0, f.p[5])), LEAST_SIGMA);
