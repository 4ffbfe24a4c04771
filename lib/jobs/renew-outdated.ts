import type { Queryable } from "@/db/client";
import { selectOutdatedComparisons, selectOutdatedRuns } from "@/db/queries/analysis-versions";
import { enqueueJob } from "@/lib/jobs/enqueue";
import { ANALYSIS_VERSION } from "@/lib/measure/analysis-version";

/**
 * Has everything that only an older analysis version computed computed anew, behind whatever people wait for. Old results and
 * verdicts stay as they are. @returns how many jobs were made
 */
export async function renewOutdated(db: Queryable): Promise<number> {
  const version = { analysisVersion: ANALYSIS_VERSION };
  const runs = await selectOutdatedRuns(db, version);
  const comparisons = await selectOutdatedComparisons(db, version);
  for (const data of comparisons)
    await enqueueJob(db, { name: "compute-comparison", data }, { background: true });
  for (const data of runs) await enqueueJob(db, { name: "judge-run", data }, { background: true });
  return runs.length + comparisons.length;
}
