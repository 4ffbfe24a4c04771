import type { Transaction } from "@/db/client";
import { type DescriptionRow, keepDescription } from "@/db/queries/descriptions";
import { digestOf } from "@/lib/canonical-json";
import { InvalidInputError } from "@/lib/errors";
import { enqueueJob } from "@/lib/jobs/enqueue";
import type { Ctx } from "@/lib/services/ctx";
import { LARGEST_BYTES } from "@/lib/services/uploads/schema";
import { clearStaging, type SealedUpload, sealUpload, spendSealedUpload } from "@/lib/services/uploads/seal";

/**
 * Puts the files of a description under their fingerprints, in their order.
 * @throws as sealUpload; InvalidInputError `same_name`, `too_large`
 */
export async function sealDescription(ctx: Ctx, uploadIds: readonly string[]): Promise<SealedUpload[]> {
  const sealed: SealedUpload[] = [];
  for (const uploadId of uploadIds) sealed.push(await sealUpload(ctx, { uploadId, purpose: "description" }));
  const names = new Set(sealed.map(({ fileName }) => fileName));
  if (names.size < sealed.length)
    throw new InvalidInputError(
      "same_name",
      "Two of the description's files have the same name, so an include could mean either. Leave one out.",
    );
  if (sealed.reduce((sum, { sizeBytes }) => sum + sizeBytes, 0) > LARGEST_BYTES.description)
    throw new InvalidInputError(
      "too_large",
      `The description's files have more than ${Math.floor(LARGEST_BYTES.description / 1e6)} MB together. Leave out those that it does not include.`,
    );
  return sealed;
}

/**
 * The row of a description whose files are sealed, in the caller's transaction, and the job that reads it. The same files in the
 * same order are one description of a programme.
 * @throws as spendSealedUpload
 */
export async function keepSealedDescription(
  tx: Transaction,
  ctx: Ctx,
  { programmeId, sealed }: { programmeId: string; sealed: readonly SealedUpload[] },
): Promise<DescriptionRow> {
  const { workspaceId, userId } = ctx;
  for (const upload of sealed) await spendSealedUpload(tx, ctx, upload);
  const files = sealed.map(({ fileName, sha256, sizeBytes }) => ({
    name: fileName,
    sha256,
    bytes: sizeBytes,
  }));
  const sha256 = digestOf(files.map((file) => ({ name: file.name, sha256: file.sha256 })));
  const { row, created } = await keepDescription(tx, {
    workspaceId,
    programmeId,
    sha256,
    files,
    createdBy: userId,
  });
  if (created)
    await enqueueJob(tx, { name: "read-description", data: { workspaceId, descriptionId: row.id } });
  return row;
}

/** Clears the parts of every file; what fails here the hourly sweep clears. */
export async function clearDescriptionStaging(ctx: Ctx, uploadIds: readonly string[]): Promise<void> {
  for (const uploadId of uploadIds) await clearStaging(ctx, uploadId);
}
