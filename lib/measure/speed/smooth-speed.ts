import {
  observe,
  type SplineFit,
  type SplineSystem,
  solveSpline,
  splineBasis,
  splineSystem,
} from "@/lib/signal/penalised-spline";

/** Speed samples that stand for road speed, each series with one weight 1/variance in s²/m². */
export interface SpeedSeries {
  times: Float64Array;
  values: Float64Array;
  weight: number;
}

/** How the penalty varies along a stretch: a factor for each stretch and time; 1 = as `lambda` says. */
export type PenaltyScale = (stretch: SpeedStretch, t: number) => number;

/** How strongly speed is smoothed: λ on the squared third derivative of speed (the change of jerk). */
export interface Smoothing {
  lambda: number;
  scale: PenaltyScale | null;
}

/** A stretch to be smoothed; `tipInS` null when the load does not step at its start. */
export interface SpeedStretch {
  system: SplineSystem;
  tipInS: number | null;
  /** Information a second, s/m²: sets what a penalty means in seconds. */
  density: number;
}

/** Spool-up and the take-up of the driveline are over after this, s [common practice, no source]. */
const TIP_IN_S = 1.2;

/** Gathers speed series on a spline over `fromS` to `toS`. */
export function speedStretch(
  series: readonly SpeedSeries[],
  fromS: number,
  toS: number,
  knotS: number,
  tipInS: number | null,
): SpeedStretch {
  const system = splineSystem(splineBasis(fromS, toS, knotS));
  const scratch = new Float64Array(4);
  let information = 0;
  for (const { times, values, weight } of series) {
    for (let i = 0; i < times.length; i++) {
      if (times[i] < fromS || times[i] > toS || Number.isNaN(values[i])) continue;
      observe(system, times[i], values[i], weight, scratch);
      information += weight;
    }
  }
  return { system, tipInS, density: information / (toS - fromS) };
}

/** The smoothed speed of a stretch. */
export function smoothSpeed(stretch: SpeedStretch, smoothing: Smoothing): SplineFit {
  const { scale } = smoothing;
  return solveSpline(stretch.system, smoothing.lambda, scale ? (t) => scale(stretch, t) : undefined);
}

/** Width w of the equivalent kernel at a time, s: the smoother answers a wave of frequency ω by 1/(1 + (ω·w)⁶). */
export function kernelWidthS(stretch: SpeedStretch, { lambda, scale }: Smoothing, t: number): number {
  return ((lambda * (scale ? scale(stretch, t) : 1)) / stretch.density) ** (1 / 6);
}

/** Mean information a second of some stretches. */
export function meanDensity(stretches: readonly SpeedStretch[]): number {
  return stretches.reduce((sum, s) => sum + s.density, 0) / stretches.length;
}

/** A penalty that is `relief` times weaker just after tip-in, where torque builds up fast. */
function tipInRelief(relief: number): PenaltyScale {
  return ({ tipInS }, t) => (tipInS !== null && t < tipInS + TIP_IN_S ? 1 / relief : 1);
}

/**
 * The smoothing that the data ask for: restricted maximum likelihood of the spline seen as a random function, over all
 * stretches together, on a grid of kernel widths from `floorS` up. The floor guards against following the noise of coarse
 * or slow logs. Source: Wahba 1985, Annals of Statistics 13; Ruppert, Wand and Carroll 2003, chapter 4.
 */
export function chooseSmoothing(stretches: readonly SpeedStretch[], floorS: number): Smoothing {
  const density = meanDensity(stretches);
  let best: Smoothing = { lambda: density * floorS ** 6, scale: null };
  let bestScore = Number.POSITIVE_INFINITY;
  const hasTipIn = stretches.some((s) => s.tipInS !== null);
  for (let width = floorS; width < 12 * floorS && width < 1.2; width *= 1.15) {
    for (const relief of hasTipIn ? [1, 8, 64] : [1]) {
      const smoothing = { lambda: density * width ** 6, scale: relief === 1 ? null : tipInRelief(relief) };
      const score = restrictedLikelihood(stretches, smoothing);
      if (score < bestScore) {
        bestScore = score;
        best = smoothing;
      }
    }
  }
  return best;
}

/** −2 log restricted likelihood, up to a constant, with the noise variance profiled out. */
function restrictedLikelihood(stretches: readonly SpeedStretch[], smoothing: Smoothing): number {
  let logs = 0;
  let objective = 0;
  let samples = 0;
  for (const stretch of stretches) {
    const fit = smoothSpeed(stretch, smoothing);
    logs += fit.logDeterminant;
    const { basis } = fit;
    for (let k = 0; k + 3 < basis.count; k++) {
      const t = basis.start + (k + 0.5) * basis.spacing;
      logs -= Math.log(smoothing.lambda * (smoothing.scale ? smoothing.scale(stretch, t) : 1));
    }
    objective += fit.objective;
    samples += stretch.system.used - 3;
  }
  return logs + samples * Math.log(objective);
}
