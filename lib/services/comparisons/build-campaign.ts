import { toTimingSettings } from "@/lib/measure/sprint/sheet-timings";
import type { Campaign, CampaignRun } from "@/lib/measure/types";
import { toCampaignVehicle } from "@/lib/measure/vehicle/vehicle-sheet";
import type { CurrentInput } from "@/lib/services/comparisons/current-input";

/** How the analysis calls a run, in its results and its sentences. */
export const campaignRunId = (run: { number: number }): string => String(run.number);

/** Test mass of a road day, kg: as typed for that day, else the sheet's. */
export function massOf(current: Pick<CurrentInput, "sheet">, run: { massKg: number | null }): number {
  return toCampaignVehicle(current.sheet, run.massKg).mass_kg;
}

/** The runs that count as a campaign, in the spelling of the analysis. A road day shares losses and may have its own mass. */
export function buildCampaign(current: CurrentInput): Campaign {
  const runs = current.runs
    .filter((run) => run.counts)
    .map(
      (run): CampaignRun => ({
        id: campaignRunId(run),
        file: run.logFileName,
        kind: run.kind,
        side: run.side,
        leg: run.leg,
        order: run.order,
        gear: run.gear,
        started_at: run.startedAt?.toISOString() ?? null,
        weather: { temp_c: run.tempC, pressure_hpa: run.pressureHpa, rh_pct: run.humidityPct },
        road_day: run.roadDayId,
        mass_kg: run.massKg,
      }),
    );
  return {
    campaign: 1,
    vehicle: toCampaignVehicle(current.sheet),
    runs,
    compare: { a: "A", b: "B" },
    settings: { ...current.input.settings, ...toTimingSettings(current.sheet.timings) },
  };
}
