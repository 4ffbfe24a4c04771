import type { z } from "zod";
import { selectRunsOfRevision, updateRevision } from "@/db/queries/revisions";
import { ConflictError } from "@/lib/errors";
import { refreshChangeSetsOf } from "@/lib/services/change-sets/refresh";
import { authorise, type Ctx, withTransaction } from "@/lib/services/ctx";
import { appendLedger } from "@/lib/services/ledger/append";
import { loadRevisionForUpdate } from "@/lib/services/revisions/load";
import { stepWithReason } from "@/lib/services/revisions/schema";
import { stepRevision } from "@/lib/services/revisions/step";

/** Sets a mistaken draft without runs aside; it stays in the lineage and can be brought back. */
export async function setRevisionAside(ctx: Ctx, input: z.input<typeof stepWithReason>): Promise<void> {
  const { revisionId, reason } = stepWithReason.parse(input);
  await stepRevision(ctx, {
    action: "revision.set_aside",
    revisionId,
    from: ["draft"],
    doing: "set it aside",
    event: "revision.set_aside",
    change: async (tx, row) => {
      const attached = await selectRunsOfRevision(tx, { workspaceId: row.workspaceId, revisionId });
      if (attached.length > 0)
        throw new ConflictError("has_runs", `R${row.number} has runs. Withdraw it instead.`);
      return { set: { setAsideAt: new Date(), setAsideReason: reason }, data: { reason } };
    },
  });
}

/** Brings a draft that was set aside back; what was settled or decided meanwhile is held against it. */
export async function bringRevisionBack(ctx: Ctx, input: z.input<typeof stepWithReason>): Promise<void> {
  const { revisionId, reason } = stepWithReason.parse(input);
  await withTransaction(ctx, async (tx, inner) => {
    const row = await loadRevisionForUpdate(tx, inner, revisionId);
    authorise(inner, "revision.set_aside", { ownerId: row.authorId });
    if (!row.setAsideAt) throw new ConflictError("not_set_aside", `R${row.number} is not set aside.`);
    const { workspaceId } = inner;
    await updateRevision(tx, {
      workspaceId,
      revisionId,
      rowVersion: row.rowVersion,
      set: { setAsideAt: null, setAsideReason: null },
    });
    await appendLedger(tx, inner, {
      event: "revision.brought_back",
      subjectType: "revision",
      subjectId: row.id,
      programmeId: row.programmeId,
      data: { number: row.number, reason },
    });
    await refreshChangeSetsOf(tx, inner, { revisionId });
  });
}
