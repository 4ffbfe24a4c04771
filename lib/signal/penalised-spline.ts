import { InvalidInputError } from "@/lib/errors";
import {
  type BandMatrix,
  bandedCholesky,
  bandedLogDeterminant,
  bandedSolve,
  bandMatrix,
} from "@/lib/signal/banded-cholesky";
import { addDifferencePenalty } from "@/lib/signal/whittaker";

/** Order of the difference penalty: third differences, so that a parabola costs nothing. */
const ORDER = 3;

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
    const h2 = 2 * basis.spacing;
    out[0] = (-v * v) / h2;
    out[1] = (3 * u * u - 4 * u) / h2;
    out[2] = (4 * v - 3 * v * v) / h2;
    out[3] = (u * u) / h2;
  } else {
    const hh = basis.spacing * basis.spacing;
    out[0] = v / hh;
    out[1] = (3 * u - 2) / hh;
    out[2] = (3 * v - 2) / hh;
    out[3] = u / hh;
  }
  return first;
}

/** Normal equations of weighted observations on a basis; gather once, solve under many penalties. */
export interface SplineSystem {
  basis: SplineBasis;
  normal: BandMatrix;
  right: Float64Array;
  sumOfSquares: number;
  used: number;
}

/** An empty system on a basis. */
export function splineSystem(basis: SplineBasis): SplineSystem {
  return {
    basis,
    normal: bandMatrix(basis.count, ORDER),
    right: new Float64Array(basis.count),
    sumOfSquares: 0,
    used: 0,
  };
}

/** Adds one observation with weight 1/variance to the system; NaN or no weight adds nothing. */
export function observe(
  system: SplineSystem,
  t: number,
  value: number,
  weight: number,
  scratch: Float64Array,
): void {
  if (!(weight > 0) || Number.isNaN(value)) return;
  const first = splineWeights(system.basis, t, 0, scratch);
  const { band } = system.normal;
  system.used++;
  system.sumOfSquares += weight * value * value;
  for (let a = 0; a < 4; a++) {
    const wa = weight * scratch[a];
    system.right[first + a] += wa * value;
    for (let b = 0; b <= a; b++) band[(first + a) * 4 + (a - b)] += wa * scratch[b];
  }
}

export interface SplineFit {
  basis: SplineBasis;
  coefficients: Float64Array;
  /** Cholesky factor of the penalised normal matrix: its inverse is the covariance of the coefficients. */
  factor: BandMatrix;
  /** Weighted residual sum of squares plus penalty. */
  objective: number;
  logDeterminant: number;
}

/**
 * Penalised spline: minimises Σ w·(y − f)² + λ·∫ s(t)·f‴(t)² dt, so λ does not depend on the knot spacing.
 * `scale` = s at a time (default 1). O(knots). Source: Eilers and Marx 1996, Statistical Science 11.
 */
export function solveSpline(system: SplineSystem, lambda: number, scale?: (t: number) => number): SplineFit {
  const { basis } = system;
  const normal = { ...system.normal, band: system.normal.band.slice() };
  // Δ³c / spacing³ is the third derivative; a sum over knots times the spacing is the integral.
  const penalty = scale && ((row: number) => scale(basis.start + (row + 0.5) * basis.spacing));
  addDifferencePenalty(normal, ORDER, lambda / basis.spacing ** 5, penalty);
  const factor = bandedCholesky(normal);
  const coefficients = bandedSolve(factor, system.right);
  let explained = 0;
  for (let i = 0; i < basis.count; i++) explained += coefficients[i] * system.right[i];
  return {
    basis,
    coefficients,
    factor,
    objective: Math.max(0, system.sumOfSquares - explained),
    logDeterminant: bandedLogDeterminant(factor),
  };
}

/** The spline (or its derivative) at one time. */
export function splineAt(
  basis: SplineBasis,
  coefficients: Float64Array,
  t: number,
  derivative: number,
  scratch: Float64Array,
): number {
  const first = splineWeights(basis, t, derivative, scratch);
  return (
    scratch[0] * coefficients[first] +
    scratch[1] * coefficients[first + 1] +
    scratch[2] * coefficients[first + 2] +
    scratch[3] * coefficients[first + 3]
  );
}

/** Variance of a linear combination of a fit's coefficients, one weight a coefficient; never below 0. O(knots). */
export function splineVariance({ factor }: Pick<SplineFit, "factor">, weights: Float64Array): number {
  const solved = bandedSolve(factor, weights);
  let variance = 0;
  for (let k = 0; k < weights.length; k++) variance += weights[k] * solved[k];
  return Math.max(0, variance);
}

/** The spline (or its derivative) at each time. */
export function evaluateSpline(
  fit: Pick<SplineFit, "basis" | "coefficients">,
  times: Float64Array,
  derivative = 0,
): Float64Array {
  const scratch = new Float64Array(4);
  return times.map((t) => splineAt(fit.basis, fit.coefficients, t, derivative, scratch));
}
