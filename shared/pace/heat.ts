/**
 * How cold the tyres are: 1 after a long rest, falling towards 0 as the car drives, rising again while it stands. Cold tyres are
 * smaller: counts come closer together. Own model (one time constant each way); no source.
 */

/** Driving takes a tyre to within 1/e of warm in about this long, s; standing lets it cool more slowly. */
const WARMING_S = 400;
const COOLING_S = 1500;
/** Slower than this the tyre does no work worth speaking of, m/s. */
const WORKS_FROM = 3;

/** Coldness after `dt` seconds at `speed` m/s. */
export function coldnessAfter(coldness: number, dt: number, speed: number): number {
  if (!(dt > 0)) return coldness;
  return speed >= WORKS_FROM ? coldness * Math.exp(-dt / WARMING_S) : 1 - (1 - coldness) * Math.exp(-dt / COOLING_S);
}

/** Growth and slip by speed go with its square; stated at this speed, m/s. */
const STATED_AT = 50;

/** (v / 50 m/s)². */
export const speedSquare = (speed: number): number => (speed / STATED_AT) ** 2;
