import { selectEarlierStanding } from "@/db/queries/decisions";
import { hasPassphrase } from "@/db/queries/people";
import { selectRevision } from "@/db/queries/revisions";
import { FileRefusedError, NotFoundError } from "@/lib/errors";
import type { Verdict } from "@/lib/policy/actor";
import { can } from "@/lib/policy/can";
import { authorise, type Ctx } from "@/lib/services/ctx";
import { loadProgramme } from "@/lib/services/programmes/load";
import { differenceOf, type ImageSource, openCalibrationImage } from "@/lib/services/revisions/read-image";

export type EarlierStanding = Awaited<ReturnType<typeof selectEarlierStanding>>[number];

/** What the roll-back page shows before anything is chosen. */
export interface RollBackDesk {
  programme: { id: string; name: string };
  standing: { id: string; number: number; title: string; stoodFrom: Date | null } | null;
  /** Revisions that stood before, the last to have stood first; barred ones are listed and can't be chosen. */
  earlier: EarlierStanding[];
  may: Verdict;
  hasPassphrase: boolean;
}

/**
 * Where one can roll back to, and whether this person may.
 * @throws NotFoundError for another workspace's programme; ForbiddenError for a reader
 */
export async function getRollBackDesk(ctx: Ctx, programmeId: string): Promise<RollBackDesk> {
  const { workspaceId, userId, db } = ctx;
  authorise(ctx, "history.view");
  const { programme } = await loadProgramme(ctx, programmeId);
  const { standingRevisionId } = programme;
  const standing = standingRevisionId
    ? await selectRevision(db, { workspaceId, revisionId: standingRevisionId })
    : null;
  return {
    programme: { id: programme.id, name: programme.name },
    standing: standing && {
      id: standing.id,
      number: standing.number,
      title: standing.title,
      stoodFrom: standing.stoodFrom,
    },
    earlier: await selectEarlierStanding(db, { workspaceId, programmeId, standingRevisionId }),
    may: can(ctx, "decision.roll_back"),
    hasPassphrase: await hasPassphrase(db, { userId }),
  };
}

/** What a roll-back would change. */
export interface RollBackPreview {
  target: EarlierStanding;
  /** Where the images differ, from what stands to what would stand; a damaged file is told in a sentence. */
  difference: ReturnType<typeof differenceOf> | { failure: string };
  sameBytes: boolean;
}

async function compareImages(
  ctx: Ctx,
  from: ImageSource,
  to: ImageSource,
): Promise<RollBackPreview["difference"]> {
  try {
    return differenceOf(await openCalibrationImage(ctx, from), await openCalibrationImage(ctx, to));
  } catch (error) {
    // A preview that can't be drawn never keeps anybody from rolling back.
    if (error instanceof FileRefusedError || error instanceof NotFoundError)
      return { failure: error.message };
    throw error;
  }
}

/**
 * What changes back when the programme is rolled back to a revision: bytes that differ, and when it stood.
 * @throws NotFoundError when it is not one of those that stood before
 */
export async function previewRollBack(
  ctx: Ctx,
  desk: RollBackDesk,
  toRevisionId: string,
): Promise<RollBackPreview> {
  const { workspaceId, db } = ctx;
  const target = desk.earlier.find((revision) => revision.id === toRevisionId);
  const standing = desk.standing
    ? await selectRevision(db, { workspaceId, revisionId: desk.standing.id })
    : null;
  if (!target || !standing)
    throw new NotFoundError("no_target", "This revision is not one that stood earlier in this programme.");
  return {
    target,
    difference: await compareImages(ctx, standing, target),
    sameBytes: standing.imageSha256 === target.imageSha256,
  };
}
