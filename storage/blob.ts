import { createHash } from "node:crypto";
import { Readable } from "node:stream";
import { UnavailableError } from "@/lib/errors";
import { type BlobKey, blobKey, checkedKey } from "@/storage/keys";
import { type ByteSource, type CreateOutcome, type ObjectStore, PART_BYTES } from "@/storage/port";

function damaged(key: BlobKey): UnavailableError {
  return new UnavailableError(
    "stored_bytes_damaged",
    "The stored file is not what it was: its fingerprint differs. It is not given out; restore it from a backup.",
    { key },
  );
}

function digestOf(key: BlobKey): string {
  const parsed = checkedKey(key);
  return parsed.kind === "blob" ? parsed.sha256 : "";
}

/** Reads a blob to its end. @returns its size and SHA-256 as stored now @throws NotFoundError, UnavailableError */
export async function hashBlob(
  store: ObjectStore,
  key: BlobKey,
  signal?: AbortSignal,
): Promise<{ sizeBytes: number; sha256: string }> {
  const { body, sizeBytes } = await store.get(key, { signal });
  const hash = createHash("sha256");
  for await (const chunk of body) hash.update(chunk);
  return { sizeBytes, sha256: hash.digest("hex") };
}

/**
 * Reads a blob back and compares it with its key before anybody is told that it is stored.
 * @param options.outcome `created`: a wrong blob is ours alone - no row can cite it yet - and is removed,
 *   so that the next try can put it right. `existed`: it is left for people to look at.
 * @throws UnavailableError `stored_bytes_damaged`
 */
export async function verifyBlob(
  store: ObjectStore,
  key: BlobKey,
  options: { sizeBytes: number; outcome: CreateOutcome; signal?: AbortSignal },
): Promise<void> {
  const stored = await hashBlob(store, key, options.signal);
  if (stored.sizeBytes === options.sizeBytes && stored.sha256 === digestOf(key)) return;
  if (options.outcome === "created") await store.remove(key);
  throw damaged(key);
}

/**
 * Stores bytes that the server has in memory (a demo file, a made document) under their own digest, read back as above.
 * @throws as ObjectStore.create; UnavailableError `stored_bytes_damaged`
 */
export async function putBlob(
  store: ObjectStore,
  workspaceId: string,
  bytes: Uint8Array,
): Promise<{ key: BlobKey; sha256: string; sizeBytes: number; outcome: CreateOutcome }> {
  const sha256 = createHash("sha256").update(bytes).digest("hex");
  const key = blobKey(workspaceId, sha256);
  const sizeBytes = bytes.byteLength;
  async function* source() {
    yield bytes;
  }
  const outcome = await store.create(key, source(), { sizeBytes });
  await verifyBlob(store, key, { sizeBytes, outcome });
  return { key, sha256, sizeBytes, outcome };
}

/** Holds the newest chunk back until the digest of all is known, so a damaged file never arrives complete. */
async function* heldBack(key: BlobKey, source: ByteSource): AsyncGenerator<Uint8Array> {
  const hash = createHash("sha256");
  let held: Uint8Array | undefined;
  for await (const chunk of source) {
    hash.update(chunk);
    if (held !== undefined) yield held;
    held = chunk;
  }
  if (hash.digest("hex") !== digestOf(key)) throw damaged(key);
  if (held !== undefined) yield held;
}

/**
 * Opens a blob for giving out, checked against its fingerprint. Up to PART_BYTES it is checked before this returns;
 * a longer one ends with an error before its last bytes, so send it with its Content-Length.
 * @throws NotFoundError; UnavailableError `stored_bytes_damaged`, here or from the stream
 */
export async function readVerified(
  store: ObjectStore,
  key: BlobKey,
  signal?: AbortSignal,
): Promise<{ body: Readable; sizeBytes: number }> {
  const { body, sizeBytes } = await store.get(key, { signal });
  const checked = heldBack(key, body);
  if (sizeBytes > PART_BYTES) return { body: Readable.from(checked, { objectMode: false }), sizeBytes };
  const chunks: Uint8Array[] = [];
  for await (const chunk of checked) chunks.push(chunk);
  return { body: Readable.from(chunks, { objectMode: false }), sizeBytes };
}
