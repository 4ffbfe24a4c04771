import { InvalidInputError } from "@/lib/errors";
import {
  type BandMatrix,
  bandedCholesky,
  bandedLogDeterminant,
  bandedSolve,
  bandMatrix,
} from "@/lib/signal/banded-cholesky";
import { addDifferencePenalty } from "@/lib/signal/whittaker";

/** Cubic B-splines on equally spaced knots: `count` coefficients, the first full interval starts at `start`. */
export interface SplineBasis {
  start: number;
  spacing: number;
  count: number;
}

/** The basis whose knots cover `from` to `to` with a spacing of at most `spacing`. */
export function splineBasis(from: number, to: number, spacing: number): SplineBasis {
  if (!(to > from) || !(spacing > 0)) {
    throw new InvalidInputError(
      "bad_span",
      `A spline needs a span and a knot spacing, not ${from} to ${to} by ${spacing}.`,
    );
  }
  const intervals = Math.max(1, Math.ceil((to - from) / spacing));
  return { start: from, spacing: (to - from) / intervals, count: intervals + 3 };
}

/** Observations of one channel: values at times, each with a weight (1/variance). NaN values are left out. */
export interface SplineObservations {
  times: Float64Array;
  values: Float64Array;
  weights: Float64Array;
}

export interface SplineFit {
  basis: SplineBasis;
  coefficients: Float64Array;
  /** Cholesky factor of the penalised normal matrix. */
  factor: BandMatrix;
  /** Weighted residual sum of squares. */
  weightedResidual: number;
  /** Sum of the penalty at the solution. */
  penalty: number;
  logDeterminant: number;
  used: number;
}

/**
 * The four B-spline weights of `derivative` 0, 1 or 2 at `t`, written to `out`; returns the index of the first coefficient.
 * Outside the span the end polynomial continues.
 */
export function splineWeights(basis: SplineBasis, t: number, derivative: number, out: Float64Array): number {
  const position = (t - basis.start) / basis.spacing;
  const first = Math.min(basis.count - 4, Math.max(0, Math.floor(position)));
  const u = position - first;
  const v = 1 - u;
  if (derivative === 0) {
    out[0] = (v * v * v) / 6;
    out[1] = (3 * u * u * u - 6 * u * u + 4) / 6;
    out[2] = (3 * v * v * v - 6 * v * v + 4) / 6;
    out[3] = (u * u * u) / 6;
  } else if (derivative === 1) {
    const h = basis.spacing;
    out[0] = (-v * v) / 2 / h;
    out[1] = (3 * u * u - 4 * u) / 2 / h;
    out[2] = -(3 * v * v - 4 * v) / 2 / h;
    out[3] = (u * u) / 2 / h;
  } else {
    const h2 = basis.spacing * basis.spacing;
    out[0] = v / h2;
    out[1] = (3 * u - 2) / h2;
    out[2] = (3 * v - 2) / h2;
    out[3] = u / h2;
  }
  return first;
}

/**
 * Penalised spline: minimises Σ w·(y − f)² + λ·Σ s_k·(Δ³c_k)², λ given per second^5 so that it does not depend on the knot
 * spacing. `scale(t)` = s at a knot time (default 1). O(observations + knots). Source: Eilers and Marx 1996.
 */
export function fitPenalisedSpline(
  basis: SplineBasis,
  observations: readonly SplineObservations[],
  lambda: number,
  scale?: (t: number) => number,
): SplineFit {
  const order = 3;
  const normal = bandMatrix(basis.count, order);
  const right = new Float64Array(basis.count);
  const w = new Float64Array(4);
  let sumOfSquares = 0;
  let used = 0;
  for (const { times, values, weights } of observations) {
    for (let i = 0; i < times.length; i++) {
      const weight = weights[i];
      const value = values[i];
      if (!(weight > 0) || Number.isNaN(value)) continue;
      const first = splineWeights(basis, times[i], 0, w);
      used++;
      sumOfSquares += weight * value * value;
      for (let a = 0; a < 4; a++) {
        right[first + a] += weight * w[a] * value;
        for (let b = 0; b <= a; b++) normal.band[(first + a) * 4 + (a - b)] += weight * w[a] * w[b];
      }
    }
  }
  // Δ³c / spacing³ is the third derivative, and a sum over knots times spacing is an integral over time.
  const perKnot = lambda / basis.spacing ** 5;
  addDifferencePenalty(normal, order, perKnot, scale && ((row) => scale(basis.start + row * basis.spacing)));
  const factor = bandedCholesky(normal);
  const coefficients = bandedSolve(factor, right);
  let explained = 0;
  for (let i = 0; i < basis.count; i++) explained += coefficients[i] * right[i];
  let penalty = 0;
  for (let k = 0; k + 3 < basis.count; k++) {
    const d = coefficients[k + 3] - 3 * coefficients[k + 2] + 3 * coefficients[k + 1] - coefficients[k];
    penalty += perKnot * (scale ? scale(basis.start + k * basis.spacing) : 1) * d * d;
  }
  return {
    basis,
    coefficients,
    factor,
    weightedResidual: Math.max(0, sumOfSquares - explained - penalty),
    penalty,
    logDeterminant: bandedLogDeterminant(factor),
    used,
  };
}

/** The spline (or its derivative) at each time. */
export function evaluateSpline(
  basis: SplineBasis,
  coefficients: Float64Array,
  times: Float64Array,
  derivative = 0,
): Float64Array {
  const w = new Float64Array(4);
  return times.map((t) => {
    const first = splineWeights(basis, t, derivative, w);
    return (
      w[0] * coefficients[first] +
      w[1] * coefficients[first + 1] +
      w[2] * coefficients[first + 2] +
      w[3] * coefficients[first + 3]
    );
  });
}
