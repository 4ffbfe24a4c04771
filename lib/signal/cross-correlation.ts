/**
 * Lag (in samples, fractional) by which `delayed` follows `reference`: the peak of their normalised cross-correlation within
 * ±`maxLag`, refined by a parabola through the peak and its neighbours. Equal spacing is assumed; NaN pairs are left out.
 * Null when either series is constant or no lag leaves at least 8 pairs. O(n · maxLag).
 */
export function crossCorrelationLag(
  reference: Float64Array,
  delayed: Float64Array,
  maxLag: number,
): number | null {
  const scores = new Float64Array(2 * maxLag + 1).fill(-Infinity);
  let best = -1;
  for (let lag = -maxLag; lag <= maxLag; lag++) {
    const score = correlationAt(reference, delayed, lag);
    if (score === null) continue;
    scores[lag + maxLag] = score;
    if (best < 0 || score > scores[best]) best = lag + maxLag;
  }
  if (best < 0) return null;
  const left = scores[best - 1];
  const right = scores[best + 1];
  const middle = scores[best];
  const curvature = left + right - 2 * middle;
  const refine = Number.isFinite(curvature) && curvature < 0 ? (left - right) / (2 * curvature) : 0;
  return best - maxLag + refine;
}

function correlationAt(reference: Float64Array, delayed: Float64Array, lag: number): number | null {
  let n = 0;
  let sx = 0;
  let sy = 0;
  let sxx = 0;
  let syy = 0;
  let sxy = 0;
  const originX = reference.find((value) => !Number.isNaN(value)) ?? 0;
  const originY = delayed.find((value) => !Number.isNaN(value)) ?? 0;
  for (let i = Math.max(0, -lag); i < reference.length && i + lag < delayed.length; i++) {
    const x = reference[i] - originX;
    const y = delayed[i + lag] - originY;
    if (Number.isNaN(x) || Number.isNaN(y)) continue;
    n++;
    sx += x;
    sy += y;
    sxx += x * x;
    syy += y * y;
    sxy += x * y;
  }
  if (n < 8) return null;
  const vx = sxx - (sx * sx) / n;
  const vy = syy - (sy * sy) / n;
  return vx > 0 && vy > 0 ? (sxy - (sx * sy) / n) / Math.sqrt(vx * vy) : null;
}
