import { insertUpload, selectUsesOfBlob } from "@/db/queries/uploads";
import { authorise, type Ctx } from "@/lib/services/ctx";
import { describeUpload } from "@/lib/services/uploads/load";
import { type BeginUpload, beginUpload, type UploadState } from "@/lib/services/uploads/schema";
import { newStagingKey } from "@/storage/keys";

/**
 * Opens an upload for declared bytes; the server picks the place. Nothing is kept yet.
 * @returns the upload with where the same bytes are in use already, in words
 * @throws ForbiddenError; ZodError for an empty, oversized or unnamed file
 */
export async function openUpload(ctx: Ctx, input: BeginUpload): Promise<UploadState> {
  const { purpose, fileName, sizeBytes, sha256 } = beginUpload.parse(input);
  authorise(ctx, purpose === "image" ? "revision.upload" : "run.attach");
  const { workspaceId, userId } = ctx;
  const row = await insertUpload(ctx.db, {
    workspaceId,
    userId,
    purpose,
    fileName,
    declaredBytes: sizeBytes,
    declaredSha256: sha256,
    stagingKey: newStagingKey(workspaceId),
  });
  const { usedAsLog, usedAsImage } = await selectUsesOfBlob(ctx.db, { workspaceId, sha256 });
  const alreadyUsed = [
    ...usedAsLog.map(
      (run) => `Already attached as run ${run.number} of ${run.programme} (same fingerprint).`,
    ),
    ...usedAsImage.map((revision) => `Same bytes as R${revision.number} of ${revision.programme}.`),
  ];
  return describeUpload(row, alreadyUsed);
}
