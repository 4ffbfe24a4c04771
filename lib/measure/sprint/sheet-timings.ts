import type { CampaignSettings } from "@/lib/measure/types";

/** What a programme times beside the usual ranges and distances, as its vehicle sheet keeps it. */
export interface SheetTimings {
  speedPairs: { from: number; to: number; unit: "km/h" | "mph" }[];
  distancesM: number[];
  /** Net fall of a sprint beyond which it gets a note, %; null: the usual limit. */
  fallLimitPct: number | null;
}

/** The sheet's timings in the spelling of the analysis; nothing when the sheet has none. */
export function toTimingSettings(
  timings: SheetTimings | undefined,
): Pick<CampaignSettings, "speed_pairs" | "distances_m" | "fall_limit_pct"> {
  if (!timings) return {};
  return {
    speed_pairs: timings.speedPairs.map(({ from, to, unit }) =>
      unit === "mph" ? { from_mph: from, to_mph: to } : { from_kmh: from, to_kmh: to },
    ),
    distances_m: timings.distancesM,
    fall_limit_pct: timings.fallLimitPct,
  };
}
