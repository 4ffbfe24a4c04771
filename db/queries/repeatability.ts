import { sql } from "drizzle-orm";
import type { Queryable } from "@/db/client";
import type { DeltaResult, RepeatabilityResult } from "@/lib/measure/types";

/** What one comparison's newest result says of the scatter, without the curves that make a result large. */
export interface StoredScatter extends Record<string, unknown> {
  comparisonId: string;
  nullTestRoadDayId: string | null;
  a: number;
  b: number;
  analysisVersion: string;
  /** Null in results of versions that did not tell it. */
  repeatability: RepeatabilityResult[] | null;
  /** Null where a side has no usable pull. */
  delta: Pick<DeltaResult, "band" | "regions" | "low_pct" | "high_pct"> | null;
}

/** Scatter of every comparison of a programme under the given settings, each from its newest finished result. */
export async function selectStoredScatter(
  db: Queryable,
  args: { workspaceId: string; programmeId: string; settingsSha256: string },
): Promise<StoredScatter[]> {
  const { rows } = await db.execute<StoredScatter>(sql`
    select distinct on (c.id) c.id as "comparisonId", c.null_test_road_day_id as "nullTestRoadDayId",
      ra.number as a, rb.number as b, r.analysis_version as "analysisVersion",
      r.result->'repeatability' as repeatability,
      case when jsonb_typeof(r.result->'delta') = 'object' then jsonb_build_object(
        'band', r.result->'delta'->'band', 'regions', r.result->'delta'->'regions',
        'low_pct', r.result->'delta'->'low_pct', 'high_pct', r.result->'delta'->'high_pct') end as delta
    from comparisons c
    join comparison_results r on r.comparison_id = c.id and r.state = 'ready'
    join revisions ra on ra.id = c.revision_a_id
    join revisions rb on rb.id = c.revision_b_id
    where c.workspace_id = ${args.workspaceId} and c.programme_id = ${args.programmeId}
      and c.settings_sha256 = ${args.settingsSha256}
    order by c.id, r.created_at desc`);
  return rows;
}

/** Road days of a programme in the order driven. */
export async function selectRoadDayPlaces(db: Queryable, args: { workspaceId: string; programmeId: string }) {
  const { rows } = await db.execute<{
    id: string;
    day: string;
    stripName: string;
    nullTestRevisionId: string | null;
    sample: boolean;
  }>(sql`
    select id, day::text as day, strip_name as "stripName", null_test_revision_id as "nullTestRevisionId", sample
    from road_days where workspace_id = ${args.workspaceId} and programme_id = ${args.programmeId}
    order by day, created_at`);
  return rows;
}
