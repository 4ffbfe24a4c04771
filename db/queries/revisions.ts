import { and, desc, eq, sql } from "drizzle-orm";
import type { Queryable } from "@/db/client";
import { decisions, gatePlans, programmes, revisions, runs, users } from "@/db/tables";

export type RevisionRow = typeof revisions.$inferSelect;
export type RevisionState = RevisionRow["state"];
type Key = { workspaceId: string; revisionId: string };

export async function selectRevision(
  db: Queryable,
  { workspaceId, revisionId }: Key,
): Promise<RevisionRow | null> {
  const [row] = await db
    .select()
    .from(revisions)
    .where(and(eq(revisions.workspaceId, workspaceId), eq(revisions.id, revisionId)));
  return row ?? null;
}

/** As selectRevision, holding the row until the transaction ends. */
export async function lockRevision(
  tx: Queryable,
  { workspaceId, revisionId }: Key,
): Promise<RevisionRow | null> {
  const [row] = await tx
    .select()
    .from(revisions)
    .where(and(eq(revisions.workspaceId, workspaceId), eq(revisions.id, revisionId)))
    .for("no key update");
  return row ?? null;
}

/** Takes the programme's next revision number under the row's lock; null for a stranger or an archived programme. */
export async function takeRevisionNumber(
  tx: Queryable,
  { workspaceId, programmeId }: { workspaceId: string; programmeId: string },
): Promise<number | null> {
  const [row] = await tx
    .update(programmes)
    .set({ nextRevisionNumber: sql`${programmes.nextRevisionNumber} + 1` })
    .where(
      and(
        eq(programmes.workspaceId, workspaceId),
        eq(programmes.id, programmeId),
        sql`${programmes.archivedAt} is null`,
      ),
    )
    .returning({ next: programmes.nextRevisionNumber });
  return row ? row.next - 1 : null;
}

export async function insertRevision(
  tx: Queryable,
  values: typeof revisions.$inferInsert,
): Promise<RevisionRow> {
  const [row] = await tx.insert(revisions).values(values).returning();
  return row;
}

/** Changes a revision if it still has the version that was read. @returns the changed row, or null when it has moved */
export async function updateRevision(
  tx: Queryable,
  args: Key & { rowVersion: number; set: Partial<typeof revisions.$inferInsert> },
): Promise<RevisionRow | null> {
  const [row] = await tx
    .update(revisions)
    .set({ ...args.set, rowVersion: sql`${revisions.rowVersion} + 1` })
    .where(
      and(
        eq(revisions.workspaceId, args.workspaceId),
        eq(revisions.id, args.revisionId),
        eq(revisions.rowVersion, args.rowVersion),
      ),
    )
    .returning();
  return row ?? null;
}

/** Runs of a revision, in the order they were driven. */
export async function selectRunsOfRevision(db: Queryable, { workspaceId, revisionId }: Key) {
  return await db
    .select({
      id: runs.id,
      number: runs.number,
      kind: runs.kind,
      leg: runs.leg,
      driveOrder: runs.driveOrder,
      state: runs.state,
      roadDayId: runs.roadDayId,
      setAsideAt: runs.setAsideAt,
      testerName: sql<string>`coalesce(${users.name}, 'somebody')`,
    })
    .from(runs)
    .innerJoin(users, eq(users.id, runs.testerId))
    .where(and(eq(runs.workspaceId, workspaceId), eq(runs.revisionId, revisionId)))
    .orderBy(runs.roadDayId, runs.driveOrder);
}

/** Decisions on a revision, newest first. */
export async function selectDecisionsOfRevision(db: Queryable, { workspaceId, revisionId }: Key) {
  return await db
    .select({
      id: decisions.id,
      recordNumber: decisions.recordNumber,
      kind: decisions.kind,
      reason: decisions.reason,
      deciderName: decisions.deciderName,
      decidedAt: decisions.decidedAt,
    })
    .from(decisions)
    .where(and(eq(decisions.workspaceId, workspaceId), eq(decisions.revisionId, revisionId)))
    .orderBy(desc(decisions.recordNumber));
}

/** The revision that stands in a programme, or null. */
export async function selectStanding(
  db: Queryable,
  { workspaceId, programmeId }: { workspaceId: string; programmeId: string },
) {
  const [row] = await db
    .select({ id: revisions.id, number: revisions.number, imageSha256: revisions.imageSha256 })
    .from(revisions)
    .where(
      and(
        eq(revisions.workspaceId, workspaceId),
        eq(revisions.programmeId, programmeId),
        eq(revisions.state, "promoted"),
      ),
    );
  return row ?? null;
}

export async function countUsableRuns(db: Queryable, { workspaceId, revisionId }: Key): Promise<number> {
  const [row] = await db
    .select({ n: sql<number>`count(*)::int` })
    .from(runs)
    .where(
      and(
        eq(runs.workspaceId, workspaceId),
        eq(runs.revisionId, revisionId),
        eq(runs.state, "usable"),
        sql`${runs.setAsideAt} is null`,
        // A run of a null test says nothing about a change.
        sql`${runs.letter} is null`,
      ),
    );
  return row.n;
}

export async function selectNewestPlanVersion(
  db: Queryable,
  { workspaceId, programmeId }: { workspaceId: string; programmeId: string },
): Promise<number | null> {
  const [row] = await db
    .select({ version: sql<number | null>`max(${gatePlans.version})` })
    .from(gatePlans)
    .where(and(eq(gatePlans.workspaceId, workspaceId), eq(gatePlans.programmeId, programmeId)));
  return row.version;
}
