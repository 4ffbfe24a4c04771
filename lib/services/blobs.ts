import { createHash } from "node:crypto";
import type { Queryable } from "@/db/client";
import { lockDigest } from "@/db/queries/sweep";
import { insertBlob } from "@/db/queries/uploads";
import { NotFoundError, UnavailableError } from "@/lib/errors";
import { logger } from "@/lib/logger";
import type { Ctx } from "@/lib/services/ctx";
import { blobKey } from "@/storage/keys";
import type { StoredBytes } from "@/storage/port";

type Where = Pick<Ctx, "store" | "workspaceId">;

function refuse(where: Where, sha256: string): never {
  logger().error({ event: "integrity.failed", workspaceId: where.workspaceId, sha256 });
  throw new UnavailableError(
    "integrity_failed",
    "The stored file no longer has the fingerprint it was kept under, so it is not given out. Tell whoever runs this installation.",
    { sha256 },
  );
}

/** Stored bytes that are gone or damaged, as opposed to a store that does not answer. */
export function isLost(error: unknown): boolean {
  return (
    error instanceof NotFoundError || (error instanceof UnavailableError && error.code === "integrity_failed")
  );
}

/**
 * A stored file piece by piece; its fingerprint is checked after the last piece, so nothing read on the way counts before.
 * @throws NotFoundError when the store does not hold it; UnavailableError `integrity_failed` when its bytes have changed
 */
export async function* streamBlob(where: Where, sha256: string): AsyncGenerator<Uint8Array, void> {
  const { body } = await where.store.get(blobKey(where.workspaceId, sha256));
  const hash = createHash("sha256");
  for await (const chunk of body as AsyncIterable<Uint8Array>) {
    hash.update(chunk);
    yield chunk;
  }
  if (hash.digest("hex") !== sha256) refuse(where, sha256);
}

/** Reads a whole stored file and checks its fingerprint. @throws as streamBlob */
export async function readBlob(where: Where, sha256: string): Promise<Uint8Array> {
  const chunks: Uint8Array[] = [];
  for await (const chunk of streamBlob(where, sha256)) chunks.push(chunk);
  return Buffer.concat(chunks);
}

/**
 * Opens a stored file for a download after having read it once to check its fingerprint; memory stays flat.
 * @throws as streamBlob
 */
export async function openBlob(where: Where, sha256: string): Promise<StoredBytes> {
  for await (const _ of streamBlob(where, sha256));
  return await where.store.get(blobKey(where.workspaceId, sha256));
}

/**
 * Puts bytes that the product made under their fingerprint, before any row names them. May be repeated.
 * @throws OutOfSpaceError; UnavailableError
 */
export async function storeBlob(
  where: Where,
  bytes: Uint8Array,
): Promise<{ sha256: string; sizeBytes: number }> {
  const sha256 = createHash("sha256").update(bytes).digest("hex");
  const declared = { sizeBytes: bytes.length, sha256 };
  await where.store.create(blobKey(where.workspaceId, sha256), piece(bytes), declared);
  return { sha256, sizeBytes: bytes.length };
}

async function* piece(bytes: Uint8Array): AsyncGenerator<Uint8Array> {
  yield bytes;
}

/**
 * The row that says that stored bytes are kept, in the caller's transaction. The digest is locked against the sweep and the object
 * looked at once more, so that the row never names bytes that were just cleared.
 * @throws NotFoundError when the bytes are gone
 */
export async function keepBlob(
  tx: Queryable,
  where: Where,
  { sha256, sizeBytes }: { sha256: string; sizeBytes: number },
): Promise<void> {
  const { workspaceId } = where;
  await lockDigest(tx, { workspaceId, sha256 });
  await where.store.stat(blobKey(workspaceId, sha256));
  await insertBlob(tx, { workspaceId, sha256, sizeBytes });
}
