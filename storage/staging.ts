import { ConflictError, InvalidInputError, NotFoundError } from "@/lib/errors";
import { verifyBlob } from "@/storage/blob";
import {
  type BlobKey,
  blobKey,
  partKey,
  prefixOf,
  type StagingKey,
  workspaceOfStaging,
} from "@/storage/keys";
import { type ByteSource, type CreateOutcome, type ObjectStore, PART_BYTES } from "@/storage/port";

/** A file that arrived: under its final key, read back and compared. The caller writes the row next. */
export interface PromotedBlob {
  key: BlobKey;
  workspaceId: string;
  sha256: string;
  sizeBytes: number;
  outcome: CreateOutcome;
}

/** Size of the part at an offset: PART_BYTES, or what is left. */
function partSizeAt(offsetBytes: number, totalBytes: number): number {
  return Math.min(PART_BYTES, totalBytes - offsetBytes);
}

async function hasPart(store: ObjectStore, staging: StagingKey, offsetBytes: number, sizeBytes: number) {
  try {
    return (await store.stat(partKey(staging, offsetBytes))).sizeBytes === sizeBytes;
  } catch (error) {
    if (error instanceof NotFoundError) return false;
    throw error;
  }
}

/**
 * How many bytes of an upload are safely in, from its first byte on. The next part starts there.
 * @returns 0 for an upload that has no part yet or was discarded
 */
export async function stagedBytes(store: ObjectStore, staging: StagingKey): Promise<number> {
  let offsetBytes = 0;
  let after: string | undefined;
  do {
    const page = await store.list(prefixOf(staging), { after });
    for (const part of page.objects) {
      if (part.key !== partKey(staging, offsetBytes)) return offsetBytes;
      offsetBytes += part.sizeBytes;
    }
    after = page.next;
  } while (after !== undefined);
  return offsetBytes;
}

function moved(offsetBytes: number): ConflictError {
  return new ConflictError(
    "upload_offset_moved",
    `The upload goes on at byte ${offsetBytes}, not where this part starts. Send the part from there.`,
    { offsetBytes },
  );
}

/**
 * Adds one part of an upload. A part is whole and durable or not there; parts before it must be there.
 * @param part `offsetBytes` a multiple of PART_BYTES; `sizeBytes` PART_BYTES, or what is left of `totalBytes`;
 *   `sha256` of this part where the sender states one
 * @returns where the next part starts; equal to `totalBytes` when all are in
 * @throws ConflictError `upload_offset_moved` with details.offsetBytes (part is there already, or one before is missing);
 *   InvalidInputError `bad_part`; else as ObjectStore.create
 */
export async function appendPart(
  store: ObjectStore,
  staging: StagingKey,
  part: { totalBytes: number; offsetBytes: number; sizeBytes: number; sha256?: string },
  source: ByteSource,
  signal?: AbortSignal,
): Promise<{ nextOffsetBytes: number }> {
  const { totalBytes, offsetBytes, sizeBytes, sha256 } = part;
  const whole = [totalBytes, offsetBytes].every(Number.isSafeInteger) && offsetBytes >= 0;
  const onGrid = offsetBytes % PART_BYTES === 0 && offsetBytes < totalBytes;
  if (!whole || !onGrid || sizeBytes !== partSizeAt(offsetBytes, totalBytes)) {
    throw new InvalidInputError(
      "bad_part",
      `A file is sent in parts of ${PART_BYTES} bytes, only the last is shorter. Ask where the upload stands and go on from there.`,
    );
  }
  if (offsetBytes > 0 && !(await hasPart(store, staging, offsetBytes - PART_BYTES, PART_BYTES))) {
    throw moved(await stagedBytes(store, staging));
  }
  const nextOffsetBytes = offsetBytes + sizeBytes;
  const outcome = await store.create(partKey(staging, offsetBytes), source, { sizeBytes, sha256 }, signal);
  if (outcome === "existed") throw moved(Math.max(nextOffsetBytes, await stagedBytes(store, staging)));
  return { nextOffsetBytes };
}

/** The parts of an upload as one stream, read from the store. */
async function* stagedSource(
  store: ObjectStore,
  staging: StagingKey,
  totalBytes: number,
  signal: AbortSignal | undefined,
): AsyncGenerator<Uint8Array> {
  for (let offsetBytes = 0; offsetBytes < totalBytes; offsetBytes += PART_BYTES) {
    const { body } = await store.get(partKey(staging, offsetBytes), { signal });
    yield* body;
  }
}

/**
 * Moves a complete upload under its final key: reads the parts back, compares size and SHA-256 with the declaration,
 * creates the blob once, reads it back and compares again. The parts stay; discard them after the row is committed.
 * The blob is a copy, never a second name of a part: nobody who still writes a part can reach it.
 * @throws InvalidInputError `digest_mismatch`; ConflictError `upload_incomplete` with details.offsetBytes;
 *   UnavailableError `stored_bytes_damaged`; else as ObjectStore.create
 */
export async function promoteStaged(
  store: ObjectStore,
  staging: StagingKey,
  declared: { sizeBytes: number; sha256: string },
  signal?: AbortSignal,
): Promise<PromotedBlob> {
  const { sizeBytes, sha256 } = declared;
  const workspaceId = workspaceOfStaging(staging);
  const key = blobKey(workspaceId, sha256);
  const source = stagedSource(store, staging, sizeBytes, signal);
  const outcome = await store.create(key, source, declared, signal).catch(async (error) => {
    if (!(error instanceof NotFoundError)) throw error;
    throw new ConflictError(
      "upload_incomplete",
      "Parts of this upload are missing. Ask where it stands and send the rest.",
      { offsetBytes: await stagedBytes(store, staging) },
    );
  });
  await verifyBlob(store, key, { sizeBytes, outcome, signal });
  return { key, workspaceId, sha256, sizeBytes, outcome };
}

/** Deletes the parts of an upload. Safe to repeat; what it misses is swept after a day. */
export async function discardStaged(store: ObjectStore, staging: StagingKey): Promise<void> {
  for (;;) {
    const { objects, next } = await store.list(prefixOf(staging));
    for (const { key } of objects) await store.remove(key);
    if (next === undefined) return;
  }
}
