/** Small symmetric covariance matrices, row by row in one array: what the estimator needs and no more. */

export type Covariance = number[];

/** P·h of a sparse row `h` (undefined = 0). */
export function times(p: Covariance, n: number, h: readonly number[]): number[] {
  const out = new Array<number>(n).fill(0);
  for (let j = 0; j < n; j++) {
    const x = h[j] as number;
    if (x === 0) continue;
    for (let i = 0; i < n; i++) out[i] = (out[i] as number) + (p[i * n + j] as number) * x;
  }
  return out;
}

export function dot(a: readonly number[], b: readonly number[]): number {
  let sum = 0;
  for (let i = 0; i < a.length; i++) sum += (a[i] as number) * (b[i] as number);
  return sum;
}

/** P ← F·P·Fᵀ where F is the identity but for its first row `f` (f[0] = 1). In place. */
export function carryFirst(p: Covariance, n: number, f: readonly number[]): void {
  const row = times(p, n, f);
  const first = dot(row, f);
  for (let i = 1; i < n; i++) {
    p[i] = row[i] as number;
    p[i * n] = row[i] as number;
  }
  p[0] = first;
}

/** P ← P with row and column `i` times `factor`. In place. */
export function shrink(p: Covariance, n: number, i: number, factor: number): void {
  for (let j = 0; j < n; j++) {
    p[i * n + j] = (p[i * n + j] as number) * factor;
    p[j * n + i] = (p[j * n + i] as number) * factor;
  }
}

/** Adds to P(i, j) and, off the diagonal, to P(j, i). In place. */
export function add(p: Covariance, n: number, i: number, j: number, value: number): void {
  p[i * n + j] = (p[i * n + j] as number) + value;
  if (i !== j) p[j * n + i] = (p[j * n + i] as number) + value;
}

/**
 * Takes in a measurement whose prediction has variance `s` and covariance `c` with the state, by the gain `k`: any gain, the best
 * one being c/s. P ← P − k·cᵀ − c·kᵀ + s·k·kᵀ (Joseph's form, multiplied out). In place, symmetric by construction.
 */
export function absorb(p: Covariance, n: number, c: readonly number[], k: readonly number[], s: number): void {
  for (let i = 0; i < n; i++) {
    const [ki, ci] = [k[i] as number, c[i] as number];
    for (let j = 0; j <= i; j++) {
      const [kj, cj] = [k[j] as number, c[j] as number];
      const value = (p[i * n + j] as number) - ki * cj - ci * kj + s * ki * kj;
      p[i * n + j] = value;
      p[j * n + i] = value;
    }
  }
}
