import { createHash } from "node:crypto";
import { buffer } from "node:stream/consumers";
import type { ObjectKey, StagingKey } from "@/storage/keys";
import { blobKey, newStagingKey, prefixOf } from "@/storage/keys";
import { type ObjectStore, PART_BYTES } from "@/storage/port";
import { appendPart, type PromotedBlob, promoteStaged } from "@/storage/staging";

export const MIB = 1024 * 1024;

export function sha256Of(bytes: Uint8Array): string {
  return createHash("sha256").update(bytes).digest("hex");
}

/** Bytes as a body that arrives in chunks. */
export async function* sourceOf(bytes: Uint8Array, chunkBytes = 64 * 1024): AsyncGenerator<Uint8Array> {
  for (let at = 0; at < bytes.byteLength; at += chunkBytes) yield bytes.subarray(at, at + chunkBytes);
}

/** The blob key and the declaration of some bytes. */
export function declarationOf(workspaceId: string, bytes: Uint8Array) {
  const sha256 = sha256Of(bytes);
  return { key: blobKey(workspaceId, sha256), sha256, declared: { sizeBytes: bytes.byteLength, sha256 } };
}

export async function readAll(store: ObjectStore, key: ObjectKey): Promise<Buffer> {
  return await buffer((await store.get(key)).body);
}

/** Sends bytes the way a browser does: all parts in order. */
export async function sendParts(store: ObjectStore, staging: StagingKey, bytes: Uint8Array): Promise<void> {
  const totalBytes = bytes.byteLength;
  for (let offsetBytes = 0; offsetBytes < totalBytes; offsetBytes += PART_BYTES) {
    const part = bytes.subarray(offsetBytes, offsetBytes + PART_BYTES);
    const sizeBytes = part.byteLength;
    await appendPart(store, staging, { totalBytes, offsetBytes, sizeBytes }, sourceOf(part));
  }
}

/** A whole upload up to the final key. */
export async function uploadBytes(
  store: ObjectStore,
  workspaceId: string,
  bytes: Uint8Array,
): Promise<PromotedBlob & { staging: StagingKey }> {
  const staging = newStagingKey(workspaceId);
  await sendParts(store, staging, bytes);
  const declared = { sizeBytes: bytes.byteLength, sha256: sha256Of(bytes) };
  return { ...(await promoteStaged(store, staging, declared)), staging };
}

/** Every key of a workspace, page by page. */
export async function keysOf(store: ObjectStore, workspaceId: string, limit = 1000): Promise<string[]> {
  const keys: string[] = [];
  let after: string | undefined;
  do {
    const page = await store.list(prefixOf({ workspaceId }), { after, limit });
    keys.push(...page.objects.map(({ key }) => key));
    after = page.next;
  } while (after !== undefined);
  return keys;
}
