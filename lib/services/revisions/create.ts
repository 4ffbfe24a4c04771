import { insertRevision, selectRevision, takeRevisionNumber } from "@/db/queries/revisions";
import { InvalidInputError, NotFoundError } from "@/lib/errors";
import { refreshChangeSetsOf } from "@/lib/services/change-sets/refresh";
import { authorise, type Ctx } from "@/lib/services/ctx";
import {
  clearDescriptionStaging,
  keepSealedDescription,
  sealDescription,
} from "@/lib/services/descriptions/keep";
import { once } from "@/lib/services/idempotency";
import { appendLedger } from "@/lib/services/ledger/append";
import { noRevision } from "@/lib/services/revisions/load";
import { openCalibrationImage, summarise } from "@/lib/services/revisions/read-image";
import { type CreateRevision, createRevision } from "@/lib/services/revisions/schema";
import { clearStaging, sealUpload, spendSealedUpload } from "@/lib/services/uploads/seal";

/**
 * Adds a draft revision from an uploaded image, with its description if it came with one: bytes first, then row, ledger entry and answer in one transaction.
 * @throws ForbiddenError; NotFoundError; FileRefusedError when the image can't be read; InvalidInputError; ConflictError
 */
export async function addRevision(
  ctx: Ctx,
  input: CreateRevision,
  idempotencyKey: string,
): Promise<{ revisionId: string; number: number }> {
  const request = createRevision.parse(input);
  authorise(ctx, "revision.create");
  const { workspaceId, userId } = ctx;
  const { uploadId, descriptionUploadIds, sameDescription, programmeId, parentId, baseAddress, ...text } =
    request;
  if (sameDescription && descriptionUploadIds.length > 0)
    throw new InvalidInputError("two_descriptions", "Take the parent's description or files, not both.");
  const sealed = await sealUpload(ctx, { uploadId, purpose: "image" });
  const sealedFiles = await sealDescription(ctx, descriptionUploadIds);
  const source = {
    imageSha256: sealed.sha256,
    imageFileName: sealed.fileName,
    imageBaseAddress: baseAddress,
  };
  const imageSummary = summarise(await openCalibrationImage(ctx, source));
  const answer = await once(ctx, { key: idempotencyKey, request }, async (tx, inner) => {
    const number = await takeRevisionNumber(tx, { workspaceId, programmeId });
    if (number === null)
      throw new NotFoundError("no_programme", "There is no such programme, or it is archived.");
    const parent = parentId === null ? null : await selectRevision(tx, { workspaceId, revisionId: parentId });
    if (parentId !== null) {
      if (!parent) throw noRevision();
      if (parent.programmeId !== programmeId) {
        throw new InvalidInputError("foreign_parent", "The parent must be a revision of the same programme.");
      }
    }
    if (sameDescription && !parent?.descriptionId)
      throw new InvalidInputError("no_description", "The parent has no description to take over.");
    await spendSealedUpload(tx, inner, sealed);
    const description =
      sealedFiles.length === 0
        ? null
        : await keepSealedDescription(tx, inner, { programmeId, sealed: sealedFiles });
    const row = await insertRevision(tx, {
      ...text,
      ...source,
      workspaceId,
      programmeId,
      number,
      parentId,
      imageBytes: sealed.sizeBytes,
      imageSummary,
      descriptionId: description?.id ?? (sameDescription ? parent?.descriptionId : null) ?? null,
      authorId: userId,
    });
    await appendLedger(tx, inner, {
      event: "revision.created",
      subjectType: "revision",
      subjectId: row.id,
      programmeId,
      data: {
        number,
        parentId,
        sha256: sealed.sha256,
        identity: imageSummary.identity,
        title: text.title,
        ...(sameDescription && { sameDescriptionAs: parentId }),
        ...(description && { description: { sha256: description.sha256, files: description.files } }),
      },
    });
    await refreshChangeSetsOf(tx, inner, { revisionId: row.id });
    return { revisionId: row.id, number };
  });
  await clearStaging(ctx, uploadId);
  await clearDescriptionStaging(ctx, descriptionUploadIds);
  return answer;
}
