import { setUploadState } from "@/db/queries/uploads";
import type { Ctx } from "@/lib/services/ctx";
import { loadUpload } from "@/lib/services/uploads/load";
import { clearStaging } from "@/lib/services/uploads/seal";

/** Gives an upload up that nothing uses yet. @throws NotFoundError, ForbiddenError */
export async function cancelUpload(ctx: Ctx, uploadId: string): Promise<void> {
  await loadUpload(ctx, uploadId);
  const { workspaceId } = ctx;
  const ended = await setUploadState(ctx.db, {
    workspaceId,
    uploadId,
    from: ["open", "complete"],
    to: "cancelled",
  });
  if (ended) await clearStaging(ctx, uploadId);
}
