import { expect, it, vi } from "vitest";
import { HATCH_SHEET } from "@/db/seed/demo-car";
import { EFFECTS } from "@/db/seed/demo-effects";
import { driveRoadDay, type Effect } from "@/db/seed/demo-logs";
import { readLog } from "@/lib/logs/read-log";
import { analyseCampaign } from "@/lib/measure/analyse-campaign";
import { toCampaignVehicle } from "@/lib/measure/vehicle/vehicle-sheet";

vi.setConfig({ testTimeout: 60_000 });

/** A simulated road day of four runs a side, from the log's text to the result. */
function compared(effectB: Effect) {
  const day = driveRoadDay({ twinsPerSide: 2, effectA: EFFECTS.asFound, effectB, tempC: 16, seed: 21 });
  const logs = new Map(day.map((run) => [String(run.order), readLog(run.csv, { drive: "FWD" })]));
  const runs = day.map(({ order, side, leg }) => ({
    ...{ id: String(order), file: "", kind: "pull" as const, side, leg, order, gear: 3 },
  }));
  return analyseCampaign(
    {
      campaign: 1,
      vehicle: toCampaignVehicle(HATCH_SHEET),
      runs,
      compare: { a: "A", b: "B" },
      settings: { factor: "auto", rpm_step: 50, level: 0.95, seed: 1 },
    },
    logs,
  );
}

// Truth: what the simulator was told to do.
it("finds a spike of 4 % over 200 1/min through logger, estimator and smoothing, and none on the clean side", () => {
  const spike = (rpm: number) => 0.04 * Math.exp(-0.5 * ((rpm - 5600) / 85) ** 2);
  const { sides } = compared({ ...EFFECTS.asFound, gain: spike });
  expect(sides.A.anomalies).toEqual([]);
  expect(sides.B.anomalies?.map(({ code }) => code)).toEqual(["spike"]);
  const found = sides.B.anomalies?.[0];
  expect(found?.from_rpm).toBeLessThanOrEqual(5700);
  expect(found?.to_rpm).toBeGreaterThanOrEqual(5550);
  expect(found?.size_pct).toBeGreaterThan(2);
  expect(found?.size_pct).toBeLessThan(5);
});

it("shows what B does to the engine: hotter, with more boost, as lean as the simulator was told", () => {
  const { delta, sides } = compared(EFFECTS.midRange);
  const channels = delta?.channels ?? {};
  const at = (name: keyof typeof channels, rpm: number) => {
    const found = channels[name];
    return found?.difference[found.rpm.indexOf(rpm)] ?? Number.NaN;
  };
  expect(at("lambda", 3600)).toBeCloseTo(0.008, 2);
  expect(Math.abs(at("manifold_pressure", 3600) - 11)).toBeLessThan(1.5);
  // 20 K hotter gas, of which a sensor with 4 s lag shows a part in a pull of 9 s.
  expect(channels.exhaust_temperature?.worst.mean_difference).toBeGreaterThan(10);
  expect(channels.exhaust_temperature?.worst.mean_difference).toBeLessThan(20);
  expect(sides.B.full_load?.not_recorded).toEqual(["injector_duty"]);
  expect(sides.A.full_load?.longest_load_s).toBeGreaterThan(8);
  // 5.5 % more between 2,300 and 4,700: all of the middle third, most of the lower one.
  const middle = delta?.range_means?.[2];
  expect(middle?.low_pct).toBeGreaterThan(2);
  expect(middle?.high_pct).toBeLessThan(6.5);
});
