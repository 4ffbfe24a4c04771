import { and, asc, count, desc, eq, gte, inArray, isNull, max, sql } from "drizzle-orm";
import type { Queryable } from "@/db/client";
import { programmeShares, programmes, revisions, runs, users } from "@/db/tables";

export type ProgrammeRow = Omit<typeof programmes.$inferSelect, "workspaceId">;

const columns = {
  id: programmes.id,
  name: programmes.name,
  goal: programmes.goal,
  sample: programmes.sample,
  standingRevisionId: programmes.standingRevisionId,
  nextRevisionNumber: programmes.nextRevisionNumber,
  rowVersion: programmes.rowVersion,
  archivedAt: programmes.archivedAt,
  createdBy: programmes.createdBy,
  createdAt: programmes.createdAt,
};

export async function insertProgramme(
  tx: Queryable,
  values: { workspaceId: string; name: string; goal: string; createdBy: string; sample: boolean },
): Promise<string> {
  const [row] = await tx.insert(programmes).values(values).returning({ id: programmes.id });
  return row.id;
}

export async function selectProgramme(
  db: Queryable,
  { workspaceId, programmeId }: { workspaceId: string; programmeId: string },
): Promise<ProgrammeRow | null> {
  const [row] = await db
    .select(columns)
    .from(programmes)
    .where(and(eq(programmes.workspaceId, workspaceId), eq(programmes.id, programmeId)));
  return row ?? null;
}

/** Programmes of a workspace by name; those of `sharedWith` only, when given. */
export async function selectProgrammes(
  db: Queryable,
  { workspaceId, sharedWith }: { workspaceId: string; sharedWith?: string },
): Promise<ProgrammeRow[]> {
  const shared = sharedWith
    ? db
        .select({ id: programmeShares.programmeId })
        .from(programmeShares)
        .where(and(eq(programmeShares.userId, sharedWith), inForce()))
    : undefined;
  return await db
    .select(columns)
    .from(programmes)
    .where(and(eq(programmes.workspaceId, workspaceId), shared && inArray(programmes.id, shared)))
    .orderBy(asc(programmes.name), asc(programmes.id));
}

/** Revisions of the workspace's programmes in the words of a list, newest first; set-aside drafts too. */
export async function selectLineage(
  db: Queryable,
  { workspaceId, programmeIds }: { workspaceId: string; programmeIds: string[] },
) {
  if (programmeIds.length === 0) return [];
  return await db
    .select({
      id: revisions.id,
      programmeId: revisions.programmeId,
      number: revisions.number,
      parentId: revisions.parentId,
      state: revisions.state,
      title: revisions.title,
      asFound: revisions.asFound,
      authorId: revisions.authorId,
      authorName: users.name,
      submitterId: revisions.submitterId,
      imageSha256: revisions.imageSha256,
      stoodFrom: revisions.stoodFrom,
      stoodUntil: revisions.stoodUntil,
      setAsideAt: revisions.setAsideAt,
      barredAt: revisions.barredAt,
      createdAt: revisions.createdAt,
    })
    .from(revisions)
    .innerJoin(users, eq(users.id, revisions.authorId))
    .where(and(eq(revisions.workspaceId, workspaceId), inArray(revisions.programmeId, programmeIds)))
    .orderBy(desc(revisions.number));
}

/** Runs that are not set aside, counted by revision, with the time of the newest. */
export async function countRunsByRevision(
  db: Queryable,
  { workspaceId, programmeIds }: { workspaceId: string; programmeIds: string[] },
) {
  if (programmeIds.length === 0) return [];
  return await db
    .select({
      programmeId: runs.programmeId,
      revisionId: runs.revisionId,
      runs: count(),
      newestAt: max(runs.createdAt),
    })
    .from(runs)
    .where(
      and(
        eq(runs.workspaceId, workspaceId),
        inArray(runs.programmeId, programmeIds),
        isNull(runs.setAsideAt),
      ),
    )
    .groupBy(runs.programmeId, runs.revisionId);
}

/** Changes name and goal where the row is still as the person saw it. @returns whether it was */
export async function updateProgramme(
  tx: Queryable,
  args: { workspaceId: string; programmeId: string; rowVersion: number; name: string; goal: string },
): Promise<boolean> {
  const changed = await tx
    .update(programmes)
    .set({ name: args.name, goal: args.goal, rowVersion: sql`${programmes.rowVersion} + 1` })
    .where(
      and(
        eq(programmes.workspaceId, args.workspaceId),
        eq(programmes.id, args.programmeId),
        eq(programmes.rowVersion, args.rowVersion),
      ),
    )
    .returning({ id: programmes.id });
  return changed.length > 0;
}

/** Archives, or takes out of the archive. @returns whether that changed anything */
export async function setArchived(
  tx: Queryable,
  args: { workspaceId: string; programmeId: string; archived: boolean },
): Promise<boolean> {
  const changed = await tx
    .update(programmes)
    .set({ archivedAt: args.archived ? sql`now()` : null, rowVersion: sql`${programmes.rowVersion} + 1` })
    .where(
      and(
        eq(programmes.workspaceId, args.workspaceId),
        eq(programmes.id, args.programmeId),
        args.archived ? isNull(programmes.archivedAt) : sql`${programmes.archivedAt} is not null`,
      ),
    )
    .returning({ id: programmes.id });
  return changed.length > 0;
}

function inForce() {
  return gte(programmeShares.expiresOn, sql`current_date`);
}

/** Whether a programme is shared with a person today. */
export async function isShared(
  db: Queryable,
  { programmeId, userId }: { programmeId: string; userId: string },
): Promise<boolean> {
  const [row] = await db
    .select({ n: count() })
    .from(programmeShares)
    .where(and(eq(programmeShares.programmeId, programmeId), eq(programmeShares.userId, userId), inForce()));
  return row.n > 0;
}

/** Shares of a programme, those that have run out too. */
export async function selectShares(
  db: Queryable,
  { workspaceId, programmeId }: { workspaceId: string; programmeId: string },
) {
  return await db
    .select({
      userId: programmeShares.userId,
      name: users.name,
      email: users.email,
      expiresOn: programmeShares.expiresOn,
      inForce: sql<boolean>`${inForce()}`,
    })
    .from(programmeShares)
    .innerJoin(users, eq(users.id, programmeShares.userId))
    .where(and(eq(programmeShares.workspaceId, workspaceId), eq(programmeShares.programmeId, programmeId)))
    .orderBy(asc(users.name));
}

/** Shares with a person until a day, or moves that day. */
export async function upsertShare(
  tx: Queryable,
  values: { workspaceId: string; programmeId: string; userId: string; expiresOn: string; sharedBy: string },
): Promise<void> {
  await tx
    .insert(programmeShares)
    .values(values)
    .onConflictDoUpdate({
      target: [programmeShares.programmeId, programmeShares.userId],
      set: { expiresOn: values.expiresOn, sharedBy: values.sharedBy },
    });
}

/** Ends a share. @returns whether there was one */
export async function deleteShare(
  tx: Queryable,
  args: { workspaceId: string; programmeId: string; userId: string },
): Promise<boolean> {
  const gone = await tx
    .delete(programmeShares)
    .where(
      and(
        eq(programmeShares.workspaceId, args.workspaceId),
        eq(programmeShares.programmeId, args.programmeId),
        eq(programmeShares.userId, args.userId),
      ),
    )
    .returning({ userId: programmeShares.userId });
  return gone.length > 0;
}
