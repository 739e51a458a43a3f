import type { CourseModel } from '#shared/pace/course-model.ts';
import { firstNodeAfter } from '#shared/pace/estimate-nodes.ts';
import type { Temper } from '#shared/pace/estimator.ts';
import type { Anchor, RunState, TapAct } from '#shared/pace/run-state.ts';
import type { Story } from '#shared/pace/tap-judge.ts';

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

/** A pure function of what it is given, remembered for the last run asked: most derivations ask the same again. */
const remembered = new WeakMap<RunState, { key: string; temper: Temper }>();

interface Taps {
  readonly model: CourseModel;
  readonly first: Anchor | null;
  readonly queue: readonly TapAct[];
}

/** `costOf`: −2 ln of how probable the taps are under a temper. */
export function temperOf(state: RunState, { model, first, queue }: Taps, story: Story, costOf: (tried: Temper) => number): Temper {
  const key = keyOf(state, { model, first, queue }, story);
  const known = remembered.get(state);
  if (known?.key === key) return known.temper;
  const tried = SCATTERS.flatMap((s) =>
    WANDERS.map((w) => {
      const temper = { scatter: s.factor, wander: w.factor };
      return { temper, cost: costOf(temper) - 2 * Math.log(s.prior * w.prior) };
    }),
  );
  const least = Math.min(...tried.map((t) => t.cost));
  const weights = tried.map((t) => Math.exp((least - t.cost) / 2));
  const all = weights.reduce((sum, w) => sum + w, 0);
  const mean = (of: (t: Temper) => number): number => tried.reduce((sum, t, i) => sum + of(t.temper) * (weights[i] as number), 0) / all;
  const temper = { scatter: mean((t) => t.scatter), wander: mean((t) => t.wander) };
  remembered.set(state, { key, temper });
  return temper;
}

/** Everything that the taps' cost depends on. */
function keyOf({ acts, odometer }: RunState, { model, first, queue }: Taps, story: Story): string {
  const last = queue[queue.length - 1];
  return JSON.stringify([
    [...story],
    queue.map(({ seq, t, raw }) => [seq, t, raw]),
    [acts.voided, acts.moved, acts.accepted, acts.skipped],
    [model.version, odometer.bridges, odometer.losses.length, firstNodeAfter(odometer.sourceNodes, last?.t ?? 0)],
    [first?.at, first?.d, first?.w, first?.g],
  ]);
}
