import { describe, expect, it } from "vitest";
import {
  distance,
  goldenScipy,
  goldenUnits,
  scipyComparisons,
  uncovered,
  unitComparisons,
} from "../../support/outside-references";

const misses = (comparisons: ReturnType<typeof scipyComparisons>) =>
  comparisons.filter((comparison) => !(distance(comparison) <= comparison.allowed));

describe("answers of outside programs, stored with their provenance in tests/golden/references", () => {
  it("distributions, smoothing, Welch's test and planning agree with scipy", () => {
    const comparisons = scipyComparisons(goldenScipy());
    expect(comparisons.length).toBeGreaterThan(400);
    expect(misses(comparisons)).toEqual([]);
  });

  it("every conversion factor agrees with GNU Units", () => {
    expect(misses(unitComparisons(goldenUnits()))).toEqual([]);
    expect(uncovered(goldenUnits())).toEqual([]);
  });
});
