import { and, asc, desc, eq, inArray, isNull, sql } from "drizzle-orm";
import type { Queryable } from "@/db/client";
import { revisions, runAnalyses, runs, users, workspaces } from "@/db/tables";

export type RunRow = typeof runs.$inferSelect;
type Key = { workspaceId: string; runId: string };

const at = ({ workspaceId, runId }: Key) => and(eq(runs.workspaceId, workspaceId), eq(runs.id, runId));

/** Takes the workspace's next run number under the row's lock, so that runs are attached one after the other. */
export async function takeRunNumber(
  tx: Queryable,
  { workspaceId }: { workspaceId: string },
): Promise<number> {
  const [row] = await tx
    .update(workspaces)
    .set({ nextRunNumber: sql`${workspaces.nextRunNumber} + 1` })
    .where(eq(workspaces.id, workspaceId))
    .returning({ next: workspaces.nextRunNumber });
  return row.next - 1;
}

export async function insertRun(tx: Queryable, values: typeof runs.$inferInsert): Promise<RunRow> {
  const [row] = await tx.insert(runs).values(values).returning();
  return row;
}

export async function selectRun(db: Queryable, key: Key): Promise<RunRow | null> {
  const [row] = await db.select().from(runs).where(at(key));
  return row ?? null;
}

/** As selectRun, holding the row until the transaction ends. */
export async function lockRun(tx: Queryable, key: Key): Promise<RunRow | null> {
  const [row] = await tx.select().from(runs).where(at(key)).for("update");
  return row ?? null;
}

/** Changes a run if it still has the version that was read. @returns the changed row, or null when it has moved */
export async function updateRun(
  tx: Queryable,
  args: Key & { rowVersion: number; set: Partial<typeof runs.$inferInsert> },
): Promise<RunRow | null> {
  const [row] = await tx
    .update(runs)
    .set({ ...args.set, rowVersion: sql`${runs.rowVersion} + 1` })
    .where(and(at(args), eq(runs.rowVersion, args.rowVersion)))
    .returning();
  return row ?? null;
}

/** The verdict of the analysis; leaves the row's version alone, since nobody edited anything. */
export async function setRunState(tx: Queryable, args: Key & { state: RunRow["state"] }): Promise<void> {
  await tx.update(runs).set({ state: args.state }).where(at(args));
}

/** The run of a programme that has this log and is not set aside. */
export async function selectRunWithLog(
  db: Queryable,
  args: { workspaceId: string; programmeId: string; logSha256: string },
) {
  const [row] = await db
    .select({ id: runs.id, number: runs.number })
    .from(runs)
    .where(
      and(
        eq(runs.workspaceId, args.workspaceId),
        eq(runs.programmeId, args.programmeId),
        eq(runs.logSha256, args.logSha256),
        isNull(runs.setAsideAt),
      ),
    );
  return row ?? null;
}

/** Places of a road day's driven order that are taken, with the run that has each. */
export async function selectTakenPlaces(
  db: Queryable,
  { workspaceId, roadDayId }: { workspaceId: string; roadDayId: string },
) {
  return await db
    .select({ id: runs.id, number: runs.number, driveOrder: runs.driveOrder, state: runs.state })
    .from(runs)
    .where(and(eq(runs.workspaceId, workspaceId), eq(runs.roadDayId, roadDayId), isNull(runs.setAsideAt)))
    .orderBy(asc(runs.driveOrder));
}

/** Runs of a road day in the order driven, those set aside too, each with its newest analysis. */
export async function selectRunsOfRoadDay(
  db: Queryable,
  { workspaceId, roadDayId }: { workspaceId: string; roadDayId: string },
) {
  const newest = db
    .selectDistinctOn([runAnalyses.runId], { runId: runAnalyses.runId, result: runAnalyses.result })
    .from(runAnalyses)
    .where(eq(runAnalyses.workspaceId, workspaceId))
    .orderBy(runAnalyses.runId, desc(runAnalyses.createdAt))
    .as("newest");
  return await db
    .select({
      run: runs,
      revisionNumber: revisions.number,
      testerName: users.name,
      result: newest.result,
    })
    .from(runs)
    .innerJoin(revisions, eq(revisions.id, runs.revisionId))
    .innerJoin(users, eq(users.id, runs.testerId))
    .leftJoin(newest, eq(newest.runId, runs.id))
    .where(and(eq(runs.workspaceId, workspaceId), eq(runs.roadDayId, roadDayId)))
    .orderBy(asc(runs.driveOrder), asc(runs.number));
}

/** Runs of a road day that carry exactly the given weather, i.e. took it over when they were attached. */
export async function updateWeatherOfRuns(
  tx: Queryable,
  args: {
    workspaceId: string;
    roadDayId: string;
    old: Weather;
    new: Weather;
  },
): Promise<void> {
  await tx
    .update(runs)
    .set(args.new)
    .where(
      and(
        eq(runs.workspaceId, args.workspaceId),
        eq(runs.roadDayId, args.roadDayId),
        eq(runs.tempC, args.old.tempC),
        eq(runs.pressureHpa, args.old.pressureHpa),
        eq(runs.humidityPct, args.old.humidityPct),
      ),
    );
}
type Weather = Pick<RunRow, "tempC" | "pressureHpa" | "humidityPct">;

/** Runs of a programme or of one of its road days, with the revision each belongs to; `lock` holds their rows. */
export async function selectRunIds(
  db: Queryable,
  args: { workspaceId: string; programmeId: string; roadDayId?: string; lock?: boolean },
) {
  const query = db
    .select({ id: runs.id, revisionId: runs.revisionId })
    .from(runs)
    .where(
      and(
        eq(runs.workspaceId, args.workspaceId),
        eq(runs.programmeId, args.programmeId),
        args.roadDayId === undefined ? undefined : eq(runs.roadDayId, args.roadDayId),
      ),
    )
    .orderBy(asc(runs.number));
  return args.lock ? await query.for("update") : await query;
}

/** Revisions of a programme that a run may be attached to, or that one was: newest first. */
export async function selectDrivableRevisions(
  db: Queryable,
  { workspaceId, programmeId }: { workspaceId: string; programmeId: string },
) {
  return await db
    .select({ id: revisions.id, number: revisions.number, title: revisions.title, state: revisions.state })
    .from(revisions)
    .where(
      and(
        eq(revisions.workspaceId, workspaceId),
        eq(revisions.programmeId, programmeId),
        inArray(revisions.state, ["validating", "in_review", "promoted"]),
        isNull(revisions.setAsideAt),
        isNull(revisions.barredAt),
      ),
    )
    .orderBy(desc(revisions.number));
}
