import type { EvidenceRun } from "@/db/schema/decisions";
import { digestOf } from "@/lib/canonical-json";
import { campaignRunId } from "@/lib/services/comparisons/build-campaign";
import type { ComparisonStanding } from "@/lib/services/comparisons/load";
import { runLines } from "@/lib/services/comparisons/run-lines";
import type { ComparedEvidence } from "@/lib/services/decisions/record";
import type { GateDesk } from "@/lib/services/gates/status";

/** Every run of both sides as it counts now. */
function runsNow({ current, shown }: ComparisonStanding): EvidenceRun[] {
  return runLines(current, shown?.result ?? null).map((line) => ({
    runId: line.runId,
    number: line.number,
    logSha256: line.logSha256,
    side: line.side,
    usable: line.outcome === "used",
    testerName: line.testerName,
    leftOut: line.outcome === "used" ? null : `${line.outcome}: ${line.why.join(" ") || "no reason kept"}`,
  }));
}

/** The runs that an earlier result was computed from, as it found them. */
function runsThen(
  { current }: ComparisonStanding,
  { input, result }: NonNullable<ComparisonStanding["shown"]>,
): EvidenceRun[] {
  const testers = new Map(current.runs.map((run) => [run.id, run.testerName]));
  const judged = new Map(result.runs.map((run) => [run.id, run]));
  return input.runs.map(({ runId, number, logSha256, side }) => {
    const found = judged.get(campaignRunId({ number }));
    const why = found?.reasons.map((reason) => reason.message).join(" ");
    const usable = found?.usable ?? false;
    return {
      ...{ runId, number, logSha256, side, usable },
      testerName: testers.get(runId) ?? null,
      leftOut: usable ? null : `refused: ${why || "no reason kept"}`,
    };
  });
}

/** What is known of the changed values; undefined where no change set is there. */
function calibrationOf({ calibration }: GateDesk): ComparedEvidence["calibration"] {
  const changes = calibration?.evidence.fromStanding;
  if (!calibration?.changeSet || !changes) return undefined;
  const { changeSet, coverageSha256, touched } = calibration;
  return {
    changeSetId: changeSet.id,
    inputSha256: changeSet.inputSha256,
    resultSha256: changeSet.resultSha256,
    coverageSha256,
    readBy: changes.readBy,
    changedBytes: changes.changedBytes,
    changedCharacteristics: changes.characteristics.length,
    uncoveredBytes: changes.uncoveredBytes,
    touched: touched.map(({ mark, characteristics }) => ({
      name: mark.name,
      relevance: mark.relevance,
      characteristics,
    })),
    approval: null,
    secondLead: null,
  };
}

/** Freezes what the gates rest on: the result shown, with the runs that belong to it. */
export function evidenceOf(desk: GateDesk): ComparedEvidence {
  const { comparison, stale, planVersion, results } = desk;
  const calibration = calibrationOf(desk);
  const shown = comparison?.shown ?? null;
  return {
    comparisonId: comparison?.comparison.id ?? null,
    comparisonInputSha256: shown?.inputSha256 ?? null,
    resultSha256: shown ? digestOf(shown.result) : null,
    analysisVersion: shown?.input.analysisVersion ?? null,
    sheetVersion: shown?.input.sheetVersion ?? null,
    gatePlanVersion: planVersion,
    gates: results,
    ...(calibration && { calibration }),
    ...(stale && { stale }),
    runs: comparison ? (stale && shown ? runsThen(comparison, shown) : runsNow(comparison)) : [],
  };
}
