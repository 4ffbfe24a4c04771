import { selectRunAnalyses, selectRunForJudging } from "@/db/queries/run-analyses";
import { ConflictError, FileRefusedError } from "@/lib/errors";
import { csvText } from "@/lib/format/csv-text";
import type { RefusedRow } from "@/lib/logs/types";
import { type Ctx, withTransaction } from "@/lib/services/ctx";
import { appendLedger } from "@/lib/services/ledger/append";
import { loadProgramme } from "@/lib/services/programmes/load";
import { loadRun } from "@/lib/services/runs/load";
import { readStoredLog } from "@/lib/services/runs/read-stored-log";

/** More bad rows than this are no list that anybody reads; the file says then that it ends there. */
const MOST_ROWS = 100_000;

/** Refused rows as CSV (RFC 4180): the line of the file, the column, the raw text and the reason. */
export function refusedRowsCsv(rows: readonly RefusedRow[], most = MOST_ROWS): string {
  const data = rows
    .slice(0, most)
    .map(({ row, column, raw, reason }) => [row, column ?? "", raw ?? "", reason]);
  if (rows.length >= most) data.push(["", "", "", `the list ends after ${most} rows`]);
  const fields = ["row", "column", "raw text", "reason"];
  return csvText([fields, ...data]);
}

/**
 * Reads a run's log once more, piece by piece, as it is read for its verdict, and lists every row that was refused; noted in the
 * ledger as a download.
 * @throws ForbiddenError; NotFoundError; UnavailableError; ConflictError `no_rows_refused`,
 *   `log_refused` when the log as a whole can't be read
 */
export async function listRefusedRows(ctx: Ctx, runId: string): Promise<{ fileName: string; csv: string }> {
  const run = await loadRun(ctx, runId, "run.download");
  const { workspaceId } = ctx;
  // Reading a large log again is work: it is done only where its verdict says that there is something to list.
  const [verdict] = await selectRunAnalyses(ctx.db, { workspaceId, runId });
  if (!verdict?.result.notes.some((note) => note.code === "rows_refused"))
    throw new ConflictError("no_rows_refused", "No row of this log was refused, so there is no list.");
  const { sheet } = await loadProgramme(ctx, run.programmeId);
  const found = await selectRunForJudging(ctx.db, { workspaceId, runId });
  const log = await readStoredLog(
    ctx,
    { sha256: run.logSha256, sizeBytes: run.logBytes },
    {
      fileName: run.logFileName,
      drive: sheet.figures.drive,
      key: found?.channelKey ?? undefined,
      maxRefusedRows: MOST_ROWS,
    },
  );
  if (log instanceof FileRefusedError)
    throw new ConflictError(
      "log_refused",
      `The log as a whole is refused, so there is no list. ${log.message}`,
    );
  await withTransaction(ctx, (tx, inner) =>
    appendLedger(tx, inner, {
      event: "run.refused_rows_downloaded",
      subjectType: "run",
      subjectId: run.id,
      programmeId: run.programmeId,
      data: { number: run.number, sha256: run.logSha256, rows: log.rowsRefused.length },
    }),
  );
  return { fileName: `run-${run.number}-refused-rows.csv`, csv: refusedRowsCsv(log.rowsRefused) };
}
