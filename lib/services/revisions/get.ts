import { selectUser } from "@/db/queries/people";
import { isShared } from "@/db/queries/programmes";
import {
  selectDecisionsOfRevision,
  selectRevision,
  selectRunsOfRevision,
  selectStanding,
} from "@/db/queries/revisions";
import type { ImageDifference } from "@/lib/calibration/image/image-summary";
import { FileRefusedError } from "@/lib/errors";
import { isReaderOnly, RELEASED_STATES, RELEASING_KINDS } from "@/lib/policy/released";
import { authorise, type Ctx } from "@/lib/services/ctx";
import { loadProgramme } from "@/lib/services/programmes/load";
import { missingForDecision } from "@/lib/services/revisions/ask-for-decision";
import { noRevision } from "@/lib/services/revisions/load";
import { differenceOf, openCalibrationImage } from "@/lib/services/revisions/read-image";
import { missingForValidating } from "@/lib/services/revisions/start-validating";

/** Everything the revision page shows. @throws NotFoundError for another workspace's, ForbiddenError for an unshared reader */
export async function getRevision(ctx: Ctx, revisionId: string) {
  const { workspaceId, db } = ctx;
  const revision = await selectRevision(db, { workspaceId, revisionId });
  if (!revision) throw noRevision();
  const { programme, granted } = await loadProgramme(ctx, revision.programmeId);
  authorise(ctx, "revision.view", { granted: granted && RELEASED_STATES.has(revision.state) });
  const [author, parent, standing, runs, decisions] = await Promise.all([
    selectUser(db, { userId: revision.authorId }),
    revision.parentId ? selectRevision(db, { workspaceId, revisionId: revision.parentId }) : null,
    selectStanding(db, { workspaceId, programmeId: revision.programmeId }),
    selectRunsOfRevision(db, { workspaceId, revisionId }),
    selectDecisionsOfRevision(db, { workspaceId, revisionId }),
  ]);
  const readerOnly = isReaderOnly(ctx);
  const shownParent = readerOnly && parent && !RELEASED_STATES.has(parent.state) ? null : parent;
  return {
    revision,
    authorName: author?.name ?? "somebody",
    programme,
    /** Null without a parent, and for a reader where the parent was never released. */
    parent: shownParent && { id: shownParent.id, number: shownParent.number, title: shownParent.title },
    standing,
    runs,
    decisions: readerOnly ? decisions.filter(({ kind }) => RELEASING_KINDS.has(kind)) : decisions,
    missing: {
      validating: missingForValidating(revision),
      decision: revision.state === "validating" ? await missingForDecision(db, revision) : [],
    },
  };
}

/**
 * What differs between a revision's image and its parent's; null without a parent. A damaged file is told in a sentence.
 * @throws NotFoundError; ForbiddenError for a reader unless the programme is shared and both revisions are released
 */
export async function getImageDifference(
  ctx: Ctx,
  revisionId: string,
): Promise<{ difference: ImageDifference } | { failure: string } | null> {
  const { workspaceId, db, userId } = ctx;
  const revision = await selectRevision(db, { workspaceId, revisionId });
  if (!revision) throw noRevision();
  const { parentId, programmeId } = revision;
  const parent = parentId ? await selectRevision(db, { workspaceId, revisionId: parentId }) : null;
  const released = [revision, parent].every((row) => row === null || RELEASED_STATES.has(row.state));
  const granted = released && (await isShared(db, { workspaceId, programmeId, userId }));
  authorise(ctx, "revision.compare_images", { granted });
  if (!parent) return null;
  try {
    const [before, after] = [
      await openCalibrationImage(ctx, parent),
      await openCalibrationImage(ctx, revision),
    ];
    return { difference: differenceOf(before, after) };
  } catch (error) {
    if (error instanceof FileRefusedError) return { failure: error.message };
    throw error;
  }
}
