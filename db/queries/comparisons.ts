import { and, asc, desc, eq, inArray, isNull, ne, or, sql } from "drizzle-orm";
import type { Queryable } from "@/db/client";
import { channelKeys, comparisonResults, comparisons, revisions, roadDays, runs, users } from "@/db/tables";

export type ComparisonRow = typeof comparisons.$inferSelect;
export type ComparisonResultRow = typeof comparisonResults.$inferSelect;
export type ComparedRun = Awaited<ReturnType<typeof selectComparedRuns>>[number];

/** Saves a question once. @returns null when the same question was there already */
export async function insertComparison(
  tx: Queryable,
  values: Omit<typeof comparisons.$inferInsert, "id" | "createdAt">,
): Promise<ComparisonRow | null> {
  const [row] = await tx
    .insert(comparisons)
    .values(values)
    .onConflictDoNothing({
      target: [
        comparisons.revisionAId,
        comparisons.revisionBId,
        comparisons.nullTestRoadDayId,
        comparisons.settingsSha256,
      ],
    })
    .returning();
  return row ?? null;
}

export async function selectComparison(
  db: Queryable,
  { workspaceId, comparisonId }: { workspaceId: string; comparisonId: string },
): Promise<ComparisonRow | null> {
  const [row] = await db
    .select()
    .from(comparisons)
    .where(and(eq(comparisons.workspaceId, workspaceId), eq(comparisons.id, comparisonId)));
  return row ?? null;
}

/** The two sides of a comparison: two revisions, or one image against itself on the road day of a null test. */
export interface Sides {
  workspaceId: string;
  revisionAId: string;
  revisionBId: string;
  nullTestRoadDayId: string | null;
}

/** Comparisons of side A with side B, one a settings set, oldest first. */
export async function selectComparisonsOf(db: Queryable, args: Sides): Promise<ComparisonRow[]> {
  return await db
    .select()
    .from(comparisons)
    .where(
      and(
        eq(comparisons.workspaceId, args.workspaceId),
        eq(comparisons.revisionAId, args.revisionAId),
        eq(comparisons.revisionBId, args.revisionBId),
        args.nullTestRoadDayId === null
          ? isNull(comparisons.nullTestRoadDayId)
          : eq(comparisons.nullTestRoadDayId, args.nullTestRoadDayId),
      ),
    )
    .orderBy(asc(comparisons.createdAt));
}

/** Ids of the comparisons that have the revision on either side. */
export async function selectComparisonIdsUsing(
  db: Queryable,
  { workspaceId, revisionId }: { workspaceId: string; revisionId: string },
): Promise<string[]> {
  const rows = await db
    .select({ id: comparisons.id })
    .from(comparisons)
    .where(
      and(
        eq(comparisons.workspaceId, workspaceId),
        or(eq(comparisons.revisionAId, revisionId), eq(comparisons.revisionBId, revisionId)),
      ),
    );
  return rows.map((row) => row.id);
}

/** Two revisions as a comparison needs them, in any order. */
export async function selectComparedRevisions(
  db: Queryable,
  { workspaceId, revisionIds }: { workspaceId: string; revisionIds: readonly string[] },
) {
  return await db
    .select({
      id: revisions.id,
      programmeId: revisions.programmeId,
      number: revisions.number,
      title: revisions.title,
      state: revisions.state,
      asFound: revisions.asFound,
      imageSha256: revisions.imageSha256,
    })
    .from(revisions)
    .where(and(eq(revisions.workspaceId, workspaceId), inArray(revisions.id, [...revisionIds])));
}

/**
 * Every run of the two sides, also those set aside, with the conditions of its road day, in the order they were driven.
 * What was driven for a null test counts there and nowhere else.
 */
export async function selectComparedRuns(
  db: Queryable,
  { workspaceId, revisionAId, revisionBId, nullTestRoadDayId }: Sides,
) {
  return await db
    .select({
      id: runs.id,
      number: runs.number,
      revisionId: runs.revisionId,
      kind: runs.kind,
      letter: runs.letter,
      leg: runs.leg,
      driveOrder: runs.driveOrder,
      gear: runs.gear,
      startedAt: runs.startedAt,
      tempC: runs.tempC,
      pressureHpa: runs.pressureHpa,
      humidityPct: runs.humidityPct,
      logSha256: runs.logSha256,
      logFileName: runs.logFileName,
      logBytes: runs.logBytes,
      channelKeyId: runs.channelKeyId,
      channelKey: channelKeys.key,
      state: runs.state,
      setAsideAt: runs.setAsideAt,
      setAsideReason: runs.setAsideReason,
      resultWasVisible: runs.resultWasVisible,
      testerName: users.name,
      roadDayId: runs.roadDayId,
      day: roadDays.day,
      dayCreatedAt: roadDays.createdAt,
      zone: roadDays.zone,
      stripName: roadDays.stripName,
      massKg: roadDays.massKg,
      windNote: roadDays.windNote,
      fuelNote: roadDays.fuelNote,
      tyrePressureFrontKpa: roadDays.tyrePressureFrontKpa,
      tyrePressureRearKpa: roadDays.tyrePressureRearKpa,
    })
    .from(runs)
    .innerJoin(roadDays, eq(roadDays.id, runs.roadDayId))
    .innerJoin(users, eq(users.id, runs.testerId))
    .leftJoin(channelKeys, eq(channelKeys.id, runs.channelKeyId))
    .where(
      and(
        eq(runs.workspaceId, workspaceId),
        inArray(runs.revisionId, [revisionAId, revisionBId]),
        nullTestRoadDayId === null
          ? isNull(roadDays.nullTestRevisionId)
          : eq(runs.roadDayId, nullTestRoadDayId),
      ),
    )
    .orderBy(asc(roadDays.day), asc(roadDays.createdAt), asc(runs.driveOrder), asc(runs.number));
}

type ResultKey = { workspaceId: string; comparisonId: string; inputSha256: string };

const resultAt = (key: ResultKey) =>
  and(
    eq(comparisonResults.workspaceId, key.workspaceId),
    eq(comparisonResults.comparisonId, key.comparisonId),
    eq(comparisonResults.inputSha256, key.inputSha256),
  );

export async function selectResult(db: Queryable, key: ResultKey): Promise<ComparisonResultRow | null> {
  const [row] = await db.select().from(comparisonResults).where(resultAt(key));
  return row ?? null;
}

/** The newest finished result of a comparison that is not of the given input: what a page shows while it is stale. */
export async function selectEarlierResult(
  db: Queryable,
  key: ResultKey,
): Promise<ComparisonResultRow | null> {
  const [row] = await db
    .select()
    .from(comparisonResults)
    .where(
      and(
        eq(comparisonResults.workspaceId, key.workspaceId),
        eq(comparisonResults.comparisonId, key.comparisonId),
        eq(comparisonResults.state, "ready"),
        ne(comparisonResults.inputSha256, key.inputSha256),
      ),
    )
    .orderBy(desc(comparisonResults.createdAt))
    .limit(1);
  return row ?? null;
}

/** Opens the row of an input; one that failed before is opened again, a finished one stays. */
export async function openResult(
  tx: Queryable,
  values: ResultKey & Pick<ComparisonResultRow, "analysisVersion" | "sheetVersion" | "input">,
): Promise<void> {
  await tx
    .insert(comparisonResults)
    .values({ ...values, state: "waiting" })
    .onConflictDoUpdate({
      target: [comparisonResults.comparisonId, comparisonResults.inputSha256],
      set: { state: "waiting", failure: null },
      setWhere: sql`${comparisonResults.state} = 'failed'`,
    });
}

/** Stores what came out; a result that is there already is never replaced. */
export async function closeResult(
  tx: Queryable,
  key: ResultKey,
  outcome:
    | { state: "ready"; result: NonNullable<ComparisonResultRow["result"]> }
    | { state: "failed"; failure: string },
): Promise<void> {
  await tx
    .update(comparisonResults)
    .set({ ...outcome, createdAt: sql`clock_timestamp()` })
    .where(and(resultAt(key), ne(comparisonResults.state, "ready")));
}
