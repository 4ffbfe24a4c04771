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

/** What is left of a column beside the ones before it, as a share of its length; above this, one solution is exact to rounding. */
const WELL_CONDITIONED = 0.1;

/**
 * Least squares by Householder QR of X (`rows` × `columns`, row-major), with one step of iterative
 * refinement unless the columns are well apart. Columns that are (nearly) dependent raise InvalidInputError `rank_deficient` naming the column.
 * No intercept is added. O(rows · columns²). Source: Golub and Van Loan, Matrix Computations, 5.3.
 */
export function leastSquares(x: Float64Array, y: Float64Array, columns: number): LeastSquaresFit {
  const rows = y.length;
  if (x.length !== rows * columns || rows < columns) {
    throw new InvalidInputError("too_few_rows", `${rows} rows can't fit ${columns} coefficients.`);
  }
  // Column after column: the inner loops run over neighbours.
  const q = new Float64Array(x.length);
  const length = new Float64Array(columns);
  for (let j = 0; j < columns; j++) {
    const column = q.subarray(j * rows, (j + 1) * rows);
    takeColumn(column, x, j, columns);
    length[j] = Math.sqrt(dot(column, column, 0));
  }
  const diagonal = new Float64Array(columns);
  for (let j = 0; j < columns; j++) {
    const reflector = q.subarray(j * rows, (j + 1) * rows);
    const norm = j === 0 ? length[0] : Math.sqrt(dot(reflector, reflector, j));
    if (!(norm > 1e-12 * length[j])) {
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
  const residualsOf = (fitted: Float64Array): Float64Array => {
    const residuals = y.slice();
    for (let j = 0; j < columns; j++) subtractColumn(residuals, fitted[j], x, j, columns);
    return residuals;
  };
  const coefficients = solve(y);
  let residuals = residualsOf(coefficients);
  if (diagonal.some((d, j) => Math.abs(d) < WELL_CONDITIONED * length[j])) {
    const correction = solve(residuals);
    for (let j = 0; j < columns; j++) coefficients[j] += correction[j];
    residuals = residualsOf(coefficients);
  }
  const inverse = inverseOfR(q, rows, diagonal);
  const unscaledCovariance = new Float64Array(columns * columns);
  for (let a = 0; a < columns; a++) {
    for (let b = 0; b < columns; b++) {
      let sum = 0;
      for (let k = Math.max(a, b); k < columns; k++)
        sum += inverse[a * columns + k] * inverse[b * columns + k];
      unscaledCovariance[a * columns + b] = sum;
    }
  }
  const df = rows - columns;
  const residualSd = df > 0 ? Math.sqrt(dot(residuals, residuals, 0) / df) : Number.NaN;
  return {
    coefficients,
    standardErrors: coefficients.map((_, j) => residualSd * Math.sqrt(unscaledCovariance[j * columns + j])),
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

/** Column `j` of row-major `x`. */
function takeColumn(column: Float64Array, x: Float64Array, j: number, columns: number): void {
  for (let i = 0, at = j; i < column.length; i++, at += columns) column[i] = x[at];
}

/** Takes `factor` times column `j` of row-major `x` from `target` in place. */
function subtractColumn(
  target: Float64Array,
  factor: number,
  x: Float64Array,
  j: number,
  columns: number,
): void {
  for (let i = 0, at = j; i < target.length; i++, at += columns) target[i] -= factor * x[at];
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
