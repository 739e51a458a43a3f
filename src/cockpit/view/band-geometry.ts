/**
 * Height of the slab between the even line and the pool's edge. The inverse hyperbolic sine is linear near zero and
 * logarithmic far out, so that tenths near zero and ten seconds both read on one scale.
 */

/** Where the scale turns from linear to logarithmic, seconds: far from the finish, and near it. */
const KNEE_FAR_S = 0.5;
const KNEE_NEAR_S = 0.08;
/** The slab is full at this many knees: 20 s far from the finish, 3.2 s near it. */
const FULL_AT_KNEES = 40;
/** The scale opens between these many seconds of target time before the finish. */
const OPENS_AT_S = 120;
const OPEN_AT_S = 30;

/** 0 far from the finish, 1 near it. `toFinishS` is the target time still to go; a run past its target stays open. */
export function openness(toFinishS: number): number {
  return Math.min(1, Math.max(0, (OPENS_AT_S - toFinishS) / (OPENS_AT_S - OPEN_AT_S)));
}

/** Share of the full height, 0..1, for an error of that many seconds (either sign). */
export function slabShare(errorS: number, open: number): number {
  const knee = KNEE_FAR_S * (KNEE_NEAR_S / KNEE_FAR_S) ** open;
  return Math.min(1, Math.asinh(Math.abs(errorS) / knee) / Math.asinh(FULL_AT_KNEES));
}

/** Signed share: positive = the pool has sunk (late, below plan), negative = it stands above the line. */
export function poolShare(errorS: number, open: number): number {
  const share = slabShare(errorS, open);
  return errorS < 0 ? -share : share;
}
