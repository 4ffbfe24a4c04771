import { beforeAll, describe, expect, it } from "vitest";
import { analyseCampaign } from "@/lib/measure/analyse-campaign";
import { budgetAdvice } from "@/lib/measure/curve/budget-advice";
import type { BudgetComponent, Campaign, CampaignResult, Peak } from "@/lib/measure/types";
import { type SimulatedCampaign, simulateCampaign } from "../../support/generator";
import { typedWrong } from "../../support/typed-wrong";

const EXACT = {
  ...{ massKg: 15, circumference: 0.005, inertia: 0.1, efficiency: 0.01 },
  weather: { tempC: 0, pressureHpa: 0, rhPct: 0 },
};

let simulated: SimulatedCampaign;
let typed: Campaign;
let result: CampaignResult;

beforeAll(() => {
  simulated = simulateCampaign({ order: "ABBA", directions: "+-+-", sensors: { rateHz: 25 } }, 311);
  typed = typedWrong(simulated.campaign, "hatch", 311, EXACT);
  result = analyseCampaign(typed, simulated.logs);
}, 60_000);

function peakOf(from: CampaignResult): Peak {
  const { peak } = from.sides.A;
  if (!peak) throw new Error("no peak");
  return peak;
}

const partOf = (peak: Peak, component: BudgetComponent) =>
  peak.budget?.parts.find((part) => part.component === component)?.standard_pct ?? Number.NaN;

/** Peak power after the campaign was analysed again with something changed, in percent of before. */
function movedPct(vehicle: Partial<Campaign["vehicle"]>, quantity: "engine_kw" | "engine_nm" = "engine_kw") {
  const again = analyseCampaign({ ...typed, vehicle: { ...typed.vehicle, ...vehicle } }, simulated.logs);
  return 100 * Math.abs(peakOf(again)[quantity] / peakOf(result)[quantity] - 1);
}

describe("Budget of a peak", () => {
  it("adds up: coverage factor times the root of the sum of squares (JCGM 100:2008, 5.1.2 and 6.2.1)", () => {
    for (const peak of [peakOf(result), ...result.runs.map((run) => run.peak)]) {
      const budget = peak?.budget;
      if (!peak || !budget) throw new Error("no budget");
      const root = Math.sqrt(budget.parts.reduce((sum, part) => sum + part.standard_pct ** 2, 0));
      expect(budget.coverage_factor).toBe(2);
      expect(budget.expanded_pct).toBeCloseTo(2 * root, 4);
      expect(budget.expanded_kw).toBeCloseTo((budget.expanded_pct / 100) * peak.engine_kw, 3);
      expect(peak.uncertainty_kw).toBe(budget.expanded_kw);
      expect(peak.uncertainty_nm).toBeGreaterThan(0);
      for (const part of budget.parts) {
        expect(part.standard_pct).toBeGreaterThanOrEqual(0);
        expect(part.basis).toMatch(/^[A-Z].*\.$/);
      }
      expect(new Set(budget.parts.map((part) => part.component)).size).toBe(budget.parts.length);
    }
  });

  it("has the repeatability of a side's runs, and of a single run its noise", () => {
    expect(partOf(peakOf(result), "repeatability")).toBeGreaterThan(0.05);
    const run = result.runs[0].peak;
    expect(run?.budget?.parts.map((part) => part.component)).not.toContain("repeatability");
    expect(run && partOf(run, "smoothing")).toBeGreaterThan(0.01);
  });

  it("says for every point of the side's curve how well it is known", () => {
    const { engine_kw, engine_kw_uncertainty, rpm, peak } = result.sides.A;
    const at = rpm.indexOf(peak?.engine_kw_rpm ?? 0);
    expect(engine_kw_uncertainty?.[at]).toBeCloseTo(peak?.uncertainty_kw ?? 0, 3);
    engine_kw.forEach((kw, k) => {
      expect(engine_kw_uncertainty?.[k] === null).toBe(kw === null);
    });
  });
});

describe("Each part against the same campaign analysed again with that figure moved by its standard uncertainty", () => {
  const cases: [BudgetComponent, (v: Campaign["vehicle"]) => Partial<Campaign["vehicle"]>][] = [
    ["mass", (v) => ({ mass_kg: v.mass_kg + (v.mass_uncertainty_kg ?? 0) })],
    [
      "engine inertia",
      (v) => ({
        engine_inertia_kgm2: (v.engine_inertia_kgm2 ?? 0) + (v.engine_inertia_uncertainty_kgm2 ?? 0),
      }),
    ],
    [
      "wheel inertia",
      (v) => ({ wheel_inertia_kgm2: (v.wheel_inertia_kgm2 ?? 0) + (v.wheel_inertia_uncertainty_kgm2 ?? 0) }),
    ],
    [
      "mesh efficiency",
      (v) => ({ mesh_efficiency: (v.mesh_efficiency ?? 0) - (v.mesh_efficiency_uncertainty ?? 0) }),
    ],
  ];
  it.each(cases)(
    "%s",
    (component, change) => {
      const moved = movedPct(change(typed.vehicle));
      const stated = partOf(peakOf(result), component);
      expect(stated).toBeGreaterThan(0.1);
      expect(moved / stated).toBeGreaterThan(0.93);
      expect(moved / stated).toBeLessThan(1.07);
    },
    60_000,
  );

  it("speed scale, twice: every speed channel reads 1 % too fast and nothing checks it", () => {
    const sensors = { rateHz: 25, gps: false, position: false };
    const [right, fast] = [1, 1.01].map((wheelScale) => {
      const one = simulateCampaign(
        { order: "ABBA", directions: "+-+-", sensors: { ...sensors, wheelScale } },
        312,
      );
      return peakOf(analyseCampaign(typedWrong(one.campaign, "hatch", 312, EXACT), one.logs));
    });
    const moved = 100 * (fast.engine_kw / right.engine_kw - 1);
    expect(moved / partOf(right, "speed scale")).toBeGreaterThan(0.93);
    expect(moved / partOf(right, "speed scale")).toBeLessThan(1.07);
    // The same on torque, whose gearing is measured with the same speed.
    expect(100 * (fast.engine_nm / right.engine_nm - 1)).toBeGreaterThan(1.7);
  }, 60_000);

  it("slip, where only driven wheels tell the speed: a tyre that slips more by the standard uncertainty", () => {
    const sensors = { rateHz: 25, undrivenWheel: false, gps: false, position: false };
    // The simulator's slip is force over stiffness: 2.56e-6 per newton, then 1.5e-6 more.
    const [usual, soft] = [390_000, 1 / (1 / 390_000 + 1.5e-6)].map((slipStiffnessN) => {
      const one = simulateCampaign(
        { order: "ABBA", directions: "+-+-", sensors, physics: { slipStiffnessN } },
        313,
      );
      return peakOf(analyseCampaign(typedWrong(one.campaign, "hatch", 313, EXACT), one.logs));
    });
    const moved = 100 * (soft.engine_kw / usual.engine_kw - 1);
    // Twice 1 % of the wheel part is the scale that nothing checks; the rest of the squares is the slip.
    const wheelShare = partOf(usual, "mesh efficiency") / (1 / (typed.vehicle.mesh_efficiency ?? 1));
    const slip = Math.sqrt(partOf(usual, "speed scale") ** 2 - (2 * wheelShare) ** 2);
    expect(moved / slip).toBeGreaterThan(0.75);
    expect(moved / slip).toBeLessThan(1.25);
  }, 60_000);

  it("weather, through the factor: readings moved by 4.04 hPa, the standard uncertainty of ±0.7 kPa", () => {
    const runs = typed.runs.map((run) => ({
      ...run,
      weather: run.weather && { ...run.weather, pressure_hpa: run.weather.pressure_hpa - 4.0415 },
    }));
    const again = analyseCampaign({ ...typed, runs }, simulated.logs);
    const moved = 100 * (peakOf(again).engine_kw / peakOf(result).engine_kw - 1);
    // 1.18 · 0.40415 kPa / 98 kPa = 0.49 %; temperature and humidity add as squares.
    expect(moved).toBeCloseTo(0.49, 1);
    expect(partOf(peakOf(result), "weather")).toBeGreaterThan(moved);
    expect(partOf(peakOf(result), "weather")).toBeLessThan(1.15 * moved);
  }, 60_000);
});

describe("budgetAdvice", () => {
  it("names the largest part and what is left without it", () => {
    const part = (component: BudgetComponent, standard_pct: number) => ({
      ...{ component, standard_pct, standard_kw: standard_pct, basis: "A basis." },
    });
    const parts = [part("mass", 0.3), part("mesh efficiency", 1.2), part("wind", 0.4)];
    const advice = budgetAdvice({ coverage_factor: 2, parts, expanded_pct: 2.6, expanded_kw: 2.6 });
    expect(advice?.component).toBe("mesh efficiency");
    // 2 · √(0.3² + 0.4²) = 1.
    expect(advice?.leftPct).toBeCloseTo(1, 12);
    expect(advice?.remedy).toMatch(/vehicle sheet/);
  });
  it("has nothing to say of an empty one", () =>
    expect(budgetAdvice({ coverage_factor: 2, parts: [], expanded_pct: 0, expanded_kw: 0 })).toBeNull());
});
