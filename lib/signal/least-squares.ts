import { InvalidInputError } from "@/lib/errors";

/** Ordinary least squares of y on the columns of X. */
export interface LeastSquaresFit {
  coefficients: Float64Array;
  standardErrors: Float64Array;
  /** (XᵀX)⁻¹, row-major p×p. */
  unscaledCovariance: Float64Array;
  residuals: Float64Array;
  /** √(residual sum of squares / df); NaN when df = 0. */
  residualSd: number;
  df: number;
}

/** What is left of a column of length 1 beside the ones before it; above this, one solution is exact to rounding. */
const WELL_CONDITIONED = 0.1;
const leastOf = (diagonal: Float64Array) => diagonal.reduce((least, d) => Math.min(least, Math.abs(d)), 1);

/**
 * Least squares by Householder QR of column-scaled X (`rows` × `columns`, row-major), with one step of iterative
 * refinement unless the columns are well apart. Columns that are (nearly) dependent raise InvalidInputError `rank_deficient` naming the column.
 * No intercept is added. O(rows · columns²). Source: Golub and Van Loan, Matrix Computations, 5.3.
 */
export function leastSquares(x: Float64Array, y: Float64Array, columns: number): LeastSquaresFit {
  const rows = y.length;
  if (x.length !== rows * columns || rows < columns) {
    throw new InvalidInputError("too_few_rows", `${rows} rows can't fit ${columns} coefficients.`);
  }
  // Column after column, each scaled to length 1: the inner loops run over neighbours.
  const q = new Float64Array(x.length);
  for (let i = 0, at = 0; i < rows; i++) for (let j = 0; j < columns; j++) q[j * rows + i] = x[at++];
  const scale = new Float64Array(columns);
  for (let j = 0; j < columns; j++) {
    const column = q.subarray(j * rows, (j + 1) * rows);
    scale[j] = Math.sqrt(dot(column, column, 0)) || 1;
    const factor = 1 / scale[j];
    for (let i = 0; i < rows; i++) column[i] *= factor;
  }
  const diagonal = new Float64Array(columns);
  for (let j = 0; j < columns; j++) {
    const reflector = q.subarray(j * rows, (j + 1) * rows);
    const norm = Math.sqrt(dot(reflector, reflector, j));
    if (!(norm > 1e-12)) {
      throw new InvalidInputError(
        "rank_deficient",
        `Column ${j + 1} of the regression depends on the ones before it.`,
      );
    }
    const alpha = reflector[j] > 0 ? -norm : norm;
    diagonal[j] = alpha;
    reflector[j] -= alpha;
    const beta = -alpha * reflector[j];
    for (let k = j + 1; k < columns; k++) {
      const column = q.subarray(k * rows, (k + 1) * rows);
      subtract(column, dot(reflector, column, j) / beta, reflector, j);
    }
  }
  const solve = (right: Float64Array): Float64Array => {
    const b = right.slice();
    for (let j = 0; j < columns; j++) {
      const reflector = q.subarray(j * rows, (j + 1) * rows);
      subtract(b, dot(reflector, b, j) / (-diagonal[j] * reflector[j]), reflector, j);
    }
    const out = new Float64Array(columns);
    for (let j = columns - 1; j >= 0; j--) {
      let sum = b[j];
      for (let k = j + 1; k < columns; k++) sum -= q[k * rows + j] * out[k];
      out[j] = sum / diagonal[j];
    }
    return out;
  };
  const residualsOf = (scaled: Float64Array): Float64Array => {
    const factors = scaled.map((value, j) => value / scale[j]);
    const residuals = y.slice();
    for (let i = 0, at = 0; i < rows; i++) {
      let rest = residuals[i];
      for (let j = 0; j < columns; j++) rest -= x[at++] * factors[j];
      residuals[i] = rest;
    }
    return residuals;
  };
  const scaled = solve(y);
  let residuals = residualsOf(scaled);
  if (leastOf(diagonal) < WELL_CONDITIONED) {
    const correction = solve(residuals);
    for (let j = 0; j < columns; j++) scaled[j] += correction[j];
    residuals = residualsOf(scaled);
  }
  const inverse = inverseOfR(q, rows, diagonal);
  const unscaledCovariance = new Float64Array(columns * columns);
  for (let a = 0; a < columns; a++) {
    for (let b = 0; b < columns; b++) {
      let sum = 0;
      for (let k = Math.max(a, b); k < columns; k++)
        sum += inverse[a * columns + k] * inverse[b * columns + k];
      unscaledCovariance[a * columns + b] = sum / (scale[a] * scale[b]);
    }
  }
  const df = rows - columns;
  const residualSd = df > 0 ? Math.sqrt(dot(residuals, residuals, 0) / df) : Number.NaN;
  return {
    coefficients: scaled.map((value, j) => value / scale[j]),
    standardErrors: scaled.map((_, j) => residualSd * Math.sqrt(unscaledCovariance[j * columns + j])),
    unscaledCovariance,
    residuals,
    residualSd,
    df,
  };
}

/**
 * Σ a[i]·b[i] from index `from` on, in four sums: one alone would wait for its own last addition. What is over comes first, so
 * that nothing follows the hot loop: the engine would compile it unseen and fall back at each call.
 */
function dot(a: Float64Array, b: Float64Array, from: number): number {
  let s0 = 0;
  let s1 = 0;
  let s2 = 0;
  let s3 = 0;
  let i = from;
  for (; (a.length - i) % 4 !== 0; i++) s0 += a[i] * b[i];
  for (; i < a.length; i += 4) {
    s0 += a[i] * b[i];
    s1 += a[i + 1] * b[i + 1];
    s2 += a[i + 2] * b[i + 2];
    s3 += a[i + 3] * b[i + 3];
  }
  return s0 + s1 + (s2 + s3);
}

/** Takes `factor` times `column` from `target` in place, from index `from` on. */
function subtract(target: Float64Array, factor: number, column: Float64Array, from: number): void {
  let i = from;
  for (; (target.length - i) % 4 !== 0; i++) target[i] -= factor * column[i];
  for (; i < target.length; i += 4) {
    target[i] -= factor * column[i];
    target[i + 1] -= factor * column[i + 1];
    target[i + 2] -= factor * column[i + 2];
    target[i + 3] -= factor * column[i + 3];
  }
}

/** R⁻¹ of the factor whose diagonal is apart and whose upper part lies in the columns of `q`. */
function inverseOfR(q: Float64Array, rows: number, diagonal: Float64Array): Float64Array {
  const columns = diagonal.length;
  const inverse = new Float64Array(columns * columns);
  for (let j = columns - 1; j >= 0; j--) {
    inverse[j * columns + j] = 1 / diagonal[j];
    for (let i = j - 1; i >= 0; i--) {
      let sum = 0;
      for (let k = i + 1; k <= j; k++) sum += q[k * rows + i] * inverse[k * columns + j];
      inverse[i * columns + j] = -sum / diagonal[i];
    }
  }
  return inverse;
}
