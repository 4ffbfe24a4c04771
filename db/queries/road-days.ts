import { and, asc, desc, eq, sql } from "drizzle-orm";
import type { Queryable } from "@/db/client";
import { roadDays } from "@/db/tables";

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

/** The road day of a programme that was driven last. */
export async function selectNewestRoadDay(
  db: Queryable,
  { workspaceId, programmeId }: { workspaceId: string; programmeId: string },
): Promise<RoadDayRow | null> {
  const [row] = await db
    .select()
    .from(roadDays)
    .where(and(eq(roadDays.workspaceId, workspaceId), eq(roadDays.programmeId, programmeId)))
    .orderBy(desc(roadDays.day), desc(roadDays.createdAt))
    .limit(1);
  return row ?? null;
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
