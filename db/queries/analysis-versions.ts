import { and, asc, desc, eq, ne, type SQL, sql } from "drizzle-orm";
import type { Queryable } from "@/db/client";
import type { JobName } from "@/db/job-queue";
import type { ComparisonRow } from "@/db/queries/comparisons";
import { comparisonResults, comparisons, decisions, revisions } from "@/db/tables";

type Place = { workspaceId: string; programmeId: string };

/** Comparisons of a programme, null tests too, oldest first. */
export async function selectComparisonsOfProgramme(
  db: Queryable,
  { workspaceId, programmeId }: Place,
): Promise<ComparisonRow[]> {
  return await db
    .select()
    .from(comparisons)
    .where(and(eq(comparisons.workspaceId, workspaceId), eq(comparisons.programmeId, programmeId)))
    .orderBy(asc(comparisons.createdAt));
}

/** Finished results of a comparison under other analysis versions, newest first, without what came out. */
export async function selectOlderInputs(
  db: Queryable,
  args: { workspaceId: string; comparisonId: string; analysisVersion: string },
) {
  return await db
    .select({
      inputSha256: comparisonResults.inputSha256,
      input: comparisonResults.input,
      createdAt: comparisonResults.createdAt,
    })
    .from(comparisonResults)
    .where(
      and(
        eq(comparisonResults.workspaceId, args.workspaceId),
        eq(comparisonResults.comparisonId, args.comparisonId),
        eq(comparisonResults.state, "ready"),
        ne(comparisonResults.analysisVersion, args.analysisVersion),
      ),
    )
    .orderBy(desc(comparisonResults.createdAt));
}

/** Decisions of a programme that rest on a result of another analysis version, newest first. */
export async function selectOlderDecisions(
  db: Queryable,
  { workspaceId, programmeId, analysisVersion }: Place & { analysisVersion: string },
) {
  const version = sql<string>`${decisions.evidence}->>'analysisVersion'`;
  return await db
    .select({
      id: decisions.id,
      recordNumber: decisions.recordNumber,
      kind: decisions.kind,
      revisionId: decisions.revisionId,
      revisionNumber: revisions.number,
      analysisVersion: version,
    })
    .from(decisions)
    .innerJoin(revisions, eq(revisions.id, decisions.revisionId))
    .where(
      and(
        eq(decisions.workspaceId, workspaceId),
        eq(decisions.programmeId, programmeId),
        sql`${version} is not null and ${version} <> ${analysisVersion}`,
      ),
    )
    .orderBy(desc(decisions.recordNumber));
}

/**
 * True where a job on this item is on its way, or failed for good within a day: what could not be computed is not tried again every
 * hour. Failed jobs move to the queue's archive after some hours.
 */
export function hasOwnJob(name: JobName, key: string, id: SQL): SQL {
  const failedToday = sql`state = 'failed' and completed_on > now() - interval '1 day'`;
  return sql`(
    exists (select from pgboss.job
      where name = ${name} and data->>${key} = ${id}::text and (state < 'completed' or ${failedToday}))
    or exists (select from pgboss.archive
      where name = ${name} and data->>${key} = ${id}::text and ${failedToday}))`;
}

/** Comparisons that have a result, but none under this analysis version, and no job of their own (hasOwnJob), newest first. */
export async function selectOutdatedComparisons(
  db: Queryable,
  { analysisVersion, most }: { analysisVersion: string; most: number },
): Promise<{ workspaceId: string; comparisonId: string }[]> {
  const { rows } = await db.execute<{ workspaceId: string; comparisonId: string }>(sql`
    select c.workspace_id as "workspaceId", c.id as "comparisonId" from comparisons c
    where exists (select from comparison_results r where r.comparison_id = c.id)
      and not exists (
        select from comparison_results r where r.comparison_id = c.id and r.analysis_version = ${analysisVersion})
      and not ${hasOwnJob("compute-comparison", "comparisonId", sql`c.id`)}
    order by c.created_at desc limit ${most}`);
  return rows;
}

/** Runs that have a verdict, but none under this analysis version, and no job of their own; those set aside stay as they are. */
export async function selectOutdatedRuns(
  db: Queryable,
  { analysisVersion, most }: { analysisVersion: string; most: number },
): Promise<{ workspaceId: string; runId: string }[]> {
  const { rows } = await db.execute<{ workspaceId: string; runId: string }>(sql`
    select r.workspace_id as "workspaceId", r.id as "runId" from runs r
    where r.set_aside_at is null
      and exists (select from run_analyses a where a.run_id = r.id)
      and not exists (
        select from run_analyses a where a.run_id = r.id and a.analysis_version = ${analysisVersion})
      and not ${hasOwnJob("judge-run", "runId", sql`r.id`)}
    order by r.created_at desc limit ${most}`);
  return rows;
}
