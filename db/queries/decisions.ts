import { and, asc, desc, eq, inArray, isNotNull, isNull, lt, ne, or, sql } from "drizzle-orm";
import { alias } from "drizzle-orm/pg-core";
import type { Queryable } from "@/db/client";
import { decisions, memberships, programmes, revisions, users, waivers, workspaces } from "@/db/tables";

export type DecisionRow = typeof decisions.$inferSelect;
export type WaiverRow = typeof waivers.$inferSelect;
export type DecidedRevision = typeof revisions.$inferSelect;
type State = DecidedRevision["state"];

/** The programme's row, held until the transaction ends; decisions of one programme follow one another. */
export async function lockProgramme(
  tx: Queryable,
  { workspaceId, programmeId }: { workspaceId: string; programmeId: string },
) {
  const [row] = await tx
    .select({
      id: programmes.id,
      name: programmes.name,
      standingRevisionId: programmes.standingRevisionId,
      archivedAt: programmes.archivedAt,
    })
    .from(programmes)
    .where(and(eq(programmes.workspaceId, workspaceId), eq(programmes.id, programmeId)))
    .for("no key update");
  return row ?? null;
}

/** Revisions of a programme, held until the transaction ends, always locked in the same order. */
export async function lockRevisions(
  tx: Queryable,
  args: { workspaceId: string; programmeId: string; revisionIds: readonly string[] },
): Promise<DecidedRevision[]> {
  return await tx
    .select()
    .from(revisions)
    .where(
      and(
        eq(revisions.workspaceId, args.workspaceId),
        eq(revisions.programmeId, args.programmeId),
        inArray(revisions.id, [...args.revisionIds]),
      ),
    )
    .orderBy(asc(revisions.id))
    .for("no key update");
}

/** Holds the row that hands out run and record numbers; whoever takes one comes before the head of the ledger. */
export async function lockNumbers(tx: Queryable, { workspaceId }: { workspaceId: string }): Promise<void> {
  await tx
    .select({ id: workspaces.id })
    .from(workspaces)
    .where(eq(workspaces.id, workspaceId))
    .for("no key update");
}

/** Takes the workspace's next record number; its row stays locked, so that records follow one another. */
export async function takeRecordNumber(
  tx: Queryable,
  { workspaceId }: { workspaceId: string },
): Promise<number> {
  const [row] = await tx
    .update(workspaces)
    .set({ nextRecordNumber: sql`${workspaces.nextRecordNumber} + 1` })
    .where(eq(workspaces.id, workspaceId))
    .returning({ next: workspaces.nextRecordNumber });
  return row.next - 1;
}

/** Digest of the newest record before a number; null before the first. */
export async function selectPreviousRecordSha256(
  db: Queryable,
  { workspaceId, recordNumber }: { workspaceId: string; recordNumber: number },
): Promise<string | null> {
  const [row] = await db
    .select({ sha256: decisions.recordSha256 })
    .from(decisions)
    .where(and(eq(decisions.workspaceId, workspaceId), lt(decisions.recordNumber, recordNumber)))
    .orderBy(desc(decisions.recordNumber))
    .limit(1);
  return row?.sha256 ?? null;
}

export async function insertDecision(
  tx: Queryable,
  values: Omit<typeof decisions.$inferInsert, "id">,
): Promise<DecisionRow> {
  const [row] = await tx.insert(decisions).values(values).returning();
  return row;
}

export async function insertWaivers(
  tx: Queryable,
  rows: readonly (typeof waivers.$inferInsert)[],
): Promise<void> {
  if (rows.length > 0) await tx.insert(waivers).values([...rows]);
}

/** Changes a revision only where version and state are still what was read. @returns whether it was */
export async function moveRevision(
  tx: Queryable,
  args: {
    workspaceId: string;
    revisionId: string;
    rowVersion: number;
    from: State;
    set: Partial<
      Pick<
        typeof revisions.$inferInsert,
        "state" | "stoodFrom" | "stoodUntil" | "submitterId" | "submittedAt" | "gatePlanVersion"
      >
    >;
  },
): Promise<boolean> {
  const moved = await tx
    .update(revisions)
    .set({ ...args.set, rowVersion: sql`${revisions.rowVersion} + 1` })
    .where(
      and(
        eq(revisions.workspaceId, args.workspaceId),
        eq(revisions.id, args.revisionId),
        eq(revisions.rowVersion, args.rowVersion),
        eq(revisions.state, args.from),
      ),
    )
    .returning({ id: revisions.id });
  return moved.length === 1;
}

/** Says which revision stands, if it is still the one that was read. @returns whether it was */
export async function setStandingRevision(
  tx: Queryable,
  args: { workspaceId: string; programmeId: string; from: string | null; to: string },
): Promise<boolean> {
  const moved = await tx
    .update(programmes)
    .set({ standingRevisionId: args.to, rowVersion: sql`${programmes.rowVersion} + 1` })
    .where(
      and(
        eq(programmes.workspaceId, args.workspaceId),
        eq(programmes.id, args.programmeId),
        args.from === null
          ? isNull(programmes.standingRevisionId)
          : eq(programmes.standingRevisionId, args.from),
      ),
    )
    .returning({ id: programmes.id });
  return moved.length === 1;
}

/** Whom a decision is told: its revision's author and submitter and every lead, as far as they are active members. */
export async function selectPeopleToTell(
  db: Queryable,
  args: { workspaceId: string; authorId: string; submitterId: string | null },
) {
  const concerned = [args.authorId, ...(args.submitterId ? [args.submitterId] : [])];
  return await db
    .select({ id: users.id, name: users.name, email: users.email })
    .from(memberships)
    .innerJoin(users, eq(users.id, memberships.userId))
    .where(
      and(
        eq(memberships.workspaceId, args.workspaceId),
        isNull(memberships.disabledAt),
        or(sql`'lead' = any(${memberships.roles})`, inArray(memberships.userId, concerned)),
      ),
    )
    .orderBy(asc(users.id));
}

/** The newest decision on a revision, to say who was first. */
export async function selectNewestDecisionOn(
  db: Queryable,
  { workspaceId, revisionId }: { workspaceId: string; revisionId: string },
) {
  const [row] = await db
    .select({
      id: decisions.id,
      kind: decisions.kind,
      recordNumber: decisions.recordNumber,
      deciderName: decisions.deciderName,
      decidedAt: decisions.decidedAt,
    })
    .from(decisions)
    .where(and(eq(decisions.workspaceId, workspaceId), eq(decisions.revisionId, revisionId)))
    .orderBy(desc(decisions.recordNumber))
    .limit(1);
  return row ?? null;
}

export async function selectDecision(
  db: Queryable,
  { workspaceId, decisionId }: { workspaceId: string; decisionId: string },
): Promise<DecisionRow | null> {
  const [row] = await db
    .select()
    .from(decisions)
    .where(and(eq(decisions.workspaceId, workspaceId), eq(decisions.id, decisionId)));
  return row ?? null;
}

export async function selectWaivers(
  db: Queryable,
  { workspaceId, decisionId }: { workspaceId: string; decisionId: string },
) {
  return await db
    .select({
      gateId: waivers.gateId,
      gateState: waivers.gateState,
      reason: waivers.reason,
      waivedBy: waivers.waivedBy,
    })
    .from(waivers)
    .where(and(eq(waivers.workspaceId, workspaceId), eq(waivers.decisionId, decisionId)))
    .orderBy(asc(waivers.gateId));
}

/** Decisions of a programme, newest first, with the numbers of the revisions. */
export async function selectDecisionsOfProgramme(
  db: Queryable,
  { workspaceId, programmeId }: { workspaceId: string; programmeId: string },
) {
  const from = alias(revisions, "from_revision");
  return await db
    .select({
      id: decisions.id,
      kind: decisions.kind,
      recordNumber: decisions.recordNumber,
      reason: decisions.reason,
      deciderName: decisions.deciderName,
      decidedAt: decisions.decidedAt,
      revisionId: decisions.revisionId,
      revisionNumber: revisions.number,
      fromNumber: from.number,
    })
    .from(decisions)
    .innerJoin(revisions, eq(revisions.id, decisions.revisionId))
    .leftJoin(from, eq(from.id, decisions.fromRevisionId))
    .where(and(eq(decisions.workspaceId, workspaceId), eq(decisions.programmeId, programmeId)))
    .orderBy(desc(decisions.recordNumber));
}

/** Revisions of a programme that stood once and do not now, the last to have stood first; barred ones are told apart. */
export async function selectEarlierStanding(
  db: Queryable,
  args: { workspaceId: string; programmeId: string; standingRevisionId: string | null },
) {
  return await db
    .select({
      id: revisions.id,
      number: revisions.number,
      title: revisions.title,
      state: revisions.state,
      asFound: revisions.asFound,
      stoodFrom: revisions.stoodFrom,
      stoodUntil: revisions.stoodUntil,
      barredAt: revisions.barredAt,
      barredReason: revisions.barredReason,
      rowVersion: revisions.rowVersion,
      imageSha256: revisions.imageSha256,
      imageFileName: revisions.imageFileName,
      imageBaseAddress: revisions.imageBaseAddress,
      authorName: users.name,
    })
    .from(revisions)
    .innerJoin(users, eq(users.id, revisions.authorId))
    .where(
      and(
        eq(revisions.workspaceId, args.workspaceId),
        eq(revisions.programmeId, args.programmeId),
        isNotNull(revisions.stoodFrom),
        inArray(revisions.state, ["superseded", "rolled_back"]),
        args.standingRevisionId ? ne(revisions.id, args.standingRevisionId) : undefined,
      ),
    )
    .orderBy(desc(revisions.stoodUntil), desc(revisions.number));
}
