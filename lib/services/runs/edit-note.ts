import { type RunRow, updateRun } from "@/db/queries/runs";
import { authorise, type Ctx, withTransaction } from "@/lib/services/ctx";
import { appendLedger } from "@/lib/services/ledger/append";
import { loadRunForUpdate } from "@/lib/services/runs/load";
import { refuseCited } from "@/lib/services/runs/refuse-cited";
import type { EditRunNote } from "@/lib/services/runs/schema";

/**
 * Changes the note of a run; the ledger keeps the old one.
 * @throws ForbiddenError; NotFoundError; ConflictError `run_moved`, `run_cited`
 */
export async function editRunNote(ctx: Ctx, input: EditRunNote): Promise<RunRow> {
  authorise(ctx, "run.edit");
  return await withTransaction(ctx, async (tx, inner) => {
    const run = await loadRunForUpdate(tx, inner, input);
    authorise(inner, "run.edit", { ownerId: run.testerId });
    await refuseCited(tx, inner, `Run ${run.number}`, [run.id]);
    if (run.note === input.note) return run;
    const { workspaceId } = inner;
    const changed = await updateRun(tx, {
      workspaceId,
      runId: run.id,
      rowVersion: run.rowVersion,
      set: { note: input.note },
    });
    await appendLedger(tx, inner, {
      event: "run.updated",
      subjectType: "run",
      subjectId: run.id,
      programmeId: run.programmeId,
      data: { number: run.number, old: { note: run.note }, new: { note: input.note } },
    });
    return changed ?? run;
  });
}
