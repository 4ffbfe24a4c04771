import type { Campaign, CampaignRun, Reason } from "@/lib/measure/types";
import { toCampaignVehicle } from "@/lib/measure/vehicle-sheet";
import type { CurrentInput } from "@/lib/services/comparisons/current-input";

/** How the analysis calls a run, in its results and its sentences. */
export const campaignRunId = (run: { number: number }): string => String(run.number);

/** Test mass of a road day, kg: as typed for that day, else the sheet's. */
export function massOf(current: Pick<CurrentInput, "sheet">, run: { massKg: number | null }): number {
  return toCampaignVehicle(current.sheet, run.massKg).mass_kg;
}

const counted = (current: Pick<CurrentInput, "runs">) => current.runs.filter((run) => run.counts);

/** Mean test mass of the runs that count, kg; null leaves the sheet's. */
function commonMassKg(current: CurrentInput): number | null {
  const masses = counted(current).map((run) => massOf(current, run));
  return masses.length === 0 ? null : masses.reduce((sum, mass) => sum + mass, 0) / masses.length;
}

/** The computation takes one mass for all runs; says so where the road days had different ones. */
export function massWarning(current: CurrentInput): Reason | null {
  const masses = counted(current).map((run) => massOf(current, run));
  const lightest = Math.min(...masses);
  const heaviest = Math.max(...masses);
  if (masses.length === 0 || heaviest - lightest < 0.5) return null;
  const share = ((heaviest - lightest) / lightest) * 100;
  return {
    code: "mass_differs",
    message: `The road days had test masses from ${Math.round(lightest)} to ${Math.round(heaviest)} kg; one mean mass was used for all, so a difference of up to ${share.toFixed(1)} % can come from that alone.`,
  };
}

/** Writes the runs that count as a campaign, in the spelling of the analysis. Road days group runs that share losses. */
export function buildCampaign(current: CurrentInput): Campaign {
  const runs = counted(current).map(
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
    }),
  );
  return {
    campaign: 1,
    vehicle: toCampaignVehicle(current.sheet, commonMassKg(current)),
    runs,
    compare: { a: "A", b: "B" },
    settings: current.input.settings,
  };
}
