import type { Raw } from '#shared/pace/track.ts';

/**
 * Every so often the wheel and GNSS are compared, and a projected position is kept: raw facts for the estimator, whatever scale
 * turns out to be right. Frozen once made. Made by the odometer, in order of instant, only while the car moves.
 */
export interface SourceNode extends Raw {
  /** Session microseconds; the raw values are the track's at that instant. */
  readonly at: number;
  /** GNSS's own metres since the first fix, at that instant, its lateness taken off. */
  readonly gnssMetres: number;
  /**
   * Variance in m² of the GNSS metres since the node before (receiver noise and what is unsure of its lateness), where both
   * sources were whole over all of that stretch; null where they may not be compared.
   */
  readonly compared: number | null;
  /** Official distance of the nose by the position projected onto the surveyed geometry, one sigma in metres; null without. */
  readonly position: { readonly d: number; readonly sigma: number } | null;
}

/** Nodes are this far apart, µs. */
export const NODE_US = 30_000_000;
