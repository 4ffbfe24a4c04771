/** Value, slope and half second derivative of a local quadratic at one time. */
export interface LocalQuadratic {
  value: number;
  slope: number;
  halfSecondDerivative: number;
}

/**
 * Tricube-weighted local quadratic of unevenly spaced samples at `t0`: weights (1 − |u|³)³, u = (t − t0)/halfWidth.
 * The slope of speed over time is the acceleration. NaN samples are left out; fewer than 3 samples with weight → null.
 * `times` must rise; O(samples in the window). Source: Cleveland and Devlin 1988 (LOESS weights).
 */
export function localQuadratic(
  times: Float64Array,
  values: Float64Array,
  t0: number,
  halfWidth: number,
): LocalQuadratic | null {
  // Moments of u keep the 3×3 normal equations well scaled: |u| ≤ 1 by construction.
  const s = new Float64Array(5);
  const r = new Float64Array(3);
  let used = 0;
  for (let i = lowerBound(times, t0 - halfWidth); i < times.length && times[i] <= t0 + halfWidth; i++) {
    const u = (times[i] - t0) / halfWidth;
    const w = (1 - Math.abs(u) ** 3) ** 3;
    if (Number.isNaN(values[i]) || w <= 0) continue;
    used++;
    let power = w;
    for (let k = 0; k < 5; k++) {
      s[k] += power;
      if (k < 3) r[k] += power * values[i];
      power *= u;
    }
  }
  if (used < 3) return null;
  const [s0, s1, s2, s3, s4] = s;
  const c00 = s2 * s4 - s3 * s3;
  const c01 = s2 * s3 - s1 * s4;
  const c02 = s1 * s3 - s2 * s2;
  const determinant = s0 * c00 + s1 * c01 + s2 * c02;
  if (!(Math.abs(determinant) > 1e-14 * s0 ** 3)) return null;
  const c11 = s0 * s4 - s2 * s2;
  const c12 = s1 * s2 - s0 * s3;
  const c22 = s0 * s2 - s1 * s1;
  return {
    value: (c00 * r[0] + c01 * r[1] + c02 * r[2]) / determinant,
    slope: (c01 * r[0] + c11 * r[1] + c12 * r[2]) / determinant / halfWidth,
    halfSecondDerivative: (c02 * r[0] + c12 * r[1] + c22 * r[2]) / determinant / halfWidth ** 2,
  };
}

/** First index whose value is ≥ `x` in a rising array; length when there is none. O(log n). */
export function lowerBound(rising: ArrayLike<number>, x: number): number {
  let low = 0;
  let high = rising.length;
  while (low < high) {
    const middle = (low + high) >>> 1;
    if (rising[middle] < x) low = middle + 1;
    else high = middle;
  }
  return low;
}
