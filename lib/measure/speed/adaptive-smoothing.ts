import {
  meanDensity,
  type Smoothing,
  type SpeedStretch,
  smoothSpeed,
} from "@/lib/measure/speed/smooth-speed";
import { bandedInverse } from "@/lib/signal/banded-inverse";
import { evaluateSpline, type SplineFit } from "@/lib/signal/penalised-spline";

/** Width of the speed cells in which roughness is told apart, m/s: three or four knots of a usual pull. */
const CELL_MPS = 0.8;
const ROUNDS = 6;
/** Third-difference row of a cubic spline. */
const DIFFERENCE = [-1, 3, -3, 1] as const;

/**
 * Lets the penalty follow the torque curve: where all runs together show that torque bends sharply with speed (spool-up, the
 * edge of a changed region) it is weak, elsewhere strong. The third derivative of speed is taken as white noise whose variance
 * depends on the road speed; the variance is estimated over all runs by expectation-maximisation, the same for both sides, so
 * that it favours neither. `sharing` runs are averaged into a side's curve: the penalty is divided by it, since the mean of a
 * side can afford more detail than one run. No kernel gets narrower than `floorS`.
 */
export function adaptiveSmoothing(
  stretches: readonly SpeedStretch[],
  start: Smoothing,
  sharing: number,
  floorS: number,
): Smoothing {
  let fits = stretches.map((stretch) => smoothSpeed(stretch, start));
  const samples = stretches.reduce((sum, s) => sum + s.system.used, 0);
  const cellsOf = stretches.map((stretch, k) => knotCells(stretch, fits[k]));
  const low = Math.min(
    ...cellsOf.map((cells) => cells.reduce((a, b) => Math.min(a, b), Number.POSITIVE_INFINITY)),
  );
  const high = Math.max(
    ...cellsOf.map((cells) => cells.reduce((a, b) => Math.max(a, b), Number.NEGATIVE_INFINITY)),
  );
  const count = high - low + 1;
  const density = meanDensity(stretches);
  let smoothing = start;
  for (let round = 0; round < ROUNDS; round++) {
    const noise = fits.reduce((sum, fit) => sum + fit.objective, 0) / samples;
    const sum = new Float64Array(count);
    const rows = new Float64Array(count);
    fits.forEach((fit, s) => {
      roughnessOf(fit, noise).forEach((q, k) => {
        sum[cellsOf[s][k] - low] += q;
        rows[cellsOf[s][k] - low]++;
      });
    });
    smoothing = byCell(stretches, cellsOf, low, neighbours(sum, rows), noise, density, floorS, 1);
    if (round === ROUNDS - 1)
      smoothing = byCell(stretches, cellsOf, low, neighbours(sum, rows), noise, density, floorS, sharing);
    fits = stretches.map((stretch) => smoothSpeed(stretch, smoothing));
  }
  return smoothing;
}

/** The speed cell of each penalty row. */
function knotCells(stretch: SpeedStretch, fit: SplineFit): Int32Array {
  const { basis } = stretch.system;
  const times = Float64Array.from(
    { length: basis.count - 3 },
    (_, k) => basis.start + (k + 0.5) * basis.spacing,
  );
  return Int32Array.from(evaluateSpline(fit, times), (v) => Math.floor(v / CELL_MPS));
}

/** Spectral density of the third derivative at each row: its square plus its posterior variance, times the spacing. */
function roughnessOf(fit: SplineFit, noise: number): Float64Array {
  const { basis, coefficients } = fit;
  const inverse = bandedInverse(fit.factor);
  const covariance = (i: number, j: number) => inverse.band[Math.max(i, j) * 4 + Math.abs(i - j)];
  return Float64Array.from({ length: basis.count - 3 }, (_, k) => {
    let difference = 0;
    let variance = 0;
    for (let i = 0; i < 4; i++) {
      difference += DIFFERENCE[i] * coefficients[k + i];
      for (let j = 0; j < 4; j++) variance += DIFFERENCE[i] * DIFFERENCE[j] * covariance(k + i, k + j);
    }
    return (difference * difference + noise * variance) / basis.spacing ** 5;
  });
}

/** Cell means, each leaning on its neighbours (weights 1 2 1) so that one cell's luck does not decide. */
function neighbours(sum: Float64Array, rows: Float64Array): Float64Array {
  return sum.map((_, k) => {
    let top = 0;
    let weight = 0;
    for (const [d, w] of [
      [-1, 1],
      [0, 2],
      [1, 1],
    ] as const) {
      if (rows[k + d] > 0) {
        top += w * sum[k + d];
        weight += w * rows[k + d];
      }
    }
    return weight > 0 ? top / weight : Number.NaN;
  });
}

function byCell(
  stretches: readonly SpeedStretch[],
  cellsOf: readonly Int32Array[],
  low: number,
  roughness: Float64Array,
  noise: number,
  density: number,
  floorS: number,
  sharing: number,
): Smoothing {
  const least = density * floorS ** 6;
  const lambdaOf = roughness.map((q) => Math.max(least, noise / q / sharing));
  const indexOf = new Map(stretches.map((stretch, s) => [stretch, s]));
  return {
    lambda: 1,
    scale: (stretch, t) => {
      const { basis } = stretch.system;
      const cells = cellsOf[indexOf.get(stretch) ?? 0];
      const row = Math.min(cells.length - 1, Math.max(0, Math.floor((t - basis.start) / basis.spacing)));
      return lambdaOf[cells[row] - low];
    },
  };
}
