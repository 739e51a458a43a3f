import { roundedDigits } from '#shared/course/format.ts';

/** What the ± beside a time says, in the car and after it: two sigma, rounded up so that it never claims too much. */
export function sureDigits(sigma: number): string {
  const decimals = 2 * sigma < 0.095 ? 2 : 1;
  const per = 10 ** decimals;
  return roundedDigits(Math.ceil(2 * sigma * per - 1e-9) / per, decimals);
}

/** `±0.1 s`, `±0.04 s`. */
export const sureText = (sigma: number): string => `±${sureDigits(sigma)} s`;
