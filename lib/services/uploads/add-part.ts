import { advanceUpload } from "@/db/queries/uploads";
import { ConflictError, InvalidInputError, TooLargeError } from "@/lib/errors";
import type { Ctx } from "@/lib/services/ctx";
import { describeUpload, loadUpload } from "@/lib/services/uploads/load";
import type { UploadState } from "@/lib/services/uploads/schema";
import { parseStagingKey, partKey } from "@/storage/keys";
import { type ByteSource, PART_BYTES } from "@/storage/port";

/**
 * Takes one part at its offset; acknowledged means durable. A repeated part is no error and no second copy.
 * @param part.sizeBytes length as the request states it; the body must have exactly that
 * @throws NotFoundError; ForbiddenError; ConflictError with `receivedBytes` when the offset is not the next one; TooLargeError; OutOfSpaceError
 */
export async function addPart(
  ctx: Ctx,
  part: { uploadId: string; offsetBytes: number; sizeBytes: number; body: ByteSource; signal?: AbortSignal },
): Promise<UploadState> {
  const row = await loadUpload(ctx, part.uploadId);
  const endBytes = part.offsetBytes + part.sizeBytes;
  if (row.state !== "open")
    throw new ConflictError("upload_closed", "This upload is closed. Choose the file again.");
  if (part.sizeBytes > PART_BYTES) {
    throw new TooLargeError(
      "part_too_large",
      `A part has at most ${PART_BYTES} bytes, this one has ${part.sizeBytes}.`,
    );
  }
  if (part.sizeBytes < 1 || endBytes > row.declaredBytes) {
    throw new InvalidInputError(
      "part_outside",
      `This part does not fit: the file was declared with ${row.declaredBytes} bytes.`,
    );
  }
  const isRepeat = endBytes === row.receivedBytes;
  if (part.offsetBytes !== row.receivedBytes && !isRepeat) {
    throw new ConflictError(
      "wrong_offset",
      `The next part starts at byte ${row.receivedBytes}, not ${part.offsetBytes}.`,
      {
        receivedBytes: row.receivedBytes,
      },
    );
  }
  const key = partKey(parseStagingKey(row.stagingKey), part.offsetBytes);
  const outcome = await ctx.store.create(key, part.body, { sizeBytes: part.sizeBytes }, part.signal);
  if (outcome === "existed" && (await ctx.store.stat(key)).sizeBytes !== part.sizeBytes) {
    throw new ConflictError(
      "part_differs",
      "Another part was sent for this place before. Choose the file again.",
    );
  }
  if (!isRepeat)
    await advanceUpload(ctx.db, {
      workspaceId: ctx.workspaceId,
      uploadId: row.id,
      fromBytes: part.offsetBytes,
      toBytes: endBytes,
    });
  return describeUpload(await loadUpload(ctx, part.uploadId));
}
