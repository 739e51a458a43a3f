import type { Outcome, SumOfSquares } from './truth.ts';

/** Many drives of one setting by one method. Times in ms; 95: not exceeded in 95 of 100 drives. */
export interface Accuracy {
  readonly finishRmsMs: number;
  readonly finish95Ms: number;
  readonly lastTenthRmsMs: number;
  /** Share of drives whose finish error is within twice the stated uncertainty; NaN where none is stated. */
  readonly within2Sigma: number;
  readonly courseRmsMs: number;
  readonly resultRmsMs: number;
  readonly result95Ms: number;
  readonly finishMedianMs: number;
  readonly drives: number;
}

export function accuracyOf(outcomes: readonly Outcome[]): Accuracy {
  const finish = outcomes.map((o) => o.finishMs);
  const result = outcomes.map((o) => o.resultMs);
  const within = outcomes.filter((o) => Math.abs(o.finishMs) <= 2 * o.sigmaMs).length;
  return {
    finishRmsMs: rms(finish),
    finish95Ms: quantile(finish, 0.95),
    lastTenthRmsMs: pooled(outcomes.map((o) => o.lastTenth)),
    within2Sigma: outcomes.some((o) => Number.isNaN(o.sigmaMs)) ? Number.NaN : within / outcomes.length,
    courseRmsMs: pooled(outcomes.map((o) => o.course)),
    resultRmsMs: rms(result),
    result95Ms: quantile(result, 0.95),
    finishMedianMs: quantile(finish, 0.5),
    drives: outcomes.length,
  };
}

export const rms = (values: readonly number[]): number => Math.sqrt(values.reduce((sum, v) => sum + v * v, 0) / values.length);

function pooled(sums: readonly SumOfSquares[]): number {
  return Math.sqrt(sums.reduce((sum, s) => sum + s.sum, 0) / sums.reduce((n, s) => n + s.n, 0));
}

/** Of the absolute values: the least that is not exceeded by that share of them. */
function quantile(values: readonly number[], share: number): number {
  const sorted = values.map(Math.abs).sort((a, b) => a - b);
  return sorted[Math.min(sorted.length - 1, Math.ceil(share * sorted.length) - 1)] ?? Number.NaN;
}
