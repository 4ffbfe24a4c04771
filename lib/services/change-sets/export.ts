import type { z } from "zod";
import { selectChangeSet } from "@/db/queries/change-sets";
import { type CdfSelection, cdfOfChanges, cdfOfReading } from "@/lib/calibration/cdf/cdf-instances";
import { changesCsv, readingCsv } from "@/lib/calibration/cdf/values-csv";
import { writeCdfx } from "@/lib/calibration/cdf/write-cdfx";
import { ConflictError, NotFoundError } from "@/lib/errors";
import { loadSides } from "@/lib/services/change-sets/pair";
import { findRevisionReading } from "@/lib/services/change-sets/revision-reading";
import type { valuesFormat } from "@/lib/services/change-sets/schema";
import { openReading } from "@/lib/services/change-sets/stored-reading";
import { type Ctx, withTransaction } from "@/lib/services/ctx";
import { appendLedger } from "@/lib/services/ledger/append";
import { limitTries } from "@/lib/services/limit-tries";

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
 * @throws ForbiddenError; NotFoundError; ConflictError `not_ready`; TooManyRequestsError
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
  await limitTries(ctx.db, { doing: "download values", userId: ctx.userId });
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
 * @throws ForbiddenError; NotFoundError; ConflictError `no_values` where no reading is there; TooManyRequestsError
 */
export async function exportRevisionValues(
  ctx: Ctx,
  { revisionId, format }: { revisionId: string; format: Format },
): Promise<ValuesFile> {
  const { number, programmeId, blobSha256 } = await findRevisionReading(ctx, revisionId);
  await limitTries(ctx.db, { doing: "download values", userId: ctx.userId });
  const reading = await openReading(ctx, blobSha256);
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
