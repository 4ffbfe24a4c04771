import type { Transaction } from "@/db/client";
import { isShared } from "@/db/queries/programmes";
import { selectRevision } from "@/db/queries/revisions";
import { lockRun, type RunRow, selectRun } from "@/db/queries/runs";
import { ConflictError, NotFoundError } from "@/lib/errors";
import { RELEASED_STATES } from "@/lib/policy/released";
import type { Action } from "@/lib/policy/rules";
import { authorise, type Ctx } from "@/lib/services/ctx";

const noRun = () => new NotFoundError("no_run", "There is no such run here.");

/** A run that the asker may see. @throws NotFoundError for another workspace's; ForbiddenError for an unshared reader */
export async function loadRun(ctx: Ctx, runId: string, action: Action = "run.view"): Promise<RunRow> {
  const { workspaceId, userId } = ctx;
  const run = await selectRun(ctx.db, { workspaceId, runId });
  if (!run) throw noRun();
  const [revision, shared] = await Promise.all([
    selectRevision(ctx.db, { workspaceId, revisionId: run.revisionId }),
    isShared(ctx.db, { workspaceId, programmeId: run.programmeId, userId }),
  ]);
  const granted = shared && revision !== null && RELEASED_STATES.has(revision.state);
  authorise(ctx, action, { granted, ownerId: run.testerId });
  return run;
}

/** The run, locked, if it still is as the person saw it. @throws NotFoundError; ConflictError `run_moved` */
export async function loadRunForUpdate(
  tx: Transaction,
  ctx: Ctx,
  { runId, rowVersion }: { runId: string; rowVersion: number },
): Promise<RunRow> {
  const run = await lockRun(tx, { workspaceId: ctx.workspaceId, runId });
  if (!run) throw noRun();
  if (run.rowVersion !== rowVersion) {
    const state = run.setAsideAt ? "set aside" : "in use";
    throw new ConflictError(
      "run_moved",
      `Somebody changed run ${run.number} after you opened it; it is ${state} now. Look at it again.`,
      { rowVersion: run.rowVersion, setAside: run.setAsideAt !== null },
    );
  }
  return run;
}
