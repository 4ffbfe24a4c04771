/** How acceleration sets in after first motion, as far as an accelerometer tells. Times in s of its own clock. */
export interface RampFit {
  /** First motion, and its standard uncertainty with that of the ramp's shape in it. */
  startS: number;
  startUncertaintyS: number;
  /** Length of the even ramp that fits. */
  rampS: number;
  /** Acceleration that the ramp leads to, and its change from there on in 1/s of it. */
  level: number;
  trendPerS: number;
}

/** Usual length of the ramp and the factor of its spread (log-normal); common practice, no source. */
export const USUAL_RAMP_S = 0.17;
const RAMP_SPREAD = 1.8;
const LENGTHS_S = [0.02, 0.04, 0.06, 0.08, 0.1, 0.13, 0.16, 0.2, 0.25, 0.3, 0.37, 0.45, 0.55];
const START_STEP_S = 0.005;
/** Settled acceleration must stand this far out of the noise. */
const LEAST_SIGNAL = 6;
const LEAST_MPS2 = 0.5;
/** This share of the way between the starts of an even and a soft ramp is a standard uncertainty; from 600 simulated launches of three shapes. */
const SHAPE_SHARE = 0.6;

/** Two shapes in which a force comes in, over the share of the ramp. */
const even = (u: number) => Math.min(1, u);
const soft = (u: number) => (u >= 1 ? 1 : u * u * (3 - 2 * u));

/**
 * Fits a ramp to acceleration samples (`zero` already taken off) by Bayes' rule over start and length, with level and trend by
 * least squares and the noise unknown but not below `noise` (standard deviation while standing, m/s²). The ramp is taken as
 * even; part of the way to the start of a soft one goes into the uncertainty, since an accelerometer's own filter rounds an even
 * ramp too, so that the log can't tell them apart. The start is sought in [`fromS`, `toS`]. Null when nothing stands out.
 */
export function fitRamp(
  t: Float64Array,
  a: Float64Array,
  noise: number,
  fromS: number,
  toS: number,
): RampFit | null {
  const top = a.subarray(Math.floor(0.7 * a.length));
  const settled = top.reduce((sum, value) => sum + value, 0) / top.length;
  if (!(settled > LEAST_SIGNAL * noise && settled > LEAST_MPS2)) return null;
  const taken = fitShape(t, a, noise, fromS, toS, even);
  const other = fitShape(t, a, noise, fromS, toS, soft);
  if (!taken || !other) return null;
  return {
    ...taken,
    startUncertaintyS: Math.hypot(taken.startUncertaintyS, SHAPE_SHARE * (taken.startS - other.startS)),
  };
}

function fitShape(
  t: Float64Array,
  a: Float64Array,
  noise: number,
  fromS: number,
  toS: number,
  shape: (u: number) => number,
): RampFit | null {
  const tries: { logWeight: number; startS: number; rampS: number; level: number; trend: number }[] = [];
  let best = Number.NEGATIVE_INFINITY;
  for (const rampS of LENGTHS_S) {
    const prior = -0.5 * (Math.log(rampS / USUAL_RAMP_S) / Math.log(RAMP_SPREAD)) ** 2;
    for (let startS = fromS; startS <= toS; startS += START_STEP_S) {
      const fit = levelAndTrend(t, a, startS, rampS, shape);
      if (!fit) continue;
      const misfit = Math.max(fit.squares, (a.length - 2) * noise * noise);
      const logWeight = prior - 0.5 * (a.length - 2) * Math.log(misfit);
      best = Math.max(best, logWeight);
      tries.push({ logWeight, startS, rampS, level: fit.level, trend: fit.trend });
    }
  }
  if (tries.length === 0) return null;
  const sum = { w: 0, start: 0, square: 0, ramp: 0, level: 0, trend: 0 };
  for (const one of tries) {
    const w = Math.exp(one.logWeight - best);
    sum.w += w;
    sum.start += w * (one.startS - fromS);
    sum.square += w * (one.startS - fromS) ** 2;
    sum.ramp += w * one.rampS;
    sum.level += w * one.level;
    sum.trend += w * one.trend;
  }
  const start = sum.start / sum.w;
  return {
    startS: fromS + start,
    startUncertaintyS: Math.sqrt(Math.max(0, sum.square / sum.w - start * start)),
    rampS: sum.ramp / sum.w,
    level: sum.level / sum.w,
    trendPerS: sum.trend / sum.level,
  };
}

function levelAndTrend(
  t: Float64Array,
  a: Float64Array,
  startS: number,
  rampS: number,
  shape: (u: number) => number,
): { level: number; trend: number; squares: number } | null {
  let [xx, xz, zz, xy, zy, yy] = [0, 0, 0, 0, 0, 0];
  for (let i = 0; i < t.length; i++) {
    const since = t[i] - startS;
    yy += a[i] * a[i];
    if (since <= 0) continue;
    const x = shape(since / rampS);
    const z = x * since;
    xx += x * x;
    xz += x * z;
    zz += z * z;
    xy += x * a[i];
    zy += z * a[i];
  }
  const determinant = xx * zz - xz * xz;
  if (!(determinant > 1e-12)) return null;
  const level = (zz * xy - xz * zy) / determinant;
  const trend = (xx * zy - xz * xy) / determinant;
  if (level <= 0) return null;
  return { level, trend, squares: Math.max(0, yy - level * xy - trend * zy) };
}
