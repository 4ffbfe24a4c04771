import { and, desc, eq, sql } from "drizzle-orm";
import type { Queryable } from "@/db/client";
import { channelKeys, type decisions, roadDays, runAnalyses, runs } from "@/db/tables";

export type RunAnalysisRow = typeof runAnalyses.$inferSelect;
type Key = { workspaceId: string; runId: string };

/** What a run's verdict is computed from, beside its log and the vehicle sheet. */
export async function selectRunForJudging(db: Queryable, key: Key) {
  const [row] = await db
    .select({ run: runs, massKg: roadDays.massKg, channelKey: channelKeys.key })
    .from(runs)
    .innerJoin(roadDays, eq(roadDays.id, runs.roadDayId))
    .leftJoin(channelKeys, eq(channelKeys.id, runs.channelKeyId))
    .where(and(eq(runs.workspaceId, key.workspaceId), eq(runs.id, key.runId)));
  return row ?? null;
}

/** Keeps a verdict as the newest one; of an input that was judged before, the row that is there becomes the newest again. */
export async function insertRunAnalysis(
  tx: Queryable,
  values: typeof runAnalyses.$inferInsert,
): Promise<void> {
  const createdAt = sql`clock_timestamp()`;
  await tx
    .insert(runAnalyses)
    .values({ ...values, createdAt })
    .onConflictDoUpdate({ target: [runAnalyses.runId, runAnalyses.inputSha256], set: { createdAt } });
}

/** Verdicts of a run, newest first. */
export async function selectRunAnalyses(
  db: Queryable,
  { workspaceId, runId }: Key,
): Promise<RunAnalysisRow[]> {
  return await db
    .select()
    .from(runAnalyses)
    .where(and(eq(runAnalyses.workspaceId, workspaceId), eq(runAnalyses.runId, runId)))
    .orderBy(desc(runAnalyses.createdAt))
    .limit(10);
}

/** Whether a run was ever judged. */
export async function hasRunAnalysis(db: Queryable, { workspaceId, runId }: Key): Promise<boolean> {
  const [row] = await db
    .select({ runId: runAnalyses.runId })
    .from(runAnalyses)
    .where(and(eq(runAnalyses.workspaceId, workspaceId), eq(runAnalyses.runId, runId)))
    .limit(1);
  return row !== undefined;
}

/** A record whose decision rests on a run. */
export interface CitingRecord {
  runId: string;
  recordNumber: number;
  decisionId: string;
  kind: typeof decisions.$inferSelect.kind;
}

/** The records whose decision rests on any of the runs, oldest first; a run that was left out there bears none. */
export async function selectCitingRecords(
  db: Queryable,
  { workspaceId, runIds }: { workspaceId: string; runIds: readonly string[] },
): Promise<CitingRecord[]> {
  if (runIds.length === 0) return [];
  const ids = sql.param([...runIds]);
  const { rows } = await db.execute<CitingRecord & Record<string, unknown>>(sql`
    select cited->>'runId' as "runId", record_number as "recordNumber", id as "decisionId", kind
    from decisions, jsonb_array_elements(evidence->'runs') as cited
    where workspace_id = ${workspaceId} and cited->>'runId' = any(${ids})
      and cited->>'leftOut' is null
    order by record_number`);
  return rows;
}

/** Comparisons that a revision is on a side of, with the numbers of both. */
export async function selectComparisonsWithRevision(
  db: Queryable,
  { workspaceId, revisionId }: { workspaceId: string; revisionId: string },
) {
  const { rows } = await db.execute<{ id: string; a: number; b: number }>(sql`
    select c.id, ra.number as a, rb.number as b
    from comparisons c
    join revisions ra on ra.id = c.revision_a_id
    join revisions rb on rb.id = c.revision_b_id
    where c.workspace_id = ${workspaceId} and (c.revision_a_id = ${revisionId} or c.revision_b_id = ${revisionId})
    order by c.created_at desc limit 20`);
  return rows;
}
