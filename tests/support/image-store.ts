import { createHash, randomBytes } from "node:crypto";
import { Readable } from "node:stream";
import { NotFoundError } from "@/lib/errors";
import { blobKey } from "@/storage/keys";
import type { ObjectStore } from "@/storage/port";
import { noStore } from "@/tests/support/no-store";

const kept = new Map<string, Uint8Array>();

/** Bytes that never were an image, under a fingerprint of their own. @returns the fingerprint */
export function keepAnImage(workspaceId: string): string {
  const bytes = randomBytes(4);
  const sha256 = createHash("sha256").update(bytes).digest("hex");
  kept.set(blobKey(workspaceId, sha256), bytes);
  return sha256;
}

/** Gives out what `keepAnImage` kept; any other use of it fails. */
export const imageStore: ObjectStore = new Proxy(noStore, {
  get(target, name) {
    if (name !== "get") return Reflect.get(target, name) as unknown;
    return async (key: string) => {
      const bytes = kept.get(key);
      if (!bytes) throw new NotFoundError("object_not_found", "The store does not hold it.");
      return { body: Readable.from([bytes]), sizeBytes: bytes.length, totalBytes: bytes.length };
    };
  },
});
