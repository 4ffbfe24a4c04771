import { createHash } from "node:crypto";
import { buffer } from "node:stream/consumers";
import {
  type BlobKey,
  blobKey,
  newStagingKey,
  type ObjectKey,
  partKey,
  prefixOf,
  type StagingKey,
} from "@/storage/keys";
import { type ObjectStore, PART_BYTES } from "@/storage/port";

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

/** Sends bytes as an upload does: whole parts, in order, under a staging key. */
export async function sendParts(store: ObjectStore, staging: StagingKey, bytes: Uint8Array): Promise<void> {
  for (let offset = 0; offset < bytes.byteLength; offset += PART_BYTES) {
    const part = bytes.subarray(offset, offset + PART_BYTES);
    await store.create(partKey(staging, offset), sourceOf(part), { sizeBytes: part.byteLength });
  }
}

/** The bytes of all parts of an upload, as the store lists them. */
async function* readParts(store: ObjectStore, staging: StagingKey): AsyncGenerator<Uint8Array> {
  for (const { key } of (await store.list(prefixOf(staging))).objects) yield* (await store.get(key)).body;
}

/** Puts the parts of an upload under their final key. */
export async function promote(store: ObjectStore, staging: StagingKey, key: BlobKey, sizeBytes: number) {
  return await store.create(key, readParts(store, staging), { sizeBytes });
}

/** Deletes the parts of an upload. */
export async function discard(store: ObjectStore, staging: StagingKey): Promise<void> {
  for (const { key } of (await store.list(prefixOf(staging))).objects) await store.remove(key);
}

/** A whole upload up to the final key. */
export async function uploadBytes(store: ObjectStore, workspaceId: string, bytes: Uint8Array) {
  const staging = newStagingKey(workspaceId);
  await sendParts(store, staging, bytes);
  const { key, sha256 } = declarationOf(workspaceId, bytes);
  const outcome = await promote(store, staging, key, bytes.byteLength);
  return { key, sha256, sizeBytes: bytes.byteLength, outcome, staging };
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
