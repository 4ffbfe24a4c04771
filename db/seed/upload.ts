import { createHash } from "node:crypto";
import type { Ctx } from "@/lib/services/ctx";
import { addPart } from "@/lib/services/uploads/add-part";
import { openUpload } from "@/lib/services/uploads/begin";
import { PART_BYTES } from "@/storage/port";

async function* whole(bytes: Uint8Array) {
  yield bytes;
}

/** Sends bytes the way a browser does. @returns the upload's id */
export async function uploadFile(
  ctx: Ctx,
  purpose: "image" | "log" | "description",
  fileName: string,
  bytes: Buffer,
): Promise<string> {
  const sha256 = createHash("sha256").update(bytes).digest("hex");
  const { uploadId } = await openUpload(ctx, { purpose, fileName, sizeBytes: bytes.length, sha256 });
  for (let offsetBytes = 0; offsetBytes < bytes.length; offsetBytes += PART_BYTES) {
    const part = bytes.subarray(offsetBytes, offsetBytes + PART_BYTES);
    await addPart(ctx, { uploadId, offsetBytes, sizeBytes: part.length, body: whole(part) });
  }
  return uploadId;
}
