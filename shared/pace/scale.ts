/** The wheel scale at a place with a known distance, and when to leave it alone. mm per pulse; lengths in metres. */

/**
 * New scale = old × official leg / measured leg. Common practice, no source. Kept in float64: cutting it to five figures at
 * each place would cost metres over a long course.
 */
export const ratioScale = (mmPerPulse: number, officialLeg: number, measuredLeg: number): number =>
  mmPerPulse * (officialLeg / measuredLeg);

/** Variance per metre by which a tyre's true scale wanders (relative²/m). Own model: 0.02 % in about 3 km. */
export const SCALE_DRIFT = 1.2e-11;

export interface GainUpdate {
  readonly mmPerPulse: number;
  readonly gain: number;
  /** Relative variance of the scale afterwards. */
  readonly variance: number;
}

/**
 * The gain ratio: as much of the full ratio as the leg deserves. `variance` is the scale's relative variance with the leg's
 * drift already added, `placeVariance` one place's error in m² (both ends of the leg count).
 * Derivation: least variance of two independent estimates of the scale, s² and 2σ²/ℓ².
 */
export function gainScale(
  mmPerPulse: number,
  officialLeg: number,
  measuredLeg: number,
  variance: number,
  placeVariance: number,
): GainUpdate {
  const gain = variance / (variance + (2 * placeVariance) / (officialLeg * officialLeg));
  return { mmPerPulse: mmPerPulse * (officialLeg / measuredLeg) ** gain, gain, variance: (1 - gain) * variance };
}

/** One standard deviation of one place's distance error, metres: touch scatter (s) at speed (m/s), and the survey's own. */
export const placeSigma = (tapScatter: number, speed: number, surveySigma: number): number => Math.hypot(tapScatter * speed, surveySigma);

/** Uncertainty of the scale before the first correction of a run, and after one (relative). */
export const SCALE_SIGMA_FIRST = 0.003;
export const SCALE_SIGMA_LATER = 0.001;

/**
 * The shortest leg whose full ratio improves an equally long next leg: 2σ/σλ. Derivation: with two place errors the next leg's
 * variance is σ²[(1+ρ)²+ρ²] after the ratio, against σ² + (σλℓ')² when the scale is left alone; ρ = 1.
 */
export const shortestLeg = (sigmaPlace: number, scaleSigma: number): number => (2 * sigmaPlace) / scaleSigma;

/**
 * Survey error of a printed distance, metres: the uniform error of its last decimal (step/√12), and two metres for the survey
 * itself and for which edge of the place was meant (judgement, no source).
 */
export const surveySigma = (fineness: number): number => Math.hypot(fineness / Math.sqrt(12), 2);
