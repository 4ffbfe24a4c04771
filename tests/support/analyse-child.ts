import { HATCH_SHEET } from "@/db/seed/demo-car";
import { EFFECTS } from "@/db/seed/demo-effects";
import { driveRoadDay } from "@/db/seed/demo-logs";
import { readLog } from "@/lib/logs/read-log";
import { analyseCampaign } from "@/lib/measure/analyse-campaign";
import { toCampaignVehicle } from "@/lib/measure/vehicle/vehicle-sheet";

// Prints the result of one simulated campaign; the argument "reversed" names its runs in the opposite order.
const [, , direction] = process.argv;
const day = driveRoadDay({
  twinsPerSide: 2,
  effectA: EFFECTS.asFound,
  effectB: EFFECTS.midRange,
  tempC: 16,
  seed: 31,
});
const runs = day.map(({ side, leg, order, tempC, pressureHpa, humidityPct }) => ({
  ...{ id: String(order), file: `${order}.csv`, kind: "pull" as const, gear: 3, started_at: null },
  ...{ side, leg, order, road_day: "d" },
  weather: { temp_c: tempC, pressure_hpa: pressureHpa, rh_pct: humidityPct },
}));
const logs = new Map(
  day.map(({ order, csv }) => [String(order), readLog(csv, { fileName: `${order}.csv`, drive: "FWD" })]),
);
const result = analyseCampaign(
  {
    campaign: 1,
    vehicle: toCampaignVehicle(HATCH_SHEET),
    runs: direction === "reversed" ? [...runs].reverse() : runs,
    compare: { a: "A", b: "B" },
    settings: { factor: "auto", rpm_step: 50, level: 0.95, seed: 1 },
  },
  logs,
);
process.stdout.write(JSON.stringify(result));
