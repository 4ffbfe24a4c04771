import type { Transaction } from "@/db/client";
import { selectComparisonIdsUsing } from "@/db/queries/comparisons";
import { enqueueJob } from "@/lib/jobs/enqueue";
import { refreshCoverageOf } from "@/lib/services/change-sets/refresh-coverage";
import type { Ctx } from "@/lib/services/ctx";

/**
 * Has every comparison and coverage that the revision's runs enter computed anew, once the caller's transaction commits.
 * Until then pages show the earlier result as stale: a result belongs to exact inputs.
 */
export async function refreshResultsOf(
  tx: Transaction,
  ctx: Pick<Ctx, "workspaceId">,
  { revisionId }: { revisionId: string },
): Promise<void> {
  const { workspaceId } = ctx;
  const ids = await selectComparisonIdsUsing(tx, { workspaceId, revisionId });
  for (const comparisonId of ids) {
    await enqueueJob(tx, { name: "compute-comparison", data: { workspaceId, comparisonId } });
  }
  await refreshCoverageOf(tx, ctx, { revisionId });
}
