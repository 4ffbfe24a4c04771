import { insertUpload, lockOpenUploads, selectUsesOfBlob, sumOpenUploads } from "@/db/queries/uploads";
import { TooManyRequestsError } from "@/lib/errors";
import { authorise, type Ctx, withTransaction } from "@/lib/services/ctx";
import { limitTries } from "@/lib/services/limit-tries";
import { describeUpload } from "@/lib/services/uploads/load";
import { type BeginUpload, beginUpload, type UploadState } from "@/lib/services/uploads/schema";
import { newStagingKey } from "@/storage/keys";

/** What a workspace may have under way at once, in bytes: twenty of the largest logs. */
const OPEN_BYTES_AT_MOST = 4_000_000_000;

/**
 * Opens an upload for declared bytes; the server picks the place. Nothing is kept yet.
 * @returns the upload with where the same bytes are in use already, in words
 * @throws ForbiddenError; ZodError for an empty, oversized or unnamed file; TooManyRequestsError after 600 an hour, or when
 *   4 GB of the workspace are under way already
 */
export async function openUpload(ctx: Ctx, input: BeginUpload): Promise<UploadState> {
  const { purpose, fileName, sizeBytes, sha256 } = beginUpload.parse(input);
  authorise(ctx, purpose === "log" ? "run.attach" : "revision.upload");
  const { workspaceId, userId } = ctx;
  await limitTries(ctx.db, { doing: "begin uploads", userId });
  const row = await withTransaction(ctx, async (tx) => {
    await lockOpenUploads(tx, { workspaceId });
    if ((await sumOpenUploads(tx, { workspaceId })) + sizeBytes > OPEN_BYTES_AT_MOST)
      throw new TooManyRequestsError(
        "too_much_under_way",
        "4 GB of uploads are under way in this workspace already. Finish or cancel some of them, then try again.",
      );
    return await insertUpload(tx, {
      workspaceId,
      userId,
      purpose,
      fileName,
      declaredBytes: sizeBytes,
      declaredSha256: sha256,
      stagingKey: newStagingKey(workspaceId),
    });
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
