import { beforeAll, describe, expect, it } from "vitest";
import { analyseCampaign } from "@/lib/measure/analyse-campaign";
import type { CampaignResult } from "@/lib/measure/types";
import { goldenCampaign, goldenTruth } from "../../support/golden-campaign";
import { type GoldenScore, scoreGolden } from "../../support/score-golden";

const IDS = ["p1-hatch-a-b", "p2-coupe-a-c", "p3-estate-a-b"] as const;
const results = new Map<string, CampaignResult>();
const scores = new Map<string, GoldenScore>();

function resultOf(id: string): CampaignResult {
  const found = results.get(id);
  if (!found) throw new Error(`${id} was not analysed`);
  return found;
}

beforeAll(() => {
  for (const id of IDS) {
    const { campaign, logs } = goldenCampaign(id);
    const result = analyseCampaign(campaign, logs);
    results.set(id, result);
    scores.set(id, scoreGolden(result, goldenTruth(id)));
  }
}, 120_000);

const mean = (of: (score: GoldenScore) => number) =>
  [...scores.values()].reduce((sum, score) => sum + of(score), 0) / scores.size;

describe("Accuracy on campaigns with known truth (simulator's truth.json; limits are the product's goals)", () => {
  it("uses every run and covers the whole range", () => {
    for (const id of IDS) {
      expect(resultOf(id).runs.every((run) => run.usable)).toBe(true);
      expect(scores.get(id)?.points).toBeGreaterThan(50);
    }
  });
  it("mean |peak error| at most 0.5 %", () =>
    expect(mean((s) => Math.abs(s.peakPct))).toBeLessThanOrEqual(0.5));
  it("curve error at most 0.6 % RMS", () => expect(mean((s) => s.curveRmsPct)).toBeLessThanOrEqual(0.6));
  it("delta within 0.4 percentage points of what was realised", () =>
    expect(mean((s) => s.deltaVsRealisedPp)).toBeLessThanOrEqual(0.4));
  it.each(IDS)("%s alone: delta within 0.4 with an undriven wheel's channel, within 0.75 without", (id) => {
    const hasWheel = [...goldenCampaign(id).logs.values()].every((log) =>
      log.channels.some(({ channel }) => channel === "wheel_speed_undriven"),
    );
    expect(hasWheel).toBe(id !== "p3-estate-a-b");
    expect(scores.get(id)?.deltaVsRealisedPp).toBeLessThanOrEqual(hasWheel ? 0.4 : 0.75);
  });

  it("shows the gain of 6 % of p1 and p3 where it is, and claims nothing on p2", () => {
    for (const id of ["p1-hatch-a-b", "p3-estate-a-b"]) {
      const truth = goldenTruth(id);
      const { regions } = resultOf(id).delta ?? { regions: [] };
      expect(regions).toHaveLength(1);
      expect(regions[0].verdict).toBe("gain");
      const at = (rpm: number) => truth.delta.as_driven_delta_pct[truth.delta.rpm.indexOf(rpm)];
      expect(at(regions[0].from_rpm)).toBeGreaterThan(0);
      expect(at(regions[0].to_rpm)).toBeGreaterThan(0);
      expect(regions[0].to_rpm - regions[0].from_rpm).toBeGreaterThan(1400);
    }
    expect(resultOf("p2-coupe-a-c").delta?.regions).toEqual([]);
    expect(resultOf("p2-coupe-a-c").delta?.simultaneous).toBe(true);
  });

  it("holds the true change inside the band of at least two of the three", () => {
    expect([...scores.values()].filter((score) => score.bandHolds).length).toBeGreaterThanOrEqual(2);
  });

  it("finds pull and coast-down within 0.25 s of where they are", () => {
    for (const id of IDS) {
      const truth = goldenTruth(id);
      for (const run of resultOf(id).runs) {
        const expected = truth.runs.find((r) => r.id === run.id);
        expect(Math.abs((run.segments?.pull?.from_s ?? 0) - (expected?.t_pedal_step_s ?? 99))).toBeLessThan(
          0.25,
        );
        expect(Math.abs((run.segments?.pull?.to_s ?? 0) - (expected?.t_redline_s ?? 99))).toBeLessThan(0.25);
        expect(run.segments?.coast?.from_s).toBeGreaterThan(expected?.t_neutral_s ?? 99);
      }
    }
  });

  it("gives roll-on times within 0.025 s and covers them by their stated uncertainty", () => {
    const names: Record<string, string> = { "60-100": "t_60_100_s", "80-120": "t_80_120_s" };
    let compared = 0;
    for (const id of IDS) {
      for (const run of resultOf(id).runs) {
        const truth = goldenTruth(id).runs.find((r) => r.id === run.id)?.in_gear_times ?? {};
        for (const [name, key] of Object.entries(names)) {
          const expected = truth[key];
          const got = run.times_s?.[name];
          if (got === undefined || expected === null || expected === undefined) continue;
          compared++;
          expect(Math.abs(got - expected)).toBeLessThan(0.025);
          expect(Math.abs(got - expected)).toBeLessThan(3 * (run.times_uncertainty_s?.[name] ?? 0));
        }
      }
    }
    expect(compared).toBeGreaterThan(40);
  });

  it("covers the true peak of nearly every run by its stated uncertainty", () => {
    let inside = 0;
    let all = 0;
    for (const id of IDS) {
      for (const run of resultOf(id).runs) {
        const truth = goldenTruth(id).runs.find((r) => r.id === run.id);
        const error = Math.abs((run.peak?.engine_kw ?? 0) - (truth?.peak_power_day_kw ?? 0));
        inside += error <= (run.peak?.uncertainty_kw ?? 0) ? 1 : 0;
        all++;
      }
    }
    expect(inside / all).toBeGreaterThan(0.9);
  });

  it("finds the losses within 3 % between 60 and 130 km/h", () => {
    for (const id of IDS) {
      const { loss } = resultOf(id).runs[0];
      const truth = goldenTruth(id).runs[0].loss_neutral;
      for (const v of [17, 25, 36]) {
        const got = (loss?.f0_n ?? 0) + (loss?.f1_n_per_mps ?? 0) * v + (loss?.f2_n_per_mps2 ?? 0) * v * v;
        const expected = truth.f0_n + truth.f1_n_per_mps * v + truth.f2_n_per_mps2 * v * v;
        expect(Math.abs(got / expected - 1)).toBeLessThan(0.03);
      }
    }
  });
});

describe("Typed inputs only", () => {
  it("stays within 2.5 % mean |peak error| on the stated basis, class defaults for inertia and efficiency", () => {
    const errors = IDS.map((id) => {
      const { campaign, logs } = goldenCampaign(id, "campaign.json");
      const result = analyseCampaign(campaign, logs);
      const truth = goldenTruth(id);
      const { base } = truth.delta;
      const side = result.sides[base];
      if (side.basis === "reference") return Math.abs(scoreGolden(result, truth).peakPct);
      // On the day basis the truth is the mean of the runs' own peaks.
      const peaks = truth.runs.filter((run) => run.revision === base).map((run) => run.peak_power_day_kw);
      return Math.abs(
        100 * ((side.peak?.engine_kw ?? 0) / (peaks.reduce((sum, x) => sum + x, 0) / peaks.length) - 1),
      );
    });
    expect(errors.reduce((sum, x) => sum + x, 0) / errors.length).toBeLessThanOrEqual(2.5);
  }, 120_000);
});

describe("Repeatability of the computation", () => {
  it("gives the same bytes for the same input", () => {
    const { campaign, logs } = goldenCampaign("p2-coupe-a-c");
    expect(JSON.stringify(analyseCampaign(campaign, logs))).toBe(JSON.stringify(resultOf("p2-coupe-a-c")));
  }, 60_000);
});
