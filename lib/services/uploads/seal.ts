import type { Transaction } from "@/db/client";
import { setUploadState, type UploadRow } from "@/db/queries/uploads";
import { ConflictError, InvalidInputError } from "@/lib/errors";
import { logger } from "@/lib/logger";
import { keepBlob } from "@/lib/services/blobs";
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

const wasCancelled = () =>
  new ConflictError("upload_closed", "This upload was cancelled. Choose the file again.");

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

/**
 * Puts a complete upload under its final key, before any row names it: a crash leaves an object without a row, never the
 * other way round. May be repeated.
 * @throws NotFoundError; ForbiddenError; ConflictError `upload_incomplete`, `upload_closed`; InvalidInputError `digest_mismatch` when the bytes are not the declared ones
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
  if (row.state === "cancelled") throw wasCancelled();
  if (row.receivedBytes !== row.declaredBytes) {
    throw new ConflictError(
      "upload_incomplete",
      `${row.fileName}: ${row.receivedBytes} of ${row.declaredBytes} bytes have arrived. Go on sending.`,
    );
  }
  // A copy that is there already is read and compared too, and the sender must still have the bytes.
  const key = blobKey(ctx.workspaceId, row.declaredSha256);
  const declared = { sizeBytes: row.declaredBytes, sha256: row.declaredSha256 };
  await ctx.store.create(key, readStaged(ctx, row), declared);
  const { workspaceId } = ctx;
  const moved = await setUploadState(ctx.db, { workspaceId, uploadId, from: ["open"], to: "complete" });
  if (!moved && (await loadUpload(ctx, uploadId)).state === "cancelled") throw wasCancelled();
  return sealed;
}

/**
 * The row that says the bytes are kept, and the upload's end, in the caller's transaction.
 * @throws NotFoundError when the bytes are gone; ConflictError `upload_used` when the upload served before or was ended
 */
export async function spendSealedUpload(tx: Transaction, ctx: Ctx, sealed: SealedUpload): Promise<void> {
  const { workspaceId } = ctx;
  await keepBlob(tx, ctx, sealed);
  const { uploadId, fileName } = sealed;
  if (!(await setUploadState(tx, { workspaceId, uploadId, from: ["complete"], to: "used" })))
    throw new ConflictError(
      "upload_used",
      `This sending of ${fileName} was used before or has ended. Choose the file again to add it once more.`,
    );
}

/** Clears the parts of a used or cancelled upload; what fails here the hourly sweep clears. */
export async function clearStaging(ctx: Ctx, uploadId: string): Promise<void> {
  try {
    const row = await loadUpload(ctx, uploadId);
    const prefix = prefixOf(parseStagingKey(row.stagingKey));
    for (
      let page = await ctx.store.list(prefix);
      page.objects.length > 0;
      page = await ctx.store.list(prefix)
    ) {
      for (const { key } of page.objects) await ctx.store.remove(key);
    }
  } catch (error) {
    logger().warn({ event: "staging.left", uploadId, err: error });
  }
}
