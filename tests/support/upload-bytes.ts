import { createHash } from "node:crypto";
import type { Ctx } from "@/lib/services/ctx";
import { addPart } from "@/lib/services/uploads/add-part";
import { openUpload } from "@/lib/services/uploads/begin";
import { PART_BYTES } from "@/storage/port";

export const sha256Of = (bytes: Uint8Array): string => createHash("sha256").update(bytes).digest("hex");

async function* chunksOf(bytes: Uint8Array): AsyncGenerator<Uint8Array> {
  for (let at = 0; at < bytes.length; at += 64 * 1024) yield bytes.subarray(at, at + 64 * 1024);
}

/** Sends bytes as the browser does: declaration, then parts in order. @returns the upload's id */
export async function uploadBytes(
  ctx: Ctx,
  purpose: "image" | "log" | "description",
  fileName: string,
  bytes: Uint8Array,
  sha256 = sha256Of(bytes),
): Promise<string> {
  const { uploadId } = await openUpload(ctx, { purpose, fileName, sizeBytes: bytes.length, sha256 });
  for (let offsetBytes = 0; offsetBytes < bytes.length; offsetBytes += PART_BYTES) {
    const part = bytes.subarray(offsetBytes, offsetBytes + PART_BYTES);
    await addPart(ctx, { uploadId, offsetBytes, sizeBytes: part.length, body: chunksOf(part) });
  }
  return uploadId;
}
