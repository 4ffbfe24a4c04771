import { selectUpload, type UploadRow } from "@/db/queries/uploads";
import { NotFoundError } from "@/lib/errors";
import { authorise, type Ctx } from "@/lib/services/ctx";
import type { UploadState } from "@/lib/services/uploads/schema";
import { PART_BYTES } from "@/storage/port";

/** What the browser may know of an upload. */
export function describeUpload(row: UploadRow, alreadyUsed: string[] = []): UploadState {
  return {
    uploadId: row.id,
    state: row.state,
    receivedBytes: row.receivedBytes,
    sizeBytes: row.declaredBytes,
    partBytes: PART_BYTES,
    alreadyUsed,
  };
}

/**
 * The person's own upload, asking anew whether they may send this kind of file: a role taken away stops it at once.
 * @throws NotFoundError for anybody else's; ForbiddenError
 */
export async function loadUpload(ctx: Ctx, uploadId: string): Promise<UploadRow> {
  const { workspaceId, userId } = ctx;
  const row = await selectUpload(ctx.db, { workspaceId, userId, uploadId });
  if (!row) throw new NotFoundError("no_upload", "There is no such upload. Choose the file again.");
  authorise(ctx, row.purpose === "log" ? "run.attach" : "revision.upload_part", { ownerId: row.userId });
  return row;
}

/** The upload's state, for resuming. @throws NotFoundError, ForbiddenError */
export async function getUpload(ctx: Ctx, uploadId: string): Promise<UploadState> {
  return describeUpload(await loadUpload(ctx, uploadId));
}
