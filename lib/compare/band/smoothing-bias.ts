/**
 * How much of a change the smoothing of speed may have rounded off: the curve minus the same curve smoothed once more, largest
 * in size within two kernel widths. What a smoother takes from a curve it takes, but for the finest detail, from the curve it has
 * already smoothed too ("twicing", Tukey 1977, from memory). Same unit as `values`, never negative.
 * The kernel is that of a smoothing spline with a penalty on the third derivative, response 1/(1 + (ω·width)⁶) (Silverman 1984,
 * Annals of Statistics 12, from memory). `rpm` rises evenly but for gaps; `widthRpm` NaN where not known: no allowance there.
 */
export function smoothingBias(
  rpm: readonly number[],
  values: ArrayLike<number>,
  widthRpm: ArrayLike<number>,
): Float64Array {
  const n = rpm.length;
  const lost = new Float64Array(n);
  for (let k = 0; k < n; k++) {
    const width = widthRpm[k];
    if (!(width > 0)) continue;
    let weights = 0;
    let sum = 0;
    // Beyond the ends the curve goes on turned about its end point, so that a slope there counts as no bend.
    for (let j = -n + 1; j < 2 * n - 1; j++) {
      const inside = j < 0 ? -j : j >= n ? 2 * n - 2 - j : j;
      const end = j < 0 ? 0 : n - 1;
      const turned = j !== inside;
      const x = turned ? 2 * rpm[end] - rpm[inside] : rpm[j];
      const weight = kernel(Math.abs(x - rpm[k]) / width);
      weights += weight;
      sum += weight * (turned ? 2 * values[end] - values[inside] : values[j]);
    }
    lost[k] = Math.abs(values[k] - sum / weights);
  }
  return lost.map((_, k) => {
    let most = 0;
    for (let j = 0; j < n; j++)
      if (Math.abs(rpm[j] - rpm[k]) <= 2 * widthRpm[k] && lost[j] > most) most = lost[j];
    return most;
  });
}

/** Inverse Fourier transform of 1/(1 + ω⁶) at `u` ≥ 0. */
function kernel(u: number): number {
  const phase = (Math.sqrt(3) * u) / 2;
  return (Math.exp(-u) + Math.exp(-u / 2) * (Math.cos(phase) + Math.sqrt(3) * Math.sin(phase))) / 6;
}
