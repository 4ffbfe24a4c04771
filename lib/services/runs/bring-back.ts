import type { Queryable } from "@/db/client";
import { countOthersWithRole } from "@/db/queries/people";
import { type RunRow, selectRunWithLog, selectTakenPlaces, updateRun } from "@/db/queries/runs";
import { ConflictError, ForbiddenError } from "@/lib/errors";
import { canBringBack } from "@/lib/policy/bring-back";
import { refreshResultsOf } from "@/lib/services/comparisons/refresh";
import { authorise, type Ctx, withTransaction } from "@/lib/services/ctx";
import { appendLedger } from "@/lib/services/ledger/append";
import { loadRunForUpdate } from "@/lib/services/runs/load";
import { refuseCited } from "@/lib/services/runs/refuse-cited";
import type { BringBackRun } from "@/lib/services/runs/schema";

/** Whether another active tester or lead is there who could judge it without having set it aside. */
export async function hasOtherTesterOrLead(
  ctx: Pick<Ctx, "db" | "workspaceId" | "userId">,
): Promise<boolean> {
  const { db, workspaceId, userId } = ctx;
  for (const role of ["lead", "tester"] as const)
    if ((await countOthersWithRole(db, { workspaceId, userId, role })) > 0) return true;
  return false;
}

/** Its log and its place must still be free. @throws ConflictError */
async function requireRoom(tx: Queryable, run: RunRow): Promise<void> {
  const { workspaceId, programmeId, roadDayId, logSha256, driveOrder } = run;
  const same = await selectRunWithLog(tx, { workspaceId, programmeId, logSha256 });
  if (same) {
    throw new ConflictError(
      "already_attached",
      `The same log was attached again as run ${same.number}. Set that one aside first.`,
      { runId: same.id, number: same.number },
    );
  }
  const places = await selectTakenPlaces(tx, { workspaceId, roadDayId });
  const taken = places.find((place) => place.driveOrder === driveOrder);
  if (taken) {
    throw new ConflictError(
      "place_taken",
      `Its place ${driveOrder} of the road day has gone to run ${taken.number}. Set that one aside first.`,
      { runId: taken.id, number: taken.number },
    );
  }
}

/**
 * Takes a run that was set aside back into use, with a reason. Comparisons of its revision are computed anew.
 * @throws ForbiddenError; NotFoundError; ConflictError `run_moved`, `run_cited`, `not_set_aside`, `already_attached`, `place_taken`
 */
export async function bringRunBack(ctx: Ctx, input: BringBackRun): Promise<RunRow> {
  authorise(ctx, "run.bring_back");
  return await withTransaction(ctx, async (tx, inner) => {
    const run = await loadRunForUpdate(tx, inner, input);
    const verdict = canBringBack(inner, {
      setAsideBy: run.setAsideBy,
      otherActive: await hasOtherTesterOrLead(inner),
    });
    if (!verdict.ok) throw new ForbiddenError("not_allowed", verdict.reason, { action: "run.bring_back" });
    await refuseCited(tx, inner, `Run ${run.number}`, [run.id]);
    if (!run.setAsideAt)
      throw new ConflictError(
        "not_set_aside",
        `Run ${run.number} is in use; there is nothing to bring back.`,
      );
    await requireRoom(tx, run);
    const changed = await updateRun(tx, {
      workspaceId: inner.workspaceId,
      runId: run.id,
      rowVersion: run.rowVersion,
      set: { setAsideAt: null, setAsideBy: null, setAsideReason: null, resultWasVisible: null },
    });
    await appendLedger(tx, inner, {
      event: "run.included",
      subjectType: "run",
      subjectId: run.id,
      programmeId: run.programmeId,
      data: {
        number: run.number,
        sha256: run.logSha256,
        reason: input.reason,
        wasSetAsideFor: run.setAsideReason,
        resultWasVisible: run.resultWasVisible,
      },
    });
    await refreshResultsOf(tx, inner, { revisionId: run.revisionId });
    return changed ?? run;
  });
}
