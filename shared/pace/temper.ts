import type { Temper } from '#shared/pace/belief.ts';

/**
 * What this hand and these tyres are like, judged from all taps so far: each way in which they may differ from the usual is tried
 * on the whole run, and counts by how probable it makes the taps. With few taps the prior decides.
 */

/** Factors on the variance of the scatter and of the scale's wander, and how probable each is before the first tap. Judgement, no source. */
const SCATTERS = [
  { factor: 0.7, prior: 0.45 },
  { factor: 4, prior: 0.55 },
] as const;
const WANDERS = [
  { factor: 0.3, prior: 0.4 },
  { factor: 2, prior: 0.3 },
  { factor: 7, prior: 0.3 },
] as const;

/** Where GNSS speed is permitted it shows the scale all the time: its wander need not be guessed, and what is shown does not hang on when it is first heard. */
const SHOWN = [{ factor: 2, prior: 1 }] as const;

/** `byGnss`: the scale is compared with GNSS speed. `costOf`: −2 ln of how probable the taps are under a temper. */
export function temperBy(byGnss: boolean, costOf: (tried: Temper) => number): Temper {
  const tried = SCATTERS.flatMap((s) =>
    (byGnss ? SHOWN : WANDERS).map((w) => {
      const temper = { scatter: s.factor, wander: w.factor };
      return { temper, cost: costOf(temper) - 2 * Math.log(s.prior * w.prior) };
    }),
  );
  const least = Math.min(...tried.map((t) => t.cost));
  const weights = tried.map((t) => Math.exp((least - t.cost) / 2));
  const all = weights.reduce((sum, w) => sum + w, 0);
  const mean = (of: (t: Temper) => number): number => tried.reduce((sum, t, i) => sum + of(t.temper) * (weights[i] as number), 0) / all;
  return { scatter: mean((t) => t.scatter), wander: mean((t) => t.wander) };
}
