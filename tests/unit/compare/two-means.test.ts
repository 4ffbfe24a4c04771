import { describe, expect, it } from "vitest";
import { groupOf, pooledT, repeatabilityLimit, welch } from "@/lib/compare/band/two-means";
import { orderLeakage } from "@/lib/compare/plan/order-leakage";
import { smallestDelta } from "@/lib/compare/plan/plan-twins";
import { normalCdf, normalQuantile, tQuantile } from "@/lib/signal/distributions";
import { checkValue, checkValues } from "../../support/check-values";
import { runsPerSide } from "../../support/runs-per-side";

const relative = (got: number | undefined, expected: number, tolerance: number) =>
  expect(Math.abs((got ?? Number.NaN) / expected - 1)).toBeLessThanOrEqual(tolerance);

describe("Two means (R documentation, NIST/SEMATECH e-Handbook, scipy documentation)", () => {
  it.each([
    // R's t.test takes the first group minus the second.
    ["cmp.welch.sleep", "b", "a"],
    ["cmp.welch.runs", "A", "B"],
  ])("%s", (id, from, to) => {
    const { inputs, expected, tolerance } = checkValue(id);
    const got = welch(groupOf(inputs[from]), groupOf(inputs[to]));
    relative(got?.t, expected.t, tolerance.rel);
    relative(got?.df, expected.df, tolerance.rel);
    relative(got?.low, expected.lo95, tolerance.rel);
    relative(got?.high, expected.hi95, tolerance.rel);
    relative(got?.p, expected.p, tolerance.rel);
  });

  it("scipy documentation: pooled and Welch (scipy tests a − b, here b − a)", () => {
    const pooled = checkValue("cmp.student.scipydoc");
    const [a, b] = [groupOf(pooled.inputs.a), groupOf(pooled.inputs.b)];
    relative(-(pooledT(a, b)?.t ?? 0), pooled.expected.t, 1e-10);
    relative(pooledT(a, b)?.p, pooled.expected.p, 1e-10);
    const unequal = checkValue("cmp.welch.scipydoc").expected;
    relative(-(welch(a, b)?.t ?? 0), unequal.t, 1e-9);
    relative(welch(a, b)?.df, unequal.df, 1e-9);
  });

  it("AUTO83B from its summary (first minus second)", () => {
    const { inputs, expected, tolerance } = checkValue("cmp.welch.auto83b");
    const first = { n: inputs.n1, mean: inputs.m1, sd: inputs.s1 };
    const second = { n: inputs.n2, mean: inputs.m2, sd: inputs.s2 };
    const within = (got: number | undefined, value: number) =>
      expect(Math.abs((got ?? Number.NaN) - value)).toBeLessThanOrEqual(tolerance.abs);
    within(welch(second, first)?.t, expected.t_welch);
    within(welch(second, first)?.df, expected.df_welch);
    within(pooledT(second, first)?.t, expected.t_pooled);
    expect(pooledT(second, first)?.df).toBe(expected.df_pooled);
  });

  it("says nothing about a group of one or values without spread", () => {
    expect(welch(groupOf([1]), groupOf([2, 3]))).toBeNull();
    expect(welch(groupOf([1, 1]), groupOf([2, 2]))).toBeNull();
  });
});

describe("Planning (scipy noncentral t)", () => {
  for (const value of checkValues("cmp.n.")) {
    it(value.id, () => {
      const d = value.inputs.delta_over_sd;
      relative(2 * ((normalQuantile(0.975) + normalQuantile(0.8)) / d) ** 2, value.expected.n_z, 1e-9);
      expect(runsPerSide(d)).toBe(value.expected.n_t);
    });
  }
  for (const value of checkValues("cmp.mdd.")) {
    it(value.id, () => {
      const n = value.inputs.n_per_arm;
      const df = 2 * n - 2;
      const got = smallestDelta(df, tQuantile(0.975, df), 0.8) * Math.sqrt(2 / n);
      expect(Math.abs(got - value.expected.mdd_in_sd)).toBeLessThanOrEqual(value.tolerance.abs);
    });
  }
  it("90 % power needs 23, 11, 7, 4 runs a side for d 1, 1.5, 2, 3 (measurement notes, scipy)", () => {
    expect([1, 1.5, 2, 3].map((d) => runsPerSide(d, 0.05, 0.9))).toEqual([23, 11, 7, 4]);
  });
  it.each([10, 50, 100])("critical values for %d comparisons", (count) => {
    const { expected } = checkValue(`cmp.crit.K${count}`);
    relative(normalQuantile(1 - (1 - 0.95 ** (1 / count)) / 2), expected.sidak_z, 1e-9);
    relative(normalQuantile(1 - 0.05 / (2 * count)), expected.bonf_z, 1e-9);
    relative(tQuantile(1 - 0.05 / (2 * count), 8), expected.bonf_t8, 1e-9);
  });
  it("maps a Gaussian critical value to t", () => {
    const { inputs, expected } = checkValue("cmp.maxt.map");
    relative(tQuantile(normalCdf(inputs.c), inputs.df), expected.c_t, 1e-9);
  });
  it("repeatability limit of ISO 5725-6", () => {
    const { expected } = checkValue("cmp.repeatability");
    relative(repeatabilityLimit(1, null), expected.exact, 1e-9);
    relative(repeatabilityLimit(1, 5), expected.t_based_df5, 1e-9);
  });
});

describe("Order of the runs", () => {
  for (const value of checkValues("cmp.order.")) {
    it(value.id, () => {
      const sides = [...(value.inputs.order as string)].map((s) =>
        s === "A" ? ("A" as const) : ("B" as const),
      );
      for (const degree of [1, 2, 3]) {
        expect(orderLeakage(sides, degree)).toBeCloseTo(value.expected[`p${degree}`], 10);
      }
    });
  }
  for (const value of checkValues("cmp.drift.")) {
    it(`${value.id}: plain means pick up drift`, () => {
      const sides = [...(value.inputs.order as string)].map((s) =>
        s === "A" ? ("A" as const) : ("B" as const),
      );
      expect(1.5 + 0.4 * orderLeakage(sides, 1)).toBeCloseTo(value.expected.estimate, 9);
    });
  }
});
