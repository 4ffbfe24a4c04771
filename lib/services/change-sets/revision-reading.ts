import type { Queryable } from "@/db/client";
import { selectDescription } from "@/db/queries/descriptions";
import { type ImageReadingRow, selectImageReading } from "@/db/queries/image-readings";
import { type RevisionRow, selectRevision } from "@/db/queries/revisions";
import { READER_VERSION } from "@/lib/calibration/reader-version";
import { ConflictError } from "@/lib/errors";
import { authorise, type Ctx } from "@/lib/services/ctx";
import { noRevision } from "@/lib/services/revisions/load";

/** The reading of a revision's image by its own description and this version of the reader; null where none is there. */
export async function ownReading(
  db: Queryable,
  { workspaceId, id: revisionId, descriptionId }: Pick<RevisionRow, "workspaceId" | "id" | "descriptionId">,
): Promise<ImageReadingRow | null> {
  if (descriptionId === null) return null;
  return await selectImageReading(db, {
    workspaceId,
    revisionId,
    descriptionId,
    readerVersion: READER_VERSION,
  });
}

/**
 * Where the values of a revision's image are kept, as its description reads them; for who may have values as a file.
 * @throws ForbiddenError; NotFoundError; ConflictError `no_values` where no reading is there
 */
export async function findRevisionReading(
  ctx: Ctx,
  revisionId: string,
): Promise<{ number: number; programmeId: string; blobSha256: string }> {
  authorise(ctx, "values.export");
  const { db, workspaceId } = ctx;
  const revision = await selectRevision(db, { workspaceId, revisionId });
  if (!revision) throw noRevision();
  const { number, descriptionId, programmeId } = revision;
  const kept = await ownReading(db, revision);
  if (!kept) throw new ConflictError("no_values", await whyNoValues(ctx, { number, descriptionId }));
  return { number, programmeId, blobSha256: kept.blobSha256 };
}

async function whyNoValues(
  { db, workspaceId }: Ctx,
  { number, descriptionId }: { number: number; descriptionId: string | null },
): Promise<string> {
  if (descriptionId === null)
    return `R${number} has no description, so its values are not known. Add one on its page.`;
  const description = await selectDescription(db, { workspaceId, descriptionId });
  return description?.state === "refused"
    ? `The description of R${number} was refused, so its values are not known. ${description.failure}`
    : `The values of R${number} are not read yet. Wait for it, then try again.`;
}
