import type { z } from "zod";
import { selectChangeSet } from "@/db/queries/change-sets";
import { selectImageReading } from "@/db/queries/image-readings";
import { selectRevision } from "@/db/queries/revisions";
import { type CdfSelection, cdfOfChanges, cdfOfReading } from "@/lib/calibration/cdf/cdf-instances";
import { changesCsv, readingCsv } from "@/lib/calibration/cdf/values-csv";
import { writeCdfx } from "@/lib/calibration/cdf/write-cdfx";
import { READER_VERSION } from "@/lib/calibration/reader-version";
import { ConflictError, NotFoundError } from "@/lib/errors";
import { loadSides } from "@/lib/services/change-sets/pair";
import type { valuesFormat } from "@/lib/services/change-sets/schema";
import { openReading } from "@/lib/services/change-sets/stored-reading";
import { authorise, type Ctx, withTransaction } from "@/lib/services/ctx";
import { appendLedger } from "@/lib/services/ledger/append";
import { noRevision } from "@/lib/services/revisions/load";

type Format = z.infer<typeof valuesFormat>;

/** A file of values, made piece by piece. */
export interface ValuesFile {
  fileName: string;
  type: string;
  pieces: Iterable<string>;
}

const TYPES: Record<Format, string> = { cdfx: "application/xml", csv: "text/csv" };

function cdfx(title: string, { instances, leftOut }: CdfSelection): Iterable<string> {
  return writeCdfx(title, instances, leftOut);
}

/**
 * What a change set changes, as a file: CDFX with the values after the change, or CSV with both. Noted in the ledger.
 * @throws ForbiddenError; NotFoundError; ConflictError `not_ready`
 */
export async function exportChangeSet(
  ctx: Ctx,
  { changeSetId, format }: { changeSetId: string; format: Format },
): Promise<ValuesFile> {
  const { db, workspaceId } = ctx;
  const row = await selectChangeSet(db, { workspaceId, changeSetId });
  if (!row) throw new NotFoundError("no_change_set", "There is no such change set.");
  const pair = { revisionId: row.revisionBId, againstId: row.revisionAId };
  const { a, b } = await loadSides(ctx, pair, "values.export");
  if (!row.result)
    throw new ConflictError("not_ready", "The changes are not worked out yet. Wait for them, then download.");
  const name = `R${a.number} to R${b.number}`;
  const changes = row.result;
  await note(ctx, { revisionId: b.id, programmeId: b.programmeId }, { from: a.number, to: b.number, format });
  return {
    fileName: `${name}.${format}`,
    type: TYPES[format],
    pieces: format === "csv" ? changesCsv(changes) : cdfx(name, cdfOfChanges(changes, "after")),
  };
}

/**
 * All values of a revision's image as its description reads them, as a file. Noted in the ledger.
 * @throws ForbiddenError; NotFoundError; ConflictError `no_values` where no reading is there
 */
export async function exportRevisionValues(
  ctx: Ctx,
  { revisionId, format }: { revisionId: string; format: Format },
): Promise<ValuesFile> {
  authorise(ctx, "values.export");
  const { db, workspaceId } = ctx;
  const revision = await selectRevision(db, { workspaceId, revisionId });
  if (!revision) throw noRevision();
  const { number, descriptionId, programmeId } = revision;
  const key = { workspaceId, revisionId, readerVersion: READER_VERSION };
  const kept = descriptionId === null ? null : await selectImageReading(db, { ...key, descriptionId });
  if (!kept)
    throw new ConflictError(
      "no_values",
      descriptionId === null
        ? `R${number} has no description, so its values are not known. Add one on its page.`
        : `The values of R${number} are not read yet. Wait for it, then download.`,
    );
  const reading = await openReading(ctx, kept.blobSha256);
  await note(ctx, { revisionId, programmeId }, { number, format });
  return {
    fileName: `R${number}.${format}`,
    type: TYPES[format],
    pieces: format === "csv" ? readingCsv(reading) : cdfx(`R${number}`, cdfOfReading(reading)),
  };
}

async function note(
  ctx: Ctx,
  { revisionId, programmeId }: { revisionId: string; programmeId: string },
  data: Record<string, unknown>,
): Promise<void> {
  await withTransaction(ctx, (tx, inner) =>
    appendLedger(tx, inner, {
      event: "values.exported",
      subjectType: "revision",
      subjectId: revisionId,
      programmeId,
      data,
    }),
  );
}
