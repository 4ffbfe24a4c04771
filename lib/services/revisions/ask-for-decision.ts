import type { Queryable } from "@/db/client";
import type { RevisionRow } from "@/db/queries/revisions";
import { countUsableRuns, selectNewestPlanVersion, selectStanding } from "@/db/queries/revisions";
import { InvalidInputError } from "@/lib/errors";
import type { Ctx } from "@/lib/services/ctx";
import { stepRevision } from "@/lib/services/revisions/step";

/** What is missing before a lead can be asked, in plain sentences; empty when nothing. */
export async function missingForDecision(
  db: Queryable,
  row: Pick<RevisionRow, "id" | "workspaceId" | "programmeId" | "number">,
): Promise<string[]> {
  const { workspaceId, programmeId } = row;
  const standing = await selectStanding(db, { workspaceId, programmeId });
  if (!standing)
    return ["No revision stands yet: a lead must first adopt the image the car came with as found."];
  const own = await countUsableRuns(db, { workspaceId, revisionId: row.id });
  const reference = await countUsableRuns(db, { workspaceId, revisionId: standing.id });
  return [
    own === 0 ? `R${row.number} has no usable run: attach one.` : null,
    reference === 0
      ? `R${standing.number}, which stands, has no usable run to compare with: attach one.`
      : null,
  ].filter((sentence) => sentence !== null);
}

/**
 * validating → in review: the calibrator or a tester asks for a decision under the gate plan in force.
 * Evidence that is still thin does not keep anybody from asking; the gates show it to the lead.
 * @throws InvalidInputError naming what is missing
 */
export async function askForDecision(ctx: Ctx, { revisionId }: { revisionId: string }): Promise<void> {
  await stepRevision(ctx, {
    action: "revision.ask",
    revisionId,
    from: ["validating"],
    doing: "ask for a decision",
    event: "revision.submitted",
    change: async (tx, row) => {
      const missing = await missingForDecision(tx, row);
      if (missing.length > 0) throw new InvalidInputError("evidence_missing", missing.join(" "), { missing });
      const gatePlanVersion = await selectNewestPlanVersion(tx, row);
      return {
        set: { state: "in_review", submitterId: ctx.userId, submittedAt: new Date(), gatePlanVersion },
        data: { gatePlanVersion },
      };
    },
  });
}
