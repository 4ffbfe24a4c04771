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

/**
 * Least squares by Householder QR of column-scaled X (`rows` × `columns`, row-major), with one step of iterative
 * refinement. Columns that are (nearly) dependent raise InvalidInputError `rank_deficient` naming the column.
 * No intercept is added. O(rows · columns²). Source: Golub and Van Loan, Matrix Computations, 5.3.
 */
export function leastSquares(x: Float64Array, y: Float64Array, columns: number): LeastSquaresFit {
  const rows = y.length;
  if (x.length !== rows * columns || rows < columns) {
    throw new InvalidInputError("too_few_rows", `${rows} rows can't fit ${columns} coefficients.`);
  }
  const scale = new Float64Array(columns);
  for (let j = 0; j < columns; j++) {
    let sum = 0;
    for (let i = 0; i < rows; i++) sum += x[i * columns + j] ** 2;
    scale[j] = Math.sqrt(sum) || 1;
  }
  const q = new Float64Array(x.length);
  for (let i = 0; i < rows; i++)
    for (let j = 0; j < columns; j++) q[i * columns + j] = x[i * columns + j] / scale[j];
  const diagonal = new Float64Array(columns);
  for (let j = 0; j < columns; j++) {
    let norm = 0;
    for (let i = j; i < rows; i++) norm += q[i * columns + j] ** 2;
    norm = Math.sqrt(norm);
    if (!(norm > 1e-12)) {
      throw new InvalidInputError(
        "rank_deficient",
        `Column ${j + 1} of the regression depends on the ones before it.`,
      );
    }
    const alpha = q[j * columns + j] > 0 ? -norm : norm;
    diagonal[j] = alpha;
    q[j * columns + j] -= alpha;
    const beta = -alpha * q[j * columns + j];
    for (let k = j + 1; k < columns; k++) {
      let sum = 0;
      for (let i = j; i < rows; i++) sum += q[i * columns + j] * q[i * columns + k];
      sum /= beta;
      for (let i = j; i < rows; i++) q[i * columns + k] -= sum * q[i * columns + j];
    }
  }
  const solve = (right: Float64Array): Float64Array => {
    const b = right.slice();
    for (let j = 0; j < columns; j++) {
      let sum = 0;
      for (let i = j; i < rows; i++) sum += q[i * columns + j] * b[i];
      sum /= -diagonal[j] * q[j * columns + j];
      for (let i = j; i < rows; i++) b[i] -= sum * q[i * columns + j];
    }
    const out = new Float64Array(columns);
    for (let j = columns - 1; j >= 0; j--) {
      let sum = b[j];
      for (let k = j + 1; k < columns; k++) sum -= q[j * columns + k] * out[k];
      out[j] = sum / diagonal[j];
    }
    return out;
  };
  const residualsOf = (scaled: Float64Array): Float64Array => {
    const residuals = new Float64Array(rows);
    for (let i = 0; i < rows; i++) {
      let sum = y[i];
      for (let j = 0; j < columns; j++) sum -= (x[i * columns + j] / scale[j]) * scaled[j];
      residuals[i] = sum;
    }
    return residuals;
  };
  const scaled = solve(y);
  const correction = solve(residualsOf(scaled));
  for (let j = 0; j < columns; j++) scaled[j] += correction[j];
  const residuals = residualsOf(scaled);
  const inverse = inverseOfR(q, diagonal, columns);
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
  let sumOfSquares = 0;
  for (let i = 0; i < rows; i++) sumOfSquares += residuals[i] ** 2;
  const residualSd = df > 0 ? Math.sqrt(sumOfSquares / df) : Number.NaN;
  return {
    coefficients: scaled.map((value, j) => value / scale[j]),
    standardErrors: scaled.map((_, j) => residualSd * Math.sqrt(unscaledCovariance[j * columns + j])),
    unscaledCovariance,
    residuals,
    residualSd,
    df,
  };
}

function inverseOfR(q: Float64Array, diagonal: Float64Array, columns: number): Float64Array {
  const inverse = new Float64Array(columns * columns);
  for (let j = columns - 1; j >= 0; j--) {
    inverse[j * columns + j] = 1 / diagonal[j];
    for (let i = j - 1; i >= 0; i--) {
      let sum = 0;
      for (let k = i + 1; k <= j; k++) sum += q[i * columns + k] * inverse[k * columns + j];
      inverse[i * columns + j] = -sum / diagonal[i];
    }
  }
  return inverse;
}
