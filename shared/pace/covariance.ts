/**
 * Small symmetric covariance matrices, row by row in one array: what the estimator needs and no more. Everything works in place on
 * arrays that are made once, for the estimator runs through whole drives again and again.
 */

export type Covariance = number[];
export type Row = Float64Array;

/** out ← P·h. */
export function times(p: Covariance, n: number, h: Row, out: Row): void {
  out.fill(0);
  for (let j = 0; j < n; j++) {
    const x = h[j] as number;
    if (x === 0) continue;
    for (let i = 0, at = j * n; i < n; i++, at++) out[i] = (out[i] as number) + (p[at] as number) * x;
  }
}

export function dot(a: Row, b: Row): number {
  let sum = 0;
  for (let i = 0; i < a.length; i++) sum += (a[i] as number) * (b[i] as number);
  return sum;
}

/** P ← F·P·Fᵀ where F is the identity but for its first row `f` (f[0] = 1). */
export function carryFirst(p: Covariance, n: number, f: Row, scratch: Row): void {
  times(p, n, f, scratch);
  const first = dot(scratch, f);
  for (let i = 1; i < n; i++) {
    p[i] = scratch[i] as number;
    p[i * n] = scratch[i] as number;
  }
  p[0] = first;
}

/** P ← P with row and column `i` times `factor`. */
export function shrink(p: Covariance, n: number, i: number, factor: number): void {
  for (let j = 0; j < n; j++) {
    p[i * n + j] = (p[i * n + j] as number) * factor;
    p[j * n + i] = (p[j * n + i] as number) * factor;
  }
}

/** Adds to P(i, j) and, off the diagonal, to P(j, i). */
export function add(p: Covariance, n: number, i: number, j: number, value: number): void {
  p[i * n + j] = (p[i * n + j] as number) + value;
  if (i !== j) p[j * n + i] = (p[j * n + i] as number) + value;
}

/**
 * Takes in a measurement whose prediction has variance `s` and covariance `c` with the state, by the gain `k`: any gain, the best
 * one being c/s. P ← P − k·cᵀ − c·kᵀ + s·k·kᵀ (Joseph's form, multiplied out); symmetric by construction.
 */
export function absorb(p: Covariance, n: number, c: Row, k: Row, s: number): void {
  for (let i = 0; i < n; i++) {
    const ki = k[i] as number;
    const ci = c[i] as number;
    for (let j = 0; j <= i; j++) {
      const kj = k[j] as number;
      const value = (p[i * n + j] as number) - ki * (c[j] as number) - ci * kj + s * ki * kj;
      p[i * n + j] = value;
      p[j * n + i] = value;
    }
  }
}
