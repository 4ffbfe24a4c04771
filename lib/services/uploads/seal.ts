import { createHash } from "node:crypto";
import type { Transaction } from "@/db/client";
import { insertBlob, setUploadState, type UploadRow } from "@/db/queries/uploads";
import { ConflictError, InvalidInputError, NotFoundError } from "@/lib/errors";
import { logger } from "@/lib/logger";
import type { Ctx } from "@/lib/services/ctx";
import { loadUpload } from "@/lib/services/uploads/load";
import { blobKey, parseStagingKey, prefixOf } from "@/storage/keys";
import type { ByteSource } from "@/storage/port";

/** Bytes that are kept under their fingerprint and wait for a row that uses them. */
export interface SealedUpload {
  uploadId: string;
  sha256: string;
  sizeBytes: number;
  fileName: string;
}

/** The bytes of an upload in order, from its parts in the store. */
export async function* readStaged(ctx: Pick<Ctx, "store">, row: Pick<UploadRow, "stagingKey">): ByteSource {
  const prefix = prefixOf(parseStagingKey(row.stagingKey));
  let after: string | undefined;
  do {
    const page = await ctx.store.list(prefix, { after });
    for (const { key } of page.objects) {
      const { body } = await ctx.store.get(key);
      yield* body as AsyncIterable<Uint8Array>;
    }
    after = page.next;
  } while (after !== undefined);
}

async function hashStaged(ctx: Ctx, row: UploadRow): Promise<string> {
  const hash = createHash("sha256");
  for await (const chunk of readStaged(ctx, row)) hash.update(chunk);
  return hash.digest("hex");
}

async function isKept(ctx: Ctx, row: UploadRow): Promise<boolean> {
  try {
    const { sizeBytes } = await ctx.store.stat(blobKey(ctx.workspaceId, row.declaredSha256));
    return sizeBytes === row.declaredBytes;
  } catch (error) {
    if (error instanceof NotFoundError) return false;
    throw error;
  }
}

/**
 * Puts a complete upload under its final key, before any row names it: a crash leaves an object without a row, never the
 * other way round. May be repeated.
 * @throws NotFoundError; ConflictError `upload_incomplete`; InvalidInputError `digest_mismatch` when the bytes are not the declared ones
 */
export async function sealUpload(
  ctx: Ctx,
  { uploadId, purpose }: { uploadId: string; purpose: UploadRow["purpose"] },
): Promise<SealedUpload> {
  const row = await loadUpload(ctx, uploadId);
  const sealed = {
    uploadId,
    sha256: row.declaredSha256,
    sizeBytes: row.declaredBytes,
    fileName: row.fileName,
  };
  if (row.purpose !== purpose)
    throw new InvalidInputError(
      "wrong_purpose",
      `${row.fileName} was not sent as ${purpose}. Choose it again.`,
    );
  if (row.state === "used" || row.state === "complete") return sealed;
  if (row.state === "cancelled")
    throw new ConflictError("upload_closed", "This upload was cancelled. Choose the file again.");
  if (row.receivedBytes !== row.declaredBytes) {
    throw new ConflictError(
      "upload_incomplete",
      `${row.fileName}: ${row.receivedBytes} of ${row.declaredBytes} bytes have arrived. Go on sending.`,
    );
  }
  if (await isKept(ctx, row)) {
    // The object is there already: the sender must still have the bytes.
    if ((await hashStaged(ctx, row)) !== row.declaredSha256) {
      throw new InvalidInputError(
        "digest_mismatch",
        `${row.fileName}: the bytes that arrived are not the declared ones. Send it again.`,
      );
    }
  } else {
    const key = blobKey(ctx.workspaceId, row.declaredSha256);
    await ctx.store.create(key, readStaged(ctx, row), {
      sizeBytes: row.declaredBytes,
      sha256: row.declaredSha256,
    });
  }
  await setUploadState(ctx.db, { uploadId, state: "complete" });
  return sealed;
}

/** The row that says the bytes are kept, and the upload's end, in the caller's transaction. */
export async function useSealedUpload(tx: Transaction, ctx: Ctx, sealed: SealedUpload): Promise<void> {
  await insertBlob(tx, { workspaceId: ctx.workspaceId, sha256: sealed.sha256, sizeBytes: sealed.sizeBytes });
  await setUploadState(tx, { uploadId: sealed.uploadId, state: "used" });
}

/** Clears the parts of a used or cancelled upload; what fails here the hourly sweep clears. */
export async function clearStaging(ctx: Ctx, uploadId: string): Promise<void> {
  try {
    const row = await loadUpload(ctx, uploadId);
    const page = await ctx.store.list(prefixOf(parseStagingKey(row.stagingKey)));
    for (const { key } of page.objects) await ctx.store.remove(key);
  } catch (error) {
    logger().warn({ event: "staging.left", uploadId, err: error });
  }
}
