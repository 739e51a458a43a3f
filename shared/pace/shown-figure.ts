/** Steadies a shown figure, so that noise does not make its last digit flicker. */

/** Share of a step by which the value must overrun the rounding bound before the digit changes. */
const HYSTERESIS = 0.3;

/**
 * The whole number of steps to show for a value, both in seconds: the one shown before stays while the value is within
 * (½ + h) steps of it. Pass `before = null` after a snap, so that the new figure stands at once. `step` 0.01 for hundredths,
 * 0.1 for tenths. Rounded half away from zero from whole microseconds, so that binary dust decides nothing.
 */
export function steadySteps(before: number | null, value: number, step: 0.1 | 0.01, hysteresis = HYSTERESIS): number {
  const micro = Math.round(value * 1e6);
  const width = step === 0.01 ? 10_000 : 100_000;
  if (before !== null && Math.abs(micro - before * width) < (0.5 + hysteresis) * width) return before;
  const n = Math.floor((Math.abs(micro) + width / 2) / width);
  return micro < 0 && n !== 0 ? -n : n;
}
