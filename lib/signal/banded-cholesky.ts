import { InvalidInputError } from "@/lib/errors";

/**
 * A symmetric positive definite band matrix, lower part: `band[i * (width + 1) + d]` is the element (i, i − d).
 * `width` counts the sub-diagonals.
 */
export interface BandMatrix {
  size: number;
  width: number;
  band: Float64Array;
}

/** A zero band matrix of `size` rows with `width` sub-diagonals. */
export function bandMatrix(size: number, width: number): BandMatrix {
  return { size, width, band: new Float64Array(size * (width + 1)) };
}

/**
 * Cholesky factor L (A = L·Lᵀ) of a band matrix, same storage. O(size · width²).
 * Throws InvalidInputError `not_positive_definite` naming the row. Source: Golub and Van Loan, Matrix Computations, 4.3.
 */
export function bandedCholesky(matrix: BandMatrix): BandMatrix {
  const { size, width } = matrix;
  const w1 = width + 1;
  const l = matrix.band.slice();
  for (let i = 0; i < size; i++) {
    const first = Math.max(0, i - width);
    for (let j = first; j <= i; j++) {
      let sum = l[i * w1 + (i - j)];
      for (let k = Math.max(first, j - width); k < j; k++) sum -= l[i * w1 + (i - k)] * l[j * w1 + (j - k)];
      if (j === i) {
        if (!(sum > 0)) {
          throw new InvalidInputError(
            "not_positive_definite",
            `Row ${i} of the system carries no information.`,
          );
        }
        l[i * w1] = Math.sqrt(sum);
      } else {
        l[i * w1 + (i - j)] = sum / l[j * w1];
      }
    }
  }
  return { size, width, band: l };
}

/** Solves L·Lᵀ·x = b for a factor from `bandedCholesky`. O(size · width). */
export function bandedSolve(factor: BandMatrix, b: Float64Array): Float64Array {
  const { size, width, band } = factor;
  const w1 = width + 1;
  const x = b.slice();
  for (let i = 0; i < size; i++) {
    let sum = x[i];
    for (let k = Math.max(0, i - width); k < i; k++) sum -= band[i * w1 + (i - k)] * x[k];
    x[i] = sum / band[i * w1];
  }
  for (let i = size - 1; i >= 0; i--) {
    let sum = x[i];
    for (let k = Math.min(size - 1, i + width); k > i; k--) sum -= band[k * w1 + (k - i)] * x[k];
    x[i] = sum / band[i * w1];
  }
  return x;
}

/** Natural logarithm of the determinant of A from its factor. */
export function bandedLogDeterminant(factor: BandMatrix): number {
  let sum = 0;
  for (let i = 0; i < factor.size; i++) sum += Math.log(factor.band[i * (factor.width + 1)]);
  return 2 * sum;
}
