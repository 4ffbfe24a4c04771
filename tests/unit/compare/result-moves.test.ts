import { describe, expect, it } from "vitest";
import { resultMoves } from "@/lib/compare/result-moves";
import type { CampaignResult } from "@/lib/measure/types";

function result(changes: {
  peakKw: number;
  halfWidth: number;
  refused?: boolean;
  times?: boolean;
}): CampaignResult {
  const { peakKw, halfWidth, refused = false, times = false } = changes;
  const peak = {
    engine_kw: peakKw,
    engine_kw_rpm: 6000,
    engine_nm: 300,
    engine_nm_rpm: 3000,
    uncertainty_kw: 2,
  };
  const side = { n: 4, basis: "day" as const, rpm: [], engine_kw: [], engine_nm: [], peak };
  return {
    analysis_version: "test",
    runs: [{ id: "7", usable: !refused, reasons: [], notes: [] }],
    sides: { A: side, B: { ...side, peak: { ...peak, engine_kw: peakKw + 3 } } },
    delta: {
      quantity: "engine_nm",
      basis: "day",
      ...{ rpm: [], pct: [], low_pct: [], high_pct: [], abs_nm: [], resolvable_pct: [] },
      level: 0.95,
      simultaneous: true,
      method: "invented for a test",
      regions: times ? [] : [{ from_rpm: 2000, to_rpm: 3000, verdict: "gain" }],
      drift_pct_per_run: 0,
      twins: [],
      peak_difference: { engine_kw: 3, half_width_kw: halfWidth, engine_nm: 1, half_width_nm: null },
      range_means: [
        {
          from_rpm: 2000,
          to_rpm: 3000,
          pct: 1,
          low_pct: 0.5,
          high_pct: 1.5,
          resolvable_pct: null,
          n_a: 4,
          n_b: 4,
        },
      ],
    },
  };
}

describe("what moves between two computations of one input", () => {
  it("is told figure by figure, with the half-width of each", () => {
    const { figures, regions, runs } = resultMoves(
      result({ peakKw: 150, halfWidth: 2 }),
      result({ peakKw: 151.5, halfWidth: 1, refused: true, times: true }),
    );
    const of = (what: string) => figures.find((figure) => figure.what === what);
    expect(of("Peak power, side A")).toMatchObject({
      before: { value: 150, halfWidth: 2 },
      after: { value: 151.5, halfWidth: 2 },
    });
    expect(of("Peak power, B − A")).toMatchObject({
      isDifference: true,
      before: { value: 3, halfWidth: 2 },
      after: { value: 3, halfWidth: 1 },
    });
    expect(of("Mean of 2000–3000 per minute, B − A")?.after).toEqual({ value: 1, halfWidth: 0.5 });
    expect(regions.before).toHaveLength(1);
    expect(regions.after).toEqual([]);
    expect(runs).toEqual([{ id: "7", usableBefore: true, usableAfter: false }]);
  });

  it("names what only one of them has, with a gap for the other", () => {
    const before = result({ peakKw: 150, halfWidth: 2 });
    const after = { ...result({ peakKw: 150, halfWidth: 2 }), delta: null };
    const figure = resultMoves(before, after).figures.find(({ what }) => what === "Peak torque, B − A");
    expect(figure).toMatchObject({
      before: { value: 1, halfWidth: null },
      after: { value: null, halfWidth: null },
    });
  });

  it("says nothing moved where nothing did", () => {
    const same = result({ peakKw: 150, halfWidth: 2 });
    const { figures, runs } = resultMoves(same, same);
    expect(figures.every(({ before, after }) => before.value === after.value)).toBe(true);
    expect(runs).toEqual([]);
  });
});
