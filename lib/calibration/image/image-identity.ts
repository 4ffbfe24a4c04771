import { createHash } from "node:crypto";
import type { CalibrationImage } from "@/lib/calibration/image/types";

/**
 * Identity of an image's content, the same in any container: SHA-256 in lower-case hex over, for each merged segment in
 * rising order, its address and its length (both unsigned 64-bit big endian) and its bytes.
 */
export function imageIdentity(image: Pick<CalibrationImage, "segments">): string {
  const hash = createHash("sha256");
  const head = new DataView(new ArrayBuffer(16));
  for (const { address, bytes } of image.segments) {
    head.setBigUint64(0, BigInt(address));
    head.setBigUint64(8, BigInt(bytes.length));
    hash.update(new Uint8Array(head.buffer));
    hash.update(bytes);
  }
  return hash.digest("hex");
}
