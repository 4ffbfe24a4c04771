import { type BandMatrix, bandedCholesky, bandedSolve, bandMatrix } from "@/lib/signal/banded-cholesky";
import { bandedInverse } from "@/lib/signal/banded-inverse";

/** Adds `lambda`·DᵀD of the `order`-th difference to a band matrix; `scale(k)` weights each difference row (default 1). */
export function addDifferencePenalty(
  matrix: BandMatrix,
  order: number,
  lambda: number,
  scale?: (row: number) => number,
): void {
  const row = new Float64Array(order + 1);
  for (let d = 0; d <= order; d++) row[d] = (d % 2 === 0 ? 1 : -1) * binomial(order, d);
  const w1 = matrix.width + 1;
  for (let r = 0; r + order < matrix.size; r++) {
    const weight = lambda * (scale ? scale(r) : 1);
    for (let i = 0; i <= order; i++) {
      for (let j = 0; j <= i; j++) matrix.band[(r + i) * w1 + (i - j)] += weight * row[i] * row[j];
    }
  }
}

function binomial(n: number, k: number): number {
  let value = 1;
  for (let i = 1; i <= k; i++) value = (value * (n - k + i)) / i;
  return value;
}

/**
 * Whittaker smoother z = (W + λ·DᵀD)⁻¹·W·y with D the `order`-th difference of equally spaced samples.
 * `weights` default to 1; a NaN value counts as weight 0, so a gap is filled by the smoothest bridge.
 * `lambda` belongs to sample units: for the same smoothing in seconds it scales with step^(−2·order). O(n · order²).
 * `effectiveDf` is the trace of the smoother. Source: Whittaker 1923; Eilers 2003, Analytical Chemistry 75.
 */
export function whittaker(
  values: Float64Array,
  lambda: number,
  order: 1 | 2 | 3,
  weights?: Float64Array,
): { smooth: Float64Array; effectiveDf: number } {
  const n = values.length;
  const matrix = bandMatrix(n, order);
  const right = new Float64Array(n);
  const weight = new Float64Array(n);
  for (let i = 0; i < n; i++) {
    const w = Number.isNaN(values[i]) ? 0 : (weights?.[i] ?? 1);
    weight[i] = w;
    matrix.band[i * (order + 1)] = w;
    right[i] = w === 0 ? 0 : w * values[i];
  }
  addDifferencePenalty(matrix, order, lambda);
  const factor = bandedCholesky(matrix);
  const inverse = bandedInverse(factor);
  let effectiveDf = 0;
  for (let i = 0; i < n; i++) effectiveDf += weight[i] * inverse.band[i * (order + 1)];
  return { smooth: bandedSolve(factor, right), effectiveDf };
}
