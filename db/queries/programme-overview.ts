import { and, count, desc, eq, inArray, isNull, max } from "drizzle-orm";
import type { Queryable } from "@/db/client";
import { decisions, revisions, roadDays, runs, users } from "@/db/tables";

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

/** Decisions of the programmes, newest first. */
export async function selectDecisions(
  db: Queryable,
  { workspaceId, programmeIds }: { workspaceId: string; programmeIds: string[] },
) {
  if (programmeIds.length === 0) return [];
  return await db
    .select({
      id: decisions.id,
      programmeId: decisions.programmeId,
      revisionId: decisions.revisionId,
      kind: decisions.kind,
      recordNumber: decisions.recordNumber,
      deciderName: decisions.deciderName,
      reason: decisions.reason,
      decidedAt: decisions.decidedAt,
    })
    .from(decisions)
    .where(and(eq(decisions.workspaceId, workspaceId), inArray(decisions.programmeId, programmeIds)))
    .orderBy(desc(decisions.recordNumber));
}

/** The newest road days of a programme with the number of their runs. */
export async function selectNewestRoadDays(
  db: Queryable,
  { workspaceId, programmeId, limit }: { workspaceId: string; programmeId: string; limit: number },
) {
  return await db
    .select({
      id: roadDays.id,
      day: roadDays.day,
      stripName: roadDays.stripName,
      runs: count(runs.id),
    })
    .from(roadDays)
    .leftJoin(runs, and(eq(runs.roadDayId, roadDays.id), isNull(runs.setAsideAt)))
    .where(and(eq(roadDays.workspaceId, workspaceId), eq(roadDays.programmeId, programmeId)))
    .groupBy(roadDays.id)
    .orderBy(desc(roadDays.day), desc(roadDays.createdAt))
    .limit(limit);
}
