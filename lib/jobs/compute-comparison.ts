import { closeResult, openResult, selectComparison, selectResult } from "@/db/queries/comparisons";
import { type FileRefusedError, TwinpassError, UnavailableError } from "@/lib/errors";
import type { System } from "@/lib/jobs/system";
import { logger } from "@/lib/logger";
import type { LogTable } from "@/lib/logs/types";
import { analyseCampaign } from "@/lib/measure/analyse-campaign";
import { buildCampaign, campaignRunId } from "@/lib/services/comparisons/build-campaign";
import { type CurrentInput, currentInput } from "@/lib/services/comparisons/current-input";
import { readStoredLog } from "@/lib/services/runs/read-stored-log";

interface ComparisonJob {
  workspaceId: string;
  comparisonId: string;
}

const OUR_SIDE =
  "The computation failed on our side. The runs are kept as they are; press Recompute, and if it fails again tell whoever runs this installation.";

/** Logs of the runs that count, each read or refused; bytes are checked against their fingerprints on the way. */
async function readLogs(
  system: System,
  workspaceId: string,
  current: CurrentInput,
): Promise<Map<string, LogTable | FileRefusedError>> {
  const logs = new Map<string, LogTable | FileRefusedError>();
  const { drive } = current.sheet;
  for (const run of current.runs) {
    if (!run.counts) continue;
    const log = await readStoredLog(
      { store: system.store, workspaceId },
      { sha256: run.logSha256, sizeBytes: run.logBytes },
      { fileName: run.logFileName, drive, key: run.channelKey ?? undefined },
    ).catch((error) => {
      throw new UnavailableError(
        "log_unavailable",
        `The log of run ${run.number} can't be had from the store: ${error instanceof TwinpassError ? error.message : "it does not answer."}`,
      );
    });
    logs.set(campaignRunId(run), log);
  }
  return logs;
}

/** What is missing before anything can be computed; null when both sides have a run. */
function whatIsMissing(current: CurrentInput): string | null {
  const empty = (["A", "B"] as const).filter(
    (side) => !current.runs.some((run) => run.side === side && run.counts),
  );
  if (empty.length === 0) return null;
  const sides = empty.length === 2 ? "Neither side has a run" : `Side ${empty[0]} has no run`;
  return `${sides} that counts yet. Attach runs; then it is computed by itself.`;
}

/**
 * Computes a comparison for the runs that count now and stores the result under the digest of its input. May run any number
 * of times: a result that is there is left alone. A comparison that was never opened is nobody's work.
 * @throws what kept it from being computed on our side, after having noted it, so that the queue tries again
 */
export async function computeComparison(
  system: System,
  { workspaceId, comparisonId }: ComparisonJob,
): Promise<void> {
  const { db } = system;
  const comparison = await selectComparison(db, { workspaceId, comparisonId });
  if (!comparison) return;
  const current = await currentInput(db, comparison);
  const { input, inputSha256 } = current;
  const key = { workspaceId, comparisonId, inputSha256 };
  if ((await selectResult(db, key))?.state === "ready") return;
  const { analysisVersion, sheetVersion } = input;
  await openResult(db, { ...key, analysisVersion, sheetVersion, input });
  const missing = whatIsMissing(current);
  if (missing) return await closeResult(db, key, { state: "failed", failure: missing });
  try {
    const logs = await readLogs(system, workspaceId, current);
    await closeResult(db, key, { state: "ready", result: analyseCampaign(buildCampaign(current), logs) });
  } catch (error) {
    logger().error({ event: "comparison.failed", workspaceId, comparisonId, err: error });
    const failure = error instanceof UnavailableError ? error.message : OUR_SIDE;
    await closeResult(db, key, { state: "failed", failure });
    throw error;
  }
}

/** The last try failed too, perhaps before anything could be noted: whoever waits is told. */
export async function giveUpComputing(
  { db }: System,
  { workspaceId, comparisonId }: ComparisonJob,
): Promise<void> {
  const comparison = await selectComparison(db, { workspaceId, comparisonId });
  if (!comparison) return;
  const { inputSha256 } = await currentInput(db, comparison);
  const key = { workspaceId, comparisonId, inputSha256 };
  if ((await selectResult(db, key))?.state !== "waiting") return;
  await closeResult(db, key, { state: "failed", failure: OUR_SIDE });
}
