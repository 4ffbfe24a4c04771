import type { Queryable } from "@/db/client";
import { selectOutdatedComparisons, selectOutdatedRuns } from "@/db/queries/analysis-versions";
import { enqueueJob } from "@/lib/jobs/enqueue";
import { ANALYSIS_VERSION } from "@/lib/measure/analysis-version";

/** Jobs that one sweep makes at most, so that a new version does not flood the queue; the next sweep goes on, newest first. */
const MOST_A_SWEEP = 200;

/**
 * Has everything that only an older analysis version computed computed anew, behind whatever people wait for. Old results and
 * verdicts stay as they are. What failed for good, e.g. because its log is gone, is left alone for a day. @returns how many jobs
 * were made, `most` at most
 */
export async function renewOutdated(db: Queryable, most = MOST_A_SWEEP): Promise<number> {
  const version = { analysisVersion: ANALYSIS_VERSION };
  const comparisons = await selectOutdatedComparisons(db, { ...version, most });
  const runs = await selectOutdatedRuns(db, { ...version, most: most - comparisons.length });
  for (const data of comparisons)
    await enqueueJob(db, { name: "compute-comparison", data }, { background: true });
  for (const data of runs) await enqueueJob(db, { name: "judge-run", data }, { background: true });
  return runs.length + comparisons.length;
}
