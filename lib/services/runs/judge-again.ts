import type { Transaction } from "@/db/client";
import { selectRunIds } from "@/db/queries/runs";
import { enqueueJob } from "@/lib/jobs/enqueue";
import type { Ctx } from "@/lib/services/ctx";

/**
 * Has every run of a programme, or of one of its road days, judged anew once the caller's transaction commits: call it
 * after a new vehicle sheet version or after a road day's figures changed. Verdicts of old inputs stay as they are.
 */
export async function judgeRunsAgain(
  tx: Transaction,
  ctx: Pick<Ctx, "workspaceId">,
  place: { programmeId: string; roadDayId?: string },
): Promise<void> {
  const { workspaceId } = ctx;
  for (const run of await selectRunIds(tx, { workspaceId, ...place })) {
    await enqueueJob(tx, { name: "judge-run", data: { workspaceId, runId: run.id } });
  }
}
