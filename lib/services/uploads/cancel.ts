import { setUploadState } from "@/db/queries/uploads";
import type { Ctx } from "@/lib/services/ctx";
import { loadUpload } from "@/lib/services/uploads/load";
import { clearStaging } from "@/lib/services/uploads/seal";

/** Gives an upload up that nothing uses yet. @throws NotFoundError */
export async function cancelUpload(ctx: Ctx, uploadId: string): Promise<void> {
  const row = await loadUpload(ctx, uploadId);
  if (row.state === "used") return;
  await setUploadState(ctx.db, { uploadId, state: "cancelled" });
  await clearStaging(ctx, uploadId);
}
