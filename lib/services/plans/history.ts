import type { Queryable } from "@/db/client";
import { type StoredScatter, selectRoadDayPlaces, selectStoredScatter } from "@/db/queries/repeatability";
import { nullTestOutcome } from "@/lib/compare/null-test";
import {
  type PlanBasis,
  placesSeen,
  pooledScatter,
  type Scatter,
  STARTING_SD_PCT,
} from "@/lib/compare/plan/plan-scatter";
import { STANDARD_SHA256 } from "@/lib/services/comparisons/standard-digest";
import type { ScatterDay } from "@/lib/services/plans/schema";
import { median } from "@/lib/signal/statistics";

/** What a past comparison's band tells a plan; `smoothingPct` null in results that do not state it. */
interface PastBand {
  criticalValue: number;
  df: number;
  smoothingPct: number | null;
}

/** The figures of a road day from the comparison that leaves most degrees of freedom; a day may be part of several. */
function bestOf(stored: readonly StoredScatter[], roadDayId: string) {
  const found = stored.flatMap((row) => {
    const figures = row.repeatability?.find((entry) => entry.road_day === roadDayId);
    return figures ? [{ row, figures }] : [];
  });
  found.sort((x, y) => y.figures.df - x.figures.df || x.row.comparisonId.localeCompare(y.row.comparisonId));
  return found[0] ?? null;
}

/** Every road day of a programme with its scatter, in the order driven, and the bands that its comparisons drew. */
export async function scatterHistory(
  db: Queryable,
  place: { workspaceId: string; programmeId: string },
): Promise<{ days: ScatterDay[]; bands: PastBand[] }> {
  const stored = await selectStoredScatter(db, { ...place, settingsSha256: STANDARD_SHA256 });
  const roadDays = await selectRoadDayPlaces(db, place);
  const days = roadDays.map((row): ScatterDay => {
    const best = bestOf(stored, row.id);
    const test = stored.find((entry) => entry.nullTestRoadDayId === row.id);
    return {
      roadDayId: row.id,
      day: row.day,
      stripName: row.stripName,
      sample: row.sample,
      figures: best?.figures ?? null,
      comparison: best && {
        id: best.row.comparisonId,
        a: best.row.a,
        b: best.row.b,
        analysisVersion: best.row.analysisVersion,
      },
      nullTest: test ? nullTestOutcome(test.delta) : null,
      isNullTest: row.nullTestRevisionId !== null,
    };
  });
  const bands = stored.flatMap(({ delta }) =>
    delta?.band
      ? [
          {
            criticalValue: delta.band.critical_value,
            df: delta.band.df,
            smoothingPct: delta.band.smoothing_pct ?? null,
          },
        ]
      : [],
  );
  return { days, bands };
}

/** One figure of the scatter pooled over road days; null where none has it. */
export function poolDays(days: readonly ScatterDay[], key: "sd_range_pct" | "sd_point_pct"): Scatter | null {
  const figures = days.flatMap((day) => day.figures ?? []);
  return pooledScatter(figures.map((entry) => ({ sdPct: entry[key], df: entry.df })));
}

/** Pools the scatter of road days into what a plan rests on; starting values where there is none. */
export function planBasis({ days, bands }: Awaited<ReturnType<typeof scatterHistory>>): PlanBasis {
  const smoothing = bands.flatMap((band) => band.smoothingPct ?? []);
  return {
    range: poolDays(days, "sd_range_pct") ?? { sdPct: STARTING_SD_PCT.range, df: null },
    point: poolDays(days, "sd_point_pct") ?? { sdPct: STARTING_SD_PCT.point, df: null },
    places: placesSeen(bands),
    smoothingPct: smoothing.length > 0 ? median(smoothing) : null,
  };
}
