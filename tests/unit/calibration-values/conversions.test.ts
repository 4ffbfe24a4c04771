import { describe, expect, it } from "vitest";
import type { Conversion, DataType } from "@/lib/calibration/a2l/types";
import {
  characteristic,
  component,
  layout,
  type MadeModule,
  readMade,
  readOne,
} from "@/tests/support/made-description";

type Kind<K extends Conversion["kind"]> = Omit<
  Extract<Conversion, { kind: K }>,
  "name" | "text" | "unit" | "decimals"
>;

function module(
  conversion: Conversion,
  type: DataType,
  more: Parameters<typeof characteristic>[0] = {},
): MadeModule {
  return {
    characteristics: [characteristic({ type: "VAL_BLK", matrixDim: [4], conversion: "K", ...more })],
    layouts: [layout([component(1, "FNC_VALUES", type)])],
    conversions: [conversion],
  };
}
const named = { name: "K", text: "", unit: "u", decimals: 2 };
const read = (conversion: Conversion, cells: number[], more: Parameters<typeof characteristic>[0] = {}) =>
  readOne(
    module(conversion, "SBYTE", { matrixDim: [cells.length], ...more }),
    cells.map((cell) => cell & 0xff),
  );
const values = (...args: Parameters<typeof read>) => read(...args).values;
const rational = (...coefficients: [number, number, number, number, number, number]): Conversion => ({
  ...named,
  kind: "rational",
  coefficients,
});

// Expected values are the conversion's formula worked out by hand.
describe("conversions with a closed form", () => {
  it("identical, linear, with their raw step", () => {
    expect(values({ ...named, kind: "identical" }, [-3, 0, 7])).toEqual([-3, 0, 7]);
    const linear = read({ ...named, kind: "linear", a: -0.5, b: 10 }, [-4, 0, 20]);
    expect(linear).toMatchObject({ values: [12, 10, 0], rawStep: 0.5, unit: "u", decimals: 2 });
  });

  it("a rational function is solved for the physical value", () => {
    // raw = 10 p − 50 → p = (raw + 50) / 10
    expect(values(rational(0, 10, -50, 0, 0, 1), [-50, 0, 50])).toEqual([0, 5, 10]);
    // raw = 1 / p; 0 has no physical value
    expect(values(rational(0, 0, 1, 0, 1, 0), [1, 2, 4, 0])).toEqual([1, 0.5, 0.25, null]);
    // raw = p / (p + 1) → p = raw / (1 − raw); 1 has none
    expect(values(rational(0, 1, 0, 0, 1, 1), [0, 2, 1])).toEqual([0, -2, null]);
    // 0 = 0 whatever p is
    expect(values(rational(0, 0, 5, 0, 0, 1), [5, 1])).toEqual([null, null]);
  });

  it("a quadratic rational function takes the only solution inside the limits, else none", () => {
    // raw = p²: ±√raw
    const square = rational(1, 0, 0, 0, 0, 1);
    expect(values(square, [0, 4, 9], { lowerLimit: 0, upperLimit: 10 })).toEqual([0, 2, 3]);
    expect(values(square, [4, 9], { lowerLimit: -10, upperLimit: 0 })).toEqual([-2, -3]);
    expect(values(square, [4, -4], { lowerLimit: -10, upperLimit: 10 })).toEqual([null, null]);
    // Outside the limits, but only one inside the extended ones.
    expect(values(square, [16], { lowerLimit: 0, upperLimit: 3, extendedLimits: [0, 5] })).toEqual([4]);
    // raw = p² − 3p + 2 = (p − 1)(p − 2): raw 0 at 1 and 2
    expect(values(rational(1, -3, 2, 0, 0, 1), [0], { lowerLimit: 1.5, upperLimit: 9 })).toEqual([2]);
    // raw = p² / (p² + 1) → p = √(raw / (1 − raw)); raw 1 never
    expect(values(rational(1, 0, 0, 1, 0, 1), [0, 1], { lowerLimit: 0, upperLimit: 9 })).toEqual([0, null]);
  });

  it("a quadratic with roots of very different size loses no digits", () => {
    // p² − 1e8 p + 1 = 0 has the roots 1e8 − 1e−8 and 1e−8 (Numerical Recipes, 5.6).
    const found = values(rational(1, -1e8, 1, 0, 0, 1), [0], { lowerLimit: 0, upperLimit: 1 });
    expect(Number(found[0]) / 1e-8).toBeCloseTo(1, 14);
  });

  it("a formula in X1, never more than arithmetic", () => {
    expect(values({ ...named, kind: "formula", formula: "(X1 - 32) * 5 / 9" }, [32, 50])).toEqual([0, 10]);
    expect(values({ ...named, kind: "formula", formula: "sqrt(X1) + pow(X1, 2)" }, [4, -1])).toEqual([
      18,
      null,
    ]);
    expect(values({ ...named, kind: "formula", formula: "ln(exp(X1))" }, [2])).toEqual([2]);
    for (const formula of [
      "process.exit(1)",
      "X1^2",
      "X2 + 1",
      "sysc(A)",
      "(".repeat(5000),
      "X1+".repeat(9000),
      "",
    ]) {
      const reading = readMade(module({ ...named, kind: "formula", formula }, "SBYTE"), [1, 2, 3, 4]);
      expect(reading.characteristics[0]).toMatchObject({
        values: [null, null, null, null],
        raw: [1, 2, 3, 4],
      });
      expect(reading.problems).toEqual([
        expect.stringMatching(/^The conversion K can't be used: its formula ".*needed once; only raw/),
      ]);
    }
  });
});

describe("tables", () => {
  const table = (more: Partial<Kind<"table">> = {}): Conversion => ({
    ...named,
    kind: "table",
    interpolated: false,
    fallback: null,
    pairs: [
      [4, 400],
      [0, 100],
      [2, 150],
    ],
    ...more,
  });
  it("without interpolation: the entry, else the default, else none", () => {
    expect(values(table(), [0, 1, 2, 4])).toEqual([100, null, 150, 400]);
    expect(read(table({ fallback: -7 }), [1, 2])).toMatchObject({ values: [-7, 150], rawStep: null });
  });
  it("with interpolation: straight lines, held at the ends (from memory)", () => {
    expect(values(table({ interpolated: true }), [-9, 0, 1, 3, 4, 9])).toEqual([
      100, 100, 125, 275, 400, 400,
    ]);
    expect(read(table({ interpolated: true }), [0, 2]).rawStep).toBe(25);
  });
  const words = (fallback: string | null): Conversion => ({
    ...named,
    kind: "words",
    fallback,
    ranges: [
      { from: 0, to: 0, text: "off" },
      { from: 2, to: 5, text: "some" },
      { from: 5, to: 6, text: "much" },
    ],
  });
  it("words and ranges of words, both ends inside, the first where they overlap", () => {
    expect(values(words(null), [0, 1, 2, 5, 6])).toEqual(["off", null, "some", "some", "much"]);
    expect(read(words("other"), [1, 9])).toMatchObject({ values: ["other", "other"], rawStep: null });
  });
  it("states come before numbers", () => {
    const status = [{ from: 126, to: 127, text: "sensor defect" }];
    expect(values({ ...named, kind: "linear", a: 2, b: 0, status }, [3, 127])).toEqual([6, "sensor defect"]);
  });
});

describe("what stands beside a value", () => {
  it("FORMAT before the conversion's decimals, 0 to 6; PHYS_UNIT before its unit", () => {
    const identical: Conversion = { ...named, unit: " km/h ", kind: "identical" };
    expect(read(identical, [1])).toMatchObject({ decimals: 2, unit: "km/h" });
    expect(read(identical, [1], { format: "%8.4", physUnit: "" })).toMatchObject({ decimals: 4, unit: "" });
    expect(read(identical, [1], { format: "%3.12" }).decimals).toBe(6);
    expect(read(identical, [1], { conversion: null }).decimals).toBe(0);
  });
  it("a conversion that is not there leaves the raw number and says so", () => {
    const made = module({ ...named, kind: "identical" }, "SBYTE", { conversion: "GONE" });
    const reading = readMade(made, [1, 2, 3, 4]);
    expect(reading.characteristics[0]).toMatchObject({ raw: [1, 2, 3, 4], values: [null, null, null, null] });
    expect(reading.problems[0]).toMatch(
      /^The conversion GONE can't be used: the description does not hold it\./,
    );
  });
});
