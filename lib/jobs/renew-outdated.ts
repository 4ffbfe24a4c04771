import type { Queryable } from "@/db/client";
import { selectOutdatedComparisons, selectOutdatedRuns } from "@/db/queries/analysis-versions";
import {
  selectForgottenChangeSets,
  selectForgottenCoverages,
  selectOutdatedPairs,
  selectUncomparedPairs,
} from "@/db/queries/change-sets";
import { selectOutdatedDescriptions } from "@/db/queries/descriptions";
import { selectUnreadImages } from "@/db/queries/image-readings";
import { READER_VERSION } from "@/lib/calibration/reader-version";
import { enqueueJob } from "@/lib/jobs/enqueue";
import { ANALYSIS_VERSION } from "@/lib/measure/analysis-version";
import { openPairs } from "@/lib/services/change-sets/refresh";

/** Jobs that one sweep makes at most, so that a new version does not flood the queue; the next sweep goes on, newest first. */
const MOST_A_SWEEP = 200;

/**
 * Has everything that only an older analysis version or an older reader of calibrations computed computed anew, behind whatever people
 * wait for. Old results and verdicts stay as they are. What failed for good, e.g. because its log is gone, is left alone for a day.
 * @returns how many jobs were made, `most` at most for the analysis, and `most` of each kind for calibrations
 */
export async function renewOutdated(db: Queryable, most = MOST_A_SWEEP): Promise<number> {
  const version = { analysisVersion: ANALYSIS_VERSION };
  const comparisons = await selectOutdatedComparisons(db, { ...version, most });
  const runs = await selectOutdatedRuns(db, { ...version, most: most - comparisons.length });
  for (const data of comparisons)
    await enqueueJob(db, { name: "compute-comparison", data }, { background: true });
  for (const data of runs) await enqueueJob(db, { name: "judge-run", data }, { background: true });
  return runs.length + comparisons.length + (await renewReadings(db, most));
}

/** Descriptions, readings, change sets and coverages; each kind up to `most`, one after the other. */
async function renewReadings(db: Queryable, most: number): Promise<number> {
  const reader = { readerVersion: READER_VERSION, most };
  const background = { background: true };
  const descriptions = await selectOutdatedDescriptions(db, reader);
  for (const data of descriptions) await enqueueJob(db, { name: "read-description", data }, background);
  const readings = await selectUnreadImages(db, reader);
  for (const data of readings) await enqueueJob(db, { name: "read-image", data }, background);
  const pairs = [...(await selectOutdatedPairs(db, reader)), ...(await selectUncomparedPairs(db, { most }))];
  for (const { workspaceId, ...pair } of pairs)
    await db.transaction((tx) => openPairs(tx, { workspaceId }, [pair], background));
  const changeSets = await selectForgottenChangeSets(db, { most });
  for (const data of changeSets) await enqueueJob(db, { name: "compute-change-set", data }, background);
  const coverages = await selectForgottenCoverages(db, { most });
  for (const data of coverages) await enqueueJob(db, { name: "compute-coverage", data }, background);
  return [descriptions, readings, pairs, changeSets, coverages].reduce((sum, { length }) => sum + length, 0);
}
