import { InvalidInputError } from "@/lib/errors";

/** Dense normal equations A·x = b of weighted rows, with priors; `size` unknowns, A row-major and symmetric. */
export interface NormalEquations {
  size: number;
  matrix: Float64Array;
  right: Float64Array;
  sumOfSquares: number;
  rows: number;
}

/** Empty normal equations for `size` unknowns. */
export function normalEquations(size: number): NormalEquations {
  return {
    size,
    matrix: new Float64Array(size * size),
    right: new Float64Array(size),
    sumOfSquares: 0,
    rows: 0,
  };
}

/** Adds a row Σ value·x[index] = `target` with weight 1/variance. `indices` and `values` have equal length. */
export function addRow(
  equations: NormalEquations,
  indices: readonly number[],
  values: readonly number[],
  target: number,
  weight: number,
): void {
  const { size, matrix, right } = equations;
  for (let a = 0; a < indices.length; a++) {
    const wa = weight * values[a];
    right[indices[a]] += wa * target;
    for (let b = 0; b < indices.length; b++) matrix[indices[a] * size + indices[b]] += wa * values[b];
  }
  equations.sumOfSquares += weight * target * target;
  equations.rows++;
}

/** Cholesky factor of normal equations scaled to unit diagonal: A = S·L·Lᵀ·S with S = 1/scale. */
interface NormalFactor {
  size: number;
  lower: Float64Array;
  scale: Float64Array;
}

export interface NormalSolution {
  x: Float64Array;
  factor: NormalFactor;
  logDeterminant: number;
  /** Weighted residual sum of squares, priors included. */
  objective: number;
}

/**
 * Solves the equations by Cholesky after scaling to unit diagonal; O(size³/6).
 * Throws InvalidInputError `not_positive_definite` when an unknown has neither data nor prior.
 * Fit for well-posed or regularised problems; for certified regression use `leastSquares`.
 */
export function solveNormal(equations: NormalEquations): NormalSolution {
  const { size: n, matrix, right } = equations;
  const scale = new Float64Array(n);
  for (let i = 0; i < n; i++) {
    const diagonal = matrix[i * n + i];
    if (!(diagonal > 0)) {
      throw new InvalidInputError("not_positive_definite", `Unknown ${i} has neither data nor prior.`);
    }
    scale[i] = 1 / Math.sqrt(diagonal);
  }
  const lower = new Float64Array(n * n);
  let logDeterminant = 0;
  for (let i = 0; i < n; i++) {
    for (let j = 0; j <= i; j++) {
      let sum = matrix[i * n + j] * scale[i] * scale[j];
      for (let k = 0; k < j; k++) sum -= lower[i * n + k] * lower[j * n + k];
      if (i !== j) lower[i * n + j] = sum / lower[j * n + j];
      else if (sum > 1e-14) {
        lower[i * n + i] = Math.sqrt(sum);
        logDeterminant += Math.log(sum) - 2 * Math.log(scale[i]);
      } else {
        throw new InvalidInputError("not_positive_definite", `Unknown ${i} depends on the ones before it.`);
      }
    }
  }
  const factor = { size: n, lower, scale };
  const half = forward(factor, right);
  let explained = 0;
  for (let i = 0; i < n; i++) explained += half[i] * half[i];
  const x = half.slice();
  for (let i = n - 1; i >= 0; i--) {
    let sum = x[i];
    for (let k = i + 1; k < n; k++) sum -= lower[k * n + i] * x[k];
    x[i] = sum / lower[i * n + i];
  }
  for (let i = 0; i < n; i++) x[i] *= scale[i];
  return { x, factor, logDeterminant, objective: Math.max(0, equations.sumOfSquares - explained) };
}

/** L⁻¹·S·b. */
function forward({ size: n, lower, scale }: NormalFactor, b: Float64Array): Float64Array {
  const y = new Float64Array(n);
  for (let i = 0; i < n; i++) {
    let sum = b[i] * scale[i];
    for (let k = 0; k < i; k++) sum -= lower[i * n + k] * y[k];
    y[i] = sum / lower[i * n + i];
  }
  return y;
}

/** Variance of the combination gᵀ·x of a solution, when the weights were 1/variance: gᵀ·A⁻¹·g. O(size²). */
export function varianceOf({ factor }: NormalSolution, gradient: Float64Array): number {
  const y = forward(factor, gradient);
  let sum = 0;
  for (let i = 0; i < y.length; i++) sum += y[i] * y[i];
  return sum;
}
