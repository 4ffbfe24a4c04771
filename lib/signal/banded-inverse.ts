import { type BandMatrix, bandMatrix } from "@/lib/signal/banded-cholesky";

/**
 * The elements of A⁻¹ inside the band, from the Cholesky factor of A; O(size · width²).
 * Source: the Takahashi recursion (Takahashi, Fagan and Chin 1973), as used for smoothing splines by Hutchinson and de Hoog 1985.
 */
export function bandedInverse(factor: BandMatrix): BandMatrix {
  const { size, width, band } = factor;
  const w1 = width + 1;
  const inverse = bandMatrix(size, width);
  const z = inverse.band;
  const at = (i: number, j: number) => (i >= j ? z[i * w1 + (i - j)] : z[j * w1 + (j - i)]);
  for (let j = size - 1; j >= 0; j--) {
    const diagonal = band[j * w1];
    const last = Math.min(size - 1, j + width);
    for (let i = last; i >= j; i--) {
      let sum = i === j ? 1 / diagonal : 0;
      for (let k = j + 1; k <= last; k++) sum -= band[k * w1 + (k - j)] * at(k, i);
      z[i * w1 + (i - j)] = sum / diagonal;
    }
  }
  return inverse;
}
