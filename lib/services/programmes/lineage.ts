import { countRunsByRevision, selectDecisions, selectLineage } from "@/db/queries/programme-overview";
import { can } from "@/lib/policy/can";
import { RELEASED_STATES, RELEASING_KINDS } from "@/lib/policy/released";
import type { Ctx } from "@/lib/services/ctx";

type LineageRow = Awaited<ReturnType<typeof selectLineage>>[number];
type DecisionRow = Awaited<ReturnType<typeof selectDecisions>>[number];

/** A revision in its lineage, with what was driven with it and decided on it. */
export interface LineageRevision extends LineageRow {
  runs: number;
  newestRunAt: Date | null;
  /** Newest first. */
  decisions: DecisionRow[];
}

const IN_FLIGHT: ReadonlySet<string> = new Set(["draft", "validating", "in_review"]);

/** Drafts, validating ones and those in review that are not set aside. */
export function isInFlight(revision: Pick<LineageRow, "state" | "setAsideAt">): boolean {
  return IN_FLIGHT.has(revision.state) && revision.setAsideAt === null;
}

/**
 * Revisions of programmes that the asker may see, newest first: readers get released ones only, with the decisions that released them.
 * The caller has made sure that the programmes themselves may be seen.
 */
export async function loadLineage(ctx: Ctx, programmeIds: string[]): Promise<LineageRevision[]> {
  const args = { workspaceId: ctx.workspaceId, programmeIds };
  const [rows, counts, decisions] = await Promise.all([
    selectLineage(ctx.db, args),
    countRunsByRevision(ctx.db, args),
    selectDecisions(ctx.db, args),
  ]);
  const countOf = new Map(counts.map((count) => [count.revisionId, count]));
  const seesAll = can(ctx, "revision.view", { granted: false }).ok;
  return rows
    .filter((row) => seesAll || RELEASED_STATES.has(row.state))
    .map((row) => ({
      ...row,
      runs: countOf.get(row.id)?.runs ?? 0,
      newestRunAt: countOf.get(row.id)?.newestAt ?? null,
      decisions: decisions.filter(
        (decision) => decision.revisionId === row.id && (seesAll || RELEASING_KINDS.has(decision.kind)),
      ),
    }));
}
