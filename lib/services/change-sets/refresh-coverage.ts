import type { Transaction } from "@/db/client";
import { selectReadyChangeSetsOf } from "@/db/queries/change-sets";
import { openCoverage } from "@/db/queries/coverages";
import { enqueueJob } from "@/lib/jobs/enqueue";
import { coverageInput } from "@/lib/services/change-sets/coverage-input";
import type { Ctx } from "@/lib/services/ctx";

type ReadyChangeSet = Awaited<ReturnType<typeof selectReadyChangeSetsOf>>[number];

/** Marks the coverage of a finished change set as being computed and has it computed, unless it is there or no run is usable. */
export async function openCoverageOf(
  tx: Transaction,
  { workspaceId }: Pick<Ctx, "workspaceId">,
  changeSet: ReadyChangeSet,
): Promise<void> {
  const { inputSha256, runs } = await coverageInput(tx, changeSet);
  if (runs.length === 0) return;
  const changeSetId = changeSet.id;
  if (await openCoverage(tx, { workspaceId, changeSetId, inputSha256 }))
    await enqueueJob(tx, { name: "compute-coverage", data: { workspaceId, changeSetId } });
}

/** Has the coverage of what a revision changes worked out anew for the runs and links that count now: its newest change set a counterpart. */
export async function refreshCoverageOf(
  tx: Transaction,
  place: Pick<Ctx, "workspaceId">,
  { revisionId }: { revisionId: string },
): Promise<void> {
  const ready = await selectReadyChangeSetsOf(tx, { workspaceId: place.workspaceId, revisionId });
  const newest = new Map<string, ReadyChangeSet>();
  for (const changeSet of ready)
    if (!newest.has(changeSet.revisionAId)) newest.set(changeSet.revisionAId, changeSet);
  for (const changeSet of newest.values()) await openCoverageOf(tx, place, changeSet);
}
