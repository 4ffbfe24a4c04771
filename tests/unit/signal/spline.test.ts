import { describe, expect, it } from "vitest";
import { bandedCholesky, bandedLogDeterminant, bandedSolve, bandMatrix } from "@/lib/signal/banded-cholesky";
import { bandedInverse } from "@/lib/signal/banded-inverse";
import { crossCorrelationLag } from "@/lib/signal/cross-correlation";
import { addRow, normalEquations, solveNormal, varianceOf } from "@/lib/signal/normal-equations";
import { findOutliers } from "@/lib/signal/outliers";
import {
  evaluateSpline,
  observe,
  type SplineBasis,
  solveSpline,
  splineBasis,
  splineSystem,
  splineWeights,
} from "@/lib/signal/penalised-spline";
import { randomStream } from "@/lib/signal/random";
import { mean, median, quantile, robustDeviation, standardDeviation } from "@/lib/signal/statistics";

describe("Band matrices", () => {
  it("solves, inverts and takes the determinant of the second-difference matrix (closed forms)", () => {
    // tridiag(−1, 2, −1) of size n: determinant n + 1, inverse min(i,j)(n+1−max(i,j))/(n+1), indices from 1.
    const n = 7;
    const matrix = bandMatrix(n, 1);
    for (let i = 0; i < n; i++) {
      matrix.band[2 * i] = 2;
      if (i > 0) matrix.band[2 * i + 1] = -1;
    }
    const factor = bandedCholesky(matrix);
    expect(bandedLogDeterminant(factor)).toBeCloseTo(Math.log(n + 1), 12);
    const inverse = bandedInverse(factor);
    for (let i = 1; i <= n; i++) {
      expect(inverse.band[2 * (i - 1)]).toBeCloseTo((i * (n + 1 - i)) / (n + 1), 12);
      if (i > 1) expect(inverse.band[2 * (i - 1) + 1]).toBeCloseTo(((i - 1) * (n + 1 - i)) / (n + 1), 12);
    }
    const x = bandedSolve(factor, new Float64Array(n).fill(1));
    for (let i = 1; i <= n; i++) expect(x[i - 1]).toBeCloseTo((i * (n + 1 - i)) / 2, 12);
  });

  it("names the row that makes a matrix singular", () => {
    const matrix = bandMatrix(2, 1);
    matrix.band.set([1, 0, 1, 1]);
    expect(() => bandedCholesky(matrix)).toThrow(/Row 1/);
  });
});

function system(basis: SplineBasis, times: Float64Array, values: Float64Array, weight: number) {
  const out = splineSystem(basis);
  const scratch = new Float64Array(4);
  for (let i = 0; i < times.length; i++) observe(out, times[i], values[i], weight, scratch);
  return out;
}

describe("Penalised spline", () => {
  it("weights sum to 1 with zero derivatives, inside and on the ends", () => {
    const basis = splineBasis(2, 5, 0.4);
    const w = new Float64Array(4);
    for (const t of [2, 2.3, 3.777, 5]) {
      for (const [derivative, sum] of [
        [0, 1],
        [1, 0],
        [2, 0],
      ]) {
        splineWeights(basis, t, derivative, w);
        expect(w[0] + w[1] + w[2] + w[3]).toBeCloseTo(sum, 10);
      }
    }
  });

  it("reproduces a parabola and its derivatives whatever the penalty (closed form)", () => {
    const times = Float64Array.from({ length: 80 }, (_, i) => 0.1 * i + 0.03 * Math.sin(i));
    const values = times.map((t) => 3 + 2 * t - 0.25 * t * t);
    const basis = splineBasis(times[0], times[79], 0.3);
    const fit = solveSpline(system(basis, times, values, 4), 1e3);
    const at = Float64Array.of(0.5, 3.3, 7.5);
    const slope = evaluateSpline(fit, at, 1);
    const bend = evaluateSpline(fit, at, 2);
    at.forEach((t, i) => {
      expect(slope[i]).toBeCloseTo(2 - 0.5 * t, 7);
      expect(bend[i]).toBeCloseTo(-0.5, 6);
    });
  });

  it("answers the same at half the knot spacing: the penalty is stated in seconds", () => {
    const random = randomStream(5);
    const times = Float64Array.from({ length: 400 }, (_, i) => i * 0.02);
    const values = times.map((t) => Math.sin(t) + 0.01 * random.nextNormal());
    const fits = [0.2, 0.1].map((spacing) => {
      const basis = splineBasis(0, 8, spacing);
      return evaluateSpline(solveSpline(system(basis, times, values, 1e4), 300), times, 1);
    });
    for (let i = 20; i < 380; i++) expect(Math.abs(fits[0][i] - fits[1][i])).toBeLessThan(0.01);
    for (let i = 40; i < 360; i++) expect(Math.abs(fits[1][i] - Math.cos(times[i]))).toBeLessThan(0.03);
  });
});

describe("Lag and plain statistics", () => {
  it("finds a fractional lag of a delayed ramp-and-hold", () => {
    const shape = (t: number) => 20 / (1 + Math.exp(-(t - 5)));
    const reference = Float64Array.from({ length: 500 }, (_, i) => shape(i * 0.02));
    const delayed = Float64Array.from({ length: 500 }, (_, i) => 1.01 * shape(i * 0.02 - 0.15) + 0.3);
    expect(crossCorrelationLag(reference, delayed, 20)).toBeCloseTo(7.5, 1);
    expect(crossCorrelationLag(new Float64Array(50), delayed, 5)).toBeNull();
  });

  it("leaves gaps out and says NaN when nothing is left", () => {
    const values = [3, Number.NaN, 1, 2];
    expect(mean(values)).toBe(2);
    expect(standardDeviation(values)).toBe(1);
    expect(median(values)).toBe(2);
    expect(quantile([1, 2, 3, 4], 0.25)).toBe(1.75);
    const shuffled = Float64Array.from({ length: 101 }, (_, i) => (37 * i) % 101);
    for (const p of [0, 0.1, 0.5, 0.995, 1]) expect(quantile(shuffled, p)).toBeCloseTo(100 * p, 10);
    expect(robustDeviation([1, 2, 3, 4, 100])).toBeCloseTo(1.4826, 10);
    expect(mean([])).toBeNaN();
    expect(median([Number.NaN])).toBeNaN();
    expect(standardDeviation([1])).toBeNaN();
  });
});

describe("Outliers", () => {
  it("marks single jumps on a ramp and leaves steps of a coarse channel and gaps alone", () => {
    const values = Float64Array.from({ length: 60 }, (_, i) => 20 + 0.06 * i);
    values[20] += 3;
    values[41] -= 2;
    values[50] = Number.NaN;
    const marked = findOutliers(values, 4, (v) => 0.3 + 0.02 * v);
    expect([...marked].flatMap((m, i) => (m ? [i] : []))).toEqual([20, 41]);
    const coarse = Float64Array.from({ length: 60 }, (_, i) => 50 * Math.round((2000 + 8 * i) / 50));
    expect(findOutliers(coarse, 4, (v) => 60 + 0.02 * v).includes(1)).toBe(false);
  });
});

describe("Normal equations", () => {
  it("solve a weighted line and tell the variance of its value (closed form)", () => {
    const equations = normalEquations(2);
    for (const x of [-1, 0, 1]) addRow(equations, [0, 1], [1, x], 2 + 3 * x, 4);
    const solved = solveNormal(equations);
    expect(solved.x[0]).toBeCloseTo(2, 12);
    expect(solved.x[1]).toBeCloseTo(3, 12);
    // Σw = 12, Σw·x² = 8: variance of the value at x is 1/12 + x²/8; determinant 96.
    expect(varianceOf(solved, Float64Array.of(1, 2))).toBeCloseTo(1 / 12 + 4 / 8, 12);
    expect(solved.logDeterminant).toBeCloseTo(Math.log(96), 12);
    expect(solved.objective).toBeCloseTo(0, 10);
    expect(() => solveNormal(normalEquations(1))).toThrow(/neither data nor prior/);
  });
});
