import { selectUser } from "@/db/queries/people";
import {
  type RevisionState,
  selectDecisionsOfRevision,
  selectRevision,
  selectRunsOfRevision,
  selectStanding,
} from "@/db/queries/revisions";
import type { ImageDifference } from "@/lib/calibration/image-summary";
import { FileRefusedError } from "@/lib/errors";
import { authorise, type Ctx } from "@/lib/services/ctx";
import { loadProgramme } from "@/lib/services/programmes/load";
import { missingForDecision } from "@/lib/services/revisions/ask-for-decision";
import { noRevision } from "@/lib/services/revisions/load";
import { differenceOf, openCalibrationImage } from "@/lib/services/revisions/read-image";
import { missingForValidating } from "@/lib/services/revisions/start-validating";

/** States in which a revision is released to readers of a shared programme. */
const RELEASED: ReadonlySet<RevisionState> = new Set(["promoted", "superseded", "rolled_back"]);

/** Everything the revision page shows. @throws NotFoundError for another workspace's, ForbiddenError for an unshared reader */
export async function getRevision(ctx: Ctx, revisionId: string) {
  const { workspaceId, db } = ctx;
  const revision = await selectRevision(db, { workspaceId, revisionId });
  if (!revision) throw noRevision();
  const { programme, granted } = await loadProgramme(ctx, revision.programmeId);
  authorise(ctx, "revision.view", { granted: granted && RELEASED.has(revision.state) });
  const [author, parent, standing, runs, decisions] = await Promise.all([
    selectUser(db, { userId: revision.authorId }),
    revision.parentId ? selectRevision(db, { workspaceId, revisionId: revision.parentId }) : null,
    selectStanding(db, { workspaceId, programmeId: revision.programmeId }),
    selectRunsOfRevision(db, { workspaceId, revisionId }),
    selectDecisionsOfRevision(db, { workspaceId, revisionId }),
  ]);
  return {
    revision,
    authorName: author?.name ?? "somebody",
    programme,
    parent: parent && { id: parent.id, number: parent.number, title: parent.title },
    standing,
    runs,
    decisions,
    missing: {
      validating: missingForValidating(revision),
      decision: revision.state === "validating" ? await missingForDecision(db, revision) : [],
    },
  };
}

/** What differs between a revision's image and its parent's; null without a parent. A damaged file is told in a sentence. */
export async function getImageDifference(
  ctx: Ctx,
  revisionId: string,
): Promise<{ difference: ImageDifference } | { failure: string } | null> {
  authorise(ctx, "revision.compare_images", { granted: true });
  const { workspaceId, db } = ctx;
  const revision = await selectRevision(db, { workspaceId, revisionId });
  if (!revision?.parentId) return null;
  const parent = await selectRevision(db, { workspaceId, revisionId: revision.parentId });
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
