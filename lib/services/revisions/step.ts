import type { Transaction } from "@/db/client";
import type { RevisionRow, RevisionState } from "@/db/queries/revisions";
import { updateRevision } from "@/db/queries/revisions";
import { ConflictError } from "@/lib/errors";
import type { Action } from "@/lib/policy/rules";
import { authorise, type Ctx, withTransaction } from "@/lib/services/ctx";
import { appendLedger } from "@/lib/services/ledger/append";
import { loadRevisionForUpdate, requireState } from "@/lib/services/revisions/load";

interface Step {
  action: Action;
  revisionId: string;
  /** States it may be in. */
  from: readonly RevisionState[];
  /** As in "to … it must be draft". */
  doing: string;
  event: string;
  /** Refuses by exception, or says what changes and what the ledger keeps of it. */
  change: (
    tx: Transaction,
    row: RevisionRow,
  ) => Promise<{ set: Parameters<typeof updateRevision>[1]["set"]; data?: Record<string, unknown> }>;
}

/** One step of a revision: policy by its author, lock, state, change, ledger; all in one transaction. */
export async function stepRevision(ctx: Ctx, step: Step): Promise<RevisionRow> {
  return await withTransaction(ctx, async (tx, inner) => {
    const row = await loadRevisionForUpdate(tx, inner, step.revisionId);
    authorise(inner, step.action, { ownerId: row.authorId });
    requireState(row, step.from, step.doing);
    const { set, data } = await step.change(tx, row);
    const changed = await updateRevision(tx, {
      workspaceId: inner.workspaceId,
      revisionId: row.id,
      rowVersion: row.rowVersion,
      set,
    });
    if (!changed)
      throw new ConflictError("revision_moved", `R${row.number} was changed meanwhile. Reload the page.`);
    await appendLedger(tx, inner, {
      event: step.event,
      subjectType: "revision",
      subjectId: row.id,
      programmeId: row.programmeId,
      data: { number: row.number, from: row.state, to: changed.state, ...data },
    });
    return changed;
  });
}
