import { describe, expect, test } from "vitest";
import { plottedGrid, valuesAt } from "@/lib/compare/plotted-grid";
import type { CampaignResult } from "@/lib/measure/types";

describe("values of a curve on another grid", () => {
  test("are exact at its own points, straight between two, and gaps stay gaps", () => {
    const rpm = [1000, 2000, 3000, 4000];
    expect(valuesAt([1000, 1500, 2000, 2500, 3500, 4000], rpm, [10, 20, null, 40])).toEqual([
      10,
      15,
      20,
      null,
      null,
      40,
    ]);
  });

  test("are never extrapolated, and an empty curve has none", () => {
    expect(valuesAt([500, 1000, 4500], [1000, 4000], [1, 4])).toEqual([null, 1, null]);
    expect(valuesAt([1000], [], [])).toEqual([null]);
    expect(valuesAt([], [1000], [1])).toEqual([]);
  });
});

const side = (nm: number[], basis: "day" | "reference" = "day") => ({
  n: 3,
  basis,
  rpm: [3000, 6000],
  engine_kw: nm.map((value, i) => (value * [3000, 6000][i] * 2 * Math.PI) / 60_000),
  engine_nm: nm,
  peak: null,
});

const RESULT: CampaignResult = {
  analysis_version: "1",
  runs: [
    {
      id: "1",
      usable: true,
      reasons: [],
      notes: [],
      curve: {
        rpm: [3000, 6000],
        tractive_kw: [null, null],
        wheel_kw: [null, null],
        engine_kw: [90, 180],
        engine_nm: [290, 291],
        engine_kw_reference: [95, 190],
        engine_nm_reference: [300, 301],
      },
    },
    { id: "2", usable: false, reasons: [{ code: "x", message: "y" }], notes: [] },
  ],
  sides: { A: side([300, 300]), B: side([303, 294]) },
  delta: {
    quantity: "engine_nm",
    basis: "day",
    rpm: [3000, 6000],
    pct: [1, -2],
    low_pct: [0.5, null],
    high_pct: [1.5, null],
    abs_nm: [3, -6],
    level: 0.95,
    simultaneous: true,
    method: "m",
    regions: [{ from_rpm: 3000, to_rpm: 3000, verdict: "gain" }],
    resolvable_pct: [0.5, null],
    drift_pct_per_run: null,
    twins: [],
  },
};

describe("the plotted grid", () => {
  test("gives the difference in percent, torque and power, whose band has the same share of A", () => {
    const grid = plottedGrid(RESULT, () => "A");
    expect(grid?.rpm).toEqual([3000, 6000]);
    expect(grid?.nm.low).toEqual([1.5, null]);
    // 3 N·m at 3000 per minute: 3 × 2π × 3000/60 W = 942.48 W; closed form, P = M ω.
    expect(grid?.kw.delta[0]).toBeCloseTo(0.94247779607, 9);
    expect(grid?.kw.delta[1]).toBeCloseTo(-3.76991118431, 9);
    expect(grid?.kw.high[0]).toBeCloseTo(1.41371669412, 9);
    expect(grid?.kw.high[1]).toBeNull();
  });

  test("draws the single runs on the basis of the sides, and only those that count", () => {
    expect(plottedGrid(RESULT, (id) => (id === "1" ? "A" : null))?.a.runsNm).toEqual([[290, 291]]);
    expect(plottedGrid(RESULT, () => "B")?.a.runsNm).toEqual([]);
    const sides = { A: side([300, 300], "reference"), B: side([303, 294], "reference") };
    const onReference = plottedGrid({ ...RESULT, sides, delta: null }, () => "A");
    expect(onReference?.a.runsNm).toEqual([[300, 301]]);
    expect(onReference?.pct.delta).toEqual([null, null]);
  });

  test("is absent where neither side has a curve, and changes nothing that it was given", () => {
    expect(plottedGrid({ ...RESULT, sides: {}, delta: null }, () => "A")).toBeNull();
    const frozen = structuredClone(RESULT);
    plottedGrid(RESULT, () => "A");
    expect(RESULT).toEqual(frozen);
  });
});
