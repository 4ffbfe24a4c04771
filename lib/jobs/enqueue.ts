import type { Queryable } from "@/db/client";
import { insertJob } from "@/db/queries/jobs";

/** Work that only the worker does. Each may run twice: the second run changes nothing. */
export type Job =
  | { name: "judge-run"; data: { workspaceId: string; runId: string } }
  | { name: "compute-comparison"; data: { workspaceId: string; comparisonId: string } }
  | { name: "read-description"; data: { workspaceId: string; descriptionId: string } }
  | { name: "read-image"; data: { workspaceId: string; revisionId: string } }
  | { name: "compute-change-set"; data: { workspaceId: string; changeSetId: string } }
  | { name: "compute-coverage"; data: { workspaceId: string; changeSetId: string } };

/**
 * Puts a job into its queue in the caller's transaction: change and job commit together or not at all.
 * @param background true: taken only when nobody's job waits in its queue
 */
export async function enqueueJob(tx: Queryable, job: Job, { background = false } = {}): Promise<void> {
  await insertJob(tx, { ...job, priority: background ? -1 : 0 });
}
