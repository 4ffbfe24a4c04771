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

export interface NormalSolution {
  x: Float64Array;
  /** A⁻¹: the covariance of x when the weights are 1/variance. Row-major. */
  covariance: Float64Array;
  logDeterminant: number;
  /** Weighted residual sum of squares, priors included. */
  objective: number;
}

/**
 * Solves the equations by Cholesky after scaling to unit diagonal; O(size³).
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
  const l = new Float64Array(n * n);
  let logDeterminant = 0;
  for (let i = 0; i < n; i++) {
    for (let j = 0; j <= i; j++) {
      let sum = matrix[i * n + j] * scale[i] * scale[j];
      for (let k = 0; k < j; k++) sum -= l[i * n + k] * l[j * n + k];
      if (i === j) {
        if (!(sum > 1e-14)) {
          throw new InvalidInputError("not_positive_definite", `Unknown ${i} depends on the ones before it.`);
        }
        l[i * n + i] = Math.sqrt(sum);
        logDeterminant += Math.log(sum) - 2 * Math.log(scale[i]);
      } else l[i * n + j] = sum / l[j * n + j];
    }
  }
  // Inverse of L in place of a second matrix, then A⁻¹ = L⁻ᵀ·L⁻¹ with the scaling undone.
  const inverse = new Float64Array(n * n);
  for (let j = 0; j < n; j++) {
    inverse[j * n + j] = 1 / l[j * n + j];
    for (let i = j + 1; i < n; i++) {
      let sum = 0;
      for (let k = j; k < i; k++) sum -= l[i * n + k] * inverse[k * n + j];
      inverse[i * n + j] = sum / l[i * n + i];
    }
  }
  const covariance = new Float64Array(n * n);
  for (let i = 0; i < n; i++) {
    for (let j = 0; j <= i; j++) {
      let sum = 0;
      for (let k = i; k < n; k++) sum += inverse[k * n + i] * inverse[k * n + j];
      covariance[i * n + j] = sum * scale[i] * scale[j];
      covariance[j * n + i] = covariance[i * n + j];
    }
  }
  const x = new Float64Array(n);
  let explained = 0;
  for (let i = 0; i < n; i++) {
    let sum = 0;
    for (let j = 0; j < n; j++) sum += covariance[i * n + j] * right[j];
    x[i] = sum;
    explained += sum * right[i];
  }
  return { x, covariance, logDeterminant, objective: Math.max(0, equations.sumOfSquares - explained) };
}
