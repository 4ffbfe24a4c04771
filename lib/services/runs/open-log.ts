import type { RunRow } from "@/db/queries/runs";
import { openBlob } from "@/lib/services/blobs";
import { type Ctx, withTransaction } from "@/lib/services/ctx";
import { appendLedger } from "@/lib/services/ledger/append";
import { loadRun } from "@/lib/services/runs/load";
import type { StoredBytes } from "@/storage/port";

/**
 * Opens the log of a run exactly as it was uploaded, fingerprint checked, for a download that the ledger notes.
 * @throws ForbiddenError; NotFoundError; UnavailableError `integrity_failed`
 */
export async function openRunLog(ctx: Ctx, runId: string): Promise<{ run: RunRow; stored: StoredBytes }> {
  const run = await loadRun(ctx, runId, "run.download");
  const stored = await openBlob(ctx, run.logSha256);
  await withTransaction(ctx, (tx, inner) =>
    appendLedger(tx, inner, {
      event: "run.downloaded",
      subjectType: "run",
      subjectId: run.id,
      programmeId: run.programmeId,
      data: { number: run.number, sha256: run.logSha256 },
    }),
  );
  return { run, stored };
}
