import { and, asc, count, desc, eq, isNull, sql } from "drizzle-orm";
import type { Queryable } from "@/db/client";
import { roadDays, runs, users } from "@/db/tables";

export type RoadDayRow = typeof roadDays.$inferSelect;
type Key = { workspaceId: string; roadDayId: string };

export async function insertRoadDay(
  tx: Queryable,
  values: typeof roadDays.$inferInsert,
): Promise<RoadDayRow> {
  const [row] = await tx.insert(roadDays).values(values).returning();
  return row;
}

export async function selectRoadDay(
  db: Queryable,
  { workspaceId, roadDayId }: Key,
): Promise<RoadDayRow | null> {
  const [row] = await db
    .select()
    .from(roadDays)
    .where(and(eq(roadDays.workspaceId, workspaceId), eq(roadDays.id, roadDayId)));
  return row ?? null;
}

/** As selectRoadDay, holding the row until the transaction ends. */
export async function lockRoadDay(
  tx: Queryable,
  { workspaceId, roadDayId }: Key,
): Promise<RoadDayRow | null> {
  const [row] = await tx
    .select()
    .from(roadDays)
    .where(and(eq(roadDays.workspaceId, workspaceId), eq(roadDays.id, roadDayId)))
    .for("update");
  return row ?? null;
}

/** Changes a road day if it still has the version that was read. @returns the changed row, or null when it has moved */
export async function updateRoadDay(
  tx: Queryable,
  args: Key & { rowVersion: number; set: Partial<typeof roadDays.$inferInsert> },
): Promise<RoadDayRow | null> {
  const [row] = await tx
    .update(roadDays)
    .set({ ...args.set, rowVersion: sql`${roadDays.rowVersion} + 1` })
    .where(
      and(
        eq(roadDays.workspaceId, args.workspaceId),
        eq(roadDays.id, args.roadDayId),
        eq(roadDays.rowVersion, args.rowVersion),
      ),
    )
    .returning();
  return row ?? null;
}

/** Road days of a programme, newest first, with their runs counted (those set aside not). */
export async function selectRoadDays(
  db: Queryable,
  { workspaceId, programmeId }: { workspaceId: string; programmeId: string },
) {
  return await db
    .select({
      id: roadDays.id,
      day: roadDays.day,
      zone: roadDays.zone,
      stripName: roadDays.stripName,
      sample: roadDays.sample,
      createdByName: users.name,
      runs: count(runs.id),
      usable: sql<number>`count(${runs.id}) filter (where ${runs.state} = 'usable')::int`,
    })
    .from(roadDays)
    .innerJoin(users, eq(users.id, roadDays.createdBy))
    .leftJoin(runs, and(eq(runs.roadDayId, roadDays.id), isNull(runs.setAsideAt)))
    .where(and(eq(roadDays.workspaceId, workspaceId), eq(roadDays.programmeId, programmeId)))
    .groupBy(roadDays.id, users.name)
    .orderBy(desc(roadDays.day), desc(roadDays.createdAt));
}

/** Strips driven before in this workspace, to choose from, the one driven last first. */
export async function selectStripNames(
  db: Queryable,
  { workspaceId }: { workspaceId: string },
): Promise<{ stripName: string; stripLengthM: number | null }[]> {
  const rows = await db
    .selectDistinctOn([roadDays.stripName], {
      stripName: roadDays.stripName,
      stripLengthM: roadDays.stripLengthM,
    })
    .from(roadDays)
    .where(eq(roadDays.workspaceId, workspaceId))
    .orderBy(asc(roadDays.stripName), desc(roadDays.createdAt))
    .limit(50);
  return rows;
}
