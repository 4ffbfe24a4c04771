import { isShared } from "@/db/queries/programmes";
import { type RevisionRow, selectRevision } from "@/db/queries/revisions";
import { NotFoundError } from "@/lib/errors";
import { RELEASED_STATES } from "@/lib/policy/released";
import type { Action } from "@/lib/policy/rules";
import { authorise, type Ctx } from "@/lib/services/ctx";
import { noRevision } from "@/lib/services/revisions/load";

/**
 * Two revisions of one programme that the asker may see the difference of: both ids are checked, not only the first.
 * @param against null: nothing to compare with
 * @throws NotFoundError for another workspace's or another programme's; ForbiddenError, for a reader also unless the programme is
 *   shared and both are released
 */
export async function loadPair(
  ctx: Ctx,
  { revision, againstId }: { revision: RevisionRow; againstId: string | null },
  action: Action,
): Promise<{ before: RevisionRow | null }> {
  const { db, workspaceId, userId } = ctx;
  const before = againstId === null ? null : await selectRevision(db, { workspaceId, revisionId: againstId });
  if (againstId !== null && before?.programmeId !== revision.programmeId) throw noRevision();
  const released = [revision, before].every((row) => row === null || RELEASED_STATES.has(row.state));
  const { programmeId } = revision;
  const granted = released && (await isShared(db, { workspaceId, programmeId, userId }));
  authorise(ctx, action, { granted });
  return { before };
}

/** As loadPair, from the ids of two revisions, which must be two. @throws as loadPair */
export async function loadSides(
  ctx: Ctx,
  { revisionId, againstId }: { revisionId: string; againstId: string },
  action: Action,
): Promise<{ a: RevisionRow; b: RevisionRow }> {
  const { db, workspaceId } = ctx;
  const revision = await selectRevision(db, { workspaceId, revisionId });
  if (!revision) throw noRevision();
  const { before } = await loadPair(ctx, { revision, againstId }, action);
  if (!before || before.id === revision.id)
    throw new NotFoundError(
      "no_pair",
      "A revision does not differ from itself. Choose another to compare with.",
    );
  return { a: before, b: revision };
}
