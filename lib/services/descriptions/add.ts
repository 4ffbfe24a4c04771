import { updateRevision } from "@/db/queries/revisions";
import { ConflictError } from "@/lib/errors";
import { refreshChangeSetsOf } from "@/lib/services/change-sets/refresh";
import { authorise, type Ctx } from "@/lib/services/ctx";
import {
  clearDescriptionStaging,
  keepSealedDescription,
  sealDescription,
} from "@/lib/services/descriptions/keep";
import { type AddDescription, addDescriptionSchema } from "@/lib/services/descriptions/schema";
import { once } from "@/lib/services/idempotency";
import { appendLedger } from "@/lib/services/ledger/append";
import { loadProgramme } from "@/lib/services/programmes/load";
import { refuseArchived } from "@/lib/services/programmes/refuse-archived";
import { loadRevisionForUpdate, requireState } from "@/lib/services/revisions/load";

/**
 * Gives a revision the description that its image is read by: bytes first, then description, revision, ledger entry, jobs and answer in one
 * transaction. A draft's description may be replaced by its author; later one can only be added where there is none.
 * @returns the description's id and the revision's new version
 * @throws ForbiddenError; NotFoundError; InvalidInputError; ConflictError `revision_moved`, `wrong_state`, `set_aside`
 */
export async function addDescription(
  ctx: Ctx,
  input: AddDescription,
  idempotencyKey: string,
): Promise<{ descriptionId: string; rowVersion: number }> {
  const request = addDescriptionSchema.parse(input);
  authorise(ctx, "revision.describe");
  const { revisionId, uploadIds } = request;
  const sealed = await sealDescription(ctx, uploadIds);
  const answer = await once(ctx, { key: idempotencyKey, request }, async (tx, inner) => {
    const { workspaceId } = inner;
    const revision = await loadRevisionForUpdate(tx, inner, revisionId);
    const { programmeId, number, descriptionId: earlier } = revision;
    refuseArchived((await loadProgramme(inner, programmeId)).programme);
    if (earlier !== null) {
      authorise(inner, "revision.describe", { ownerId: revision.authorId });
      requireState(revision, ["draft"], "give it another description");
    }
    if (revision.setAsideAt)
      throw new ConflictError("set_aside", `R${number} is set aside. Bring it back first.`);
    const moved = () =>
      new ConflictError(
        "revision_moved",
        `R${number} was changed meanwhile. Reload the page, then add it again.`,
      );
    if (revision.rowVersion !== request.rowVersion) throw moved();
    const description = await keepSealedDescription(tx, inner, { programmeId, sealed });
    const set = { descriptionId: description.id };
    const changed = await updateRevision(tx, {
      workspaceId,
      revisionId,
      rowVersion: request.rowVersion,
      set,
    });
    if (!changed) throw moved();
    await appendLedger(tx, inner, {
      event: "revision.described",
      subjectType: "revision",
      subjectId: revisionId,
      programmeId,
      data: { number, sha256: description.sha256, files: description.files, replaces: earlier },
    });
    await refreshChangeSetsOf(tx, inner, { revisionId });
    return { descriptionId: description.id, rowVersion: changed.rowVersion };
  });
  await clearDescriptionStaging(ctx, uploadIds);
  return answer;
}
