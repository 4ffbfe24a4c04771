import { describe, expect, it } from "vitest";
import { oneWayAnova } from "@/lib/signal/analysis-of-variance";
import { leastSquares } from "@/lib/signal/least-squares";
import { checkValue } from "../../support/check-values";

function design(rows: number[][]): Float64Array {
  return Float64Array.from(rows.flat());
}

function relative(got: ArrayLike<number>, expected: ArrayLike<number>, tolerance: number) {
  expect(got.length).toBe(expected.length);
  for (let i = 0; i < expected.length; i++) {
    expect(Math.abs(got[i] / expected[i] - 1)).toBeLessThanOrEqual(tolerance);
  }
}

describe("Least squares against NIST StRD certified values", () => {
  const cases: [string, (x: number) => number[]][] = [
    ["nist.norris", (x) => [1, x]],
    ["nist.pontius", (x) => [1, x, x * x]],
    ["nist.noint1", (x) => [x]],
  ];
  it.each(cases)("%s", (id, row) => {
    const { inputs, expected, tolerance } = checkValue(id);
    const rows = (inputs.x as number[]).map(row);
    const fit = leastSquares(design(rows), Float64Array.from(inputs.y as number[]), rows[0].length);
    relative(fit.coefficients, expected.b, tolerance.rel);
    relative(fit.standardErrors, expected.se, tolerance.rel);
    expect(Math.abs(fit.residualSd / expected.resid_sd - 1)).toBeLessThanOrEqual(tolerance.rel);
    expect(fit.df).toBe(rows.length - rows[0].length);
  });

  it("nist.longley (ill-conditioned: normal equations reach 4e-8 only)", () => {
    const { inputs, expected, tolerance } = checkValue("nist.longley");
    const rows = (inputs.X as number[][]).map((x) => [1, ...x]);
    const fit = leastSquares(design(rows), Float64Array.from(inputs.y as number[]), 7);
    relative(fit.coefficients, expected.b, tolerance.rel);
    relative(fit.standardErrors, expected.se, tolerance.rel);
    expect(fit.residualSd / expected.resid_sd).toBeCloseTo(1, 9);
  });

  it("names a dependent column and too few rows", () => {
    const rows = [1, 2, 3, 4].map((x) => [1, x, 2 * x]);
    expect(() => leastSquares(design(rows), Float64Array.of(1, 2, 3, 4), 3)).toThrow(/Column 3/);
    expect(() => leastSquares(Float64Array.of(1, 2), Float64Array.of(1), 2)).toThrow(/can't fit/);
  });
});

/** SmLs sets of NIST StRD: nine treatments of 21 values, level + (4, 3, 5, 3, 5, …)/10 shifted per treatment. */
function simonLesage(level: number): number[][] {
  const starts = [0.4, 0.3, 0.5, 0.3, 0.5, 0.3, 0.5, 0.3, 0.5];
  return starts.map((start) =>
    Array.from({ length: 21 }, (_, i) => {
      const tenths = Math.round(start * 10) + (i === 0 ? 0 : i % 2 === 1 ? -1 : 1);
      return Number(`${level}.${tenths}`);
    }),
  );
}

describe("One-way analysis of variance against NIST StRD certified values", () => {
  it.each(["nist.anova.SiRstv", "nist.anova.AtmWtAg"])("%s", (id) => {
    const { inputs, expected, tolerance } = checkValue(id);
    const anova = oneWayAnova(inputs.groups);
    relative([anova.f, anova.sumOfSquaresBetween], [expected.F, expected.SS_between], tolerance.rel);
  });

  it.each([
    ["nist.anova.SmLs01", 1],
    ["nist.anova.SmLs04", 1_000_000],
    ["nist.anova.SmLs07", 1_000_000_000_000],
  ])("%s", (id, level) => {
    const { expected, tolerance } = checkValue(id);
    const anova = oneWayAnova(simonLesage(level));
    expect(Math.abs(anova.f / expected.F - 1)).toBeLessThanOrEqual(tolerance.rel);
    expect(anova.dfBetween).toBe(8);
    expect(anova.dfWithin).toBe(180);
  });
});
