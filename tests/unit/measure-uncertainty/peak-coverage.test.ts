import { beforeAll, describe, expect, it } from "vitest";
import { analyseCampaign } from "@/lib/measure/analyse-campaign";
import { simulateCampaign } from "../../support/generator";
import { goldenCampaign, goldenTruth } from "../../support/golden-campaign";
import { scoreGolden } from "../../support/score-golden";
import { typedWrong } from "../../support/typed-wrong";

const CARS = ["hatch", "coupe", "estate"] as const;
const CAMPAIGNS = 24;

interface Draw {
  errorPct: number;
  statedPct: number;
}

/** Error of side A's peak power against the engine's own, at the mean place of its runs in the day's drift. */
function draw(k: number): Draw {
  const car = CARS[k % 3];
  const seed = 9100 + k;
  const order = "ABBA";
  const driftPerRun = -0.001;
  const simulated = simulateCampaign(
    { car, order, directions: "+-+-", driftPerRun, sensors: { rateHz: 25 } },
    seed,
  );
  const { peak } = analyseCampaign(typedWrong(simulated.campaign, car, seed), simulated.logs).sides.A;
  const { rpm, referenceTorqueNm } = simulated.truth;
  const top = Math.max(
    ...referenceTorqueNm.A.map((torque, i) => ((torque ?? 0) * rpm[i] * Math.PI) / 30_000),
  );
  const meanPlace = (0 + 3) / 2;
  const truth = top * (1 + driftPerRun * meanPlace);
  return {
    errorPct: 100 * ((peak?.engine_kw ?? 0) / truth - 1),
    statedPct: peak?.budget?.expanded_pct ?? 0,
  };
}

describe("A peak's stated uncertainty (truth: lib/simulate; sheet and weather typed wrong by draws of their stated uncertainty)", () => {
  let draws: Draw[] = [];
  beforeAll(() => {
    draws = Array.from({ length: CAMPAIGNS }, (_, k) => draw(k));
  }, 300_000);

  it("holds the true peak in at least 19 of 24 (nominal 95 %: chance of fewer 0.1 %, binomial)", () => {
    const inside = draws.filter(({ errorPct, statedPct }) => Math.abs(errorPct) <= statedPct);
    expect(inside.length).toBeGreaterThanOrEqual(19);
  });

  it("is not far too wide either: errors over their standard uncertainty have a root mean square of 0.5 to 1.4", () => {
    const square = draws.reduce((sum, d) => sum + ((2 * d.errorPct) / d.statedPct) ** 2, 0) / CAMPAIGNS;
    expect(Math.sqrt(square)).toBeGreaterThan(0.5);
    expect(Math.sqrt(square)).toBeLessThan(1.4);
  });
});

describe("Typed inputs of the golden campaigns (truth: tests/golden)", () => {
  it.each(["p1-hatch-a-b", "p2-coupe-a-c", "p3-estate-a-b"])(
    "%s: the true peak lies inside what is stated, class defaults where nothing is typed",
    (id) => {
      const { campaign, logs } = goldenCampaign(id, "campaign.json");
      const result = analyseCampaign(campaign, logs);
      const truth = goldenTruth(id);
      const side = result.sides[truth.delta.base];
      // On the day basis the truth is the mean of the runs' own peaks.
      const own = truth.runs.filter((run) => run.revision === truth.delta.base);
      const dayKw = own.reduce((sum, run) => sum + run.peak_power_day_kw, 0) / own.length;
      const errorPct =
        side.basis === "reference"
          ? scoreGolden(result, truth).peakPct
          : 100 * ((side.peak?.engine_kw ?? 0) / dayKw - 1);
      expect(Math.abs(errorPct)).toBeLessThan(2.5);
      expect(Math.abs(errorPct)).toBeLessThan(side.peak?.budget?.expanded_pct ?? 0);
    },
    60_000,
  );
});
