import { describe, expect, it } from "vitest";
import { chiSquareCdf, chiSquareQuantile } from "@/lib/signal/chi-square";

describe("chi-square", () => {
  // NIST/SEMATECH e-Handbook, table 1.3.6.7.4 (three decimals).
  it.each([
    [0.95, 1, 3.841],
    [0.975, 4, 11.143],
    [0.025, 4, 0.484],
    [0.975, 12, 23.337],
    [0.025, 12, 4.404],
    [0.95, 100, 124.342],
  ])("has the published %s quantile of %s degrees of freedom", (p, df, expected) => {
    expect(chiSquareQuantile(p, df)).toBeCloseTo(expected, 3);
  });

  it("is the exponential distribution at two degrees of freedom (closed form)", () => {
    for (const x of [0.01, 1, 3, 20]) expect(chiSquareCdf(x, 2)).toBeCloseTo(1 - Math.exp(-x / 2), 12);
    expect(chiSquareCdf(0, 2)).toBe(0);
  });

  it("refuses a probability that is none", () => {
    expect(() => chiSquareQuantile(1, 4)).toThrow(RangeError);
  });
});
