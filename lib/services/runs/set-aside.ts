import { hasRunAnalysis } from "@/db/queries/run-analyses";
import { type RunRow, updateRun } from "@/db/queries/runs";
import { ConflictError } from "@/lib/errors";
import { refreshResultsOf } from "@/lib/services/comparisons/refresh";
import { authorise, type Ctx, withTransaction } from "@/lib/services/ctx";
import { appendLedger } from "@/lib/services/ledger/append";
import { loadRunForUpdate } from "@/lib/services/runs/load";
import { refuseCited } from "@/lib/services/runs/refuse-cited";
import type { SetAsideRun } from "@/lib/services/runs/schema";

/**
 * Takes a run out of every comparison, with a reason. It stays listed, and whether its result could be seen by then is
 * kept with it. Comparisons that used it are computed anew.
 * @throws ForbiddenError; NotFoundError; ConflictError `run_moved`, `run_cited`, `already_set_aside`
 */
export async function setRunAside(ctx: Ctx, input: SetAsideRun): Promise<RunRow> {
  authorise(ctx, "run.set_aside");
  return await withTransaction(ctx, async (tx, inner) => {
    const run = await loadRunForUpdate(tx, inner, input);
    authorise(inner, "run.set_aside", { ownerId: run.testerId });
    await refuseCited(tx, inner, `Run ${run.number}`, [run.id]);
    if (run.setAsideAt)
      throw new ConflictError("already_set_aside", `Run ${run.number} is set aside already.`);
    // A run waits again under another channel key, but what it showed before was seen.
    const resultWasVisible =
      run.state !== "waiting" ||
      (await hasRunAnalysis(tx, { workspaceId: inner.workspaceId, runId: run.id }));
    const { at } = await appendLedger(tx, inner, {
      event: "run.excluded",
      subjectType: "run",
      subjectId: run.id,
      programmeId: run.programmeId,
      data: { number: run.number, sha256: run.logSha256, reason: input.reason, resultWasVisible },
    });
    const changed = await updateRun(tx, {
      workspaceId: inner.workspaceId,
      runId: run.id,
      rowVersion: run.rowVersion,
      set: { setAsideAt: at, setAsideBy: inner.userId, setAsideReason: input.reason, resultWasVisible },
    });
    await refreshResultsOf(tx, inner, { revisionId: run.revisionId });
    return changed ?? run;
  });
}
