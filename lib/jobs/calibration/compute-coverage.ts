import { type ChangeSetRow, selectChangeSet, selectChangeSetHead } from "@/db/queries/change-sets";
import {
  closeCoverage,
  closeMovedCoverages,
  openCoverage,
  selectCoverageState,
} from "@/db/queries/coverages";
import type { FoundColumn } from "@/db/schema/change-sets";
import { coverageOf } from "@/lib/calibration/coverage/coverage";
import { linksInUse } from "@/lib/calibration/coverage/suggest-links";
import type { CoverageRun } from "@/lib/calibration/coverage/types";
import { digestOf } from "@/lib/canonical-json";
import { FileRefusedError, TwinpassError } from "@/lib/errors";
import { coverageRun, foundColumns } from "@/lib/jobs/calibration/coverage-run";
import { storable } from "@/lib/jobs/calibration/storable";
import type { System } from "@/lib/jobs/system";
import { logger } from "@/lib/logger";
import { type CoverageInput, coverageInput } from "@/lib/services/change-sets/coverage-input";
import { readStoredLog } from "@/lib/services/runs/read-stored-log";

interface CoverageJob {
  workspaceId: string;
  changeSetId: string;
}

const OUR_SIDE =
  "The coverage could not be worked out on our side. The runs are kept as they are; ask for it again, and if it fails again tell whoever runs this installation.";

/** Logs of the usable runs, as samples and as the list of their columns; bytes are checked on the way. */
async function readRuns(system: System, workspaceId: string, { runs, drive }: CoverageInput) {
  const samples: CoverageRun[] = [];
  const columns = new Map<string, FoundColumn>();
  for (const run of runs) {
    const log = await readStoredLog(
      { store: system.store, workspaceId },
      { sha256: run.logSha256, sizeBytes: run.logBytes },
      { fileName: run.logFileName, drive, key: run.channelKey ?? undefined },
    );
    if (log instanceof FileRefusedError) continue;
    for (const column of foundColumns(log)) columns.set(column.title, column);
    samples.push(coverageRun(run, log));
  }
  return { samples, columns: [...columns.values()] };
}

async function compute(
  system: System,
  changeSet: ChangeSetRow & { result: NonNullable<ChangeSetRow["result"]> },
  input: CoverageInput,
) {
  const { samples, columns } = await readRuns(system, changeSet.workspaceId, input);
  const links = linksInUse(changeSet.result, { chosen: input.links, columns });
  const result = storable(coverageOf(changeSet.result, samples, links));
  return { state: "ready", result, resultSha256: digestOf(result), columns: storable(columns) } as const;
}

/**
 * Works out where the usable runs went on what a change set changes, and stores it under the digest of its input. May run any
 * number of times: a result that is there is left alone.
 * @throws what kept it from being worked out on our side, after having noted it, so that the queue tries again
 */
export async function computeCoverage(system: System, job: CoverageJob): Promise<void> {
  const { db } = system;
  const changeSet = await selectChangeSet(db, job);
  if (!changeSet?.result) return;
  const { result } = changeSet;
  const input = await coverageInput(db, changeSet);
  const key = { ...job, inputSha256: input.inputSha256 };
  await closeMovedCoverages(db, key);
  if (input.runs.length === 0) return;
  if (!(await openCoverage(db, key))) return;
  try {
    await closeCoverage(db, key, await compute(system, { ...changeSet, result }, input));
  } catch (error) {
    logger().error({ event: "coverage.failed", ...job, err: error });
    const failure = error instanceof TwinpassError ? error.message : OUR_SIDE;
    await closeCoverage(db, key, { state: "failed", failure });
    throw error;
  }
}

/** The last try failed too, perhaps before anything could be noted: whoever waits is told. */
export async function giveUpCovering({ db }: System, job: CoverageJob): Promise<void> {
  const changeSet = await selectChangeSetHead(db, job);
  if (!changeSet) return;
  const key = { ...job, inputSha256: (await coverageInput(db, changeSet)).inputSha256 };
  if ((await selectCoverageState(db, key))?.state !== "computing") return;
  await closeCoverage(db, key, { state: "failed", failure: OUR_SIDE });
}
