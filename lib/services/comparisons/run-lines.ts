import type { CampaignResult, RunResult } from "@/lib/measure/types";
import { campaignRunId } from "@/lib/services/comparisons/build-campaign";
import type { CurrentInput } from "@/lib/services/comparisons/current-input";
import type { RunLine } from "@/lib/services/comparisons/schema";

function outcomeOf(
  run: CurrentInput["runs"][number],
  judged: RunResult | undefined,
): Pick<RunLine, "outcome" | "why"> {
  if (run.setAsideAt) {
    const why = [(run.setAsideReason ?? "No reason was kept").replace(/\.?$/, ".")];
    if (run.resultWasVisible) why.push("Its result could be seen then.");
    return { outcome: "set aside", why };
  }
  if (!run.counts) {
    const other = run.side === "A" ? "B" : "A";
    return {
      outcome: "left out",
      why: [`Side ${other} has no run on this road day, so the day can't be told from the change.`],
    };
  }
  if (!judged) return { outcome: "not computed yet", why: [] };
  if (judged.usable) return { outcome: "used", why: [] };
  return { outcome: "refused", why: judged.reasons.map((reason) => reason.message) };
}

/** Every run of both sides in the order driven, also those that do not count. */
export function runLines(current: Pick<CurrentInput, "runs">, result: CampaignResult | null): RunLine[] {
  const judged = new Map(result?.runs.map((run) => [run.id, run]));
  return current.runs.map((run) => {
    const found = judged.get(campaignRunId(run));
    return {
      runId: run.id,
      number: run.number,
      side: run.side,
      kind: run.kind,
      leg: run.leg,
      order: run.order,
      gear: run.gear,
      roadDayId: run.roadDayId,
      day: run.day,
      testerName: run.testerName,
      logSha256: run.logSha256,
      ...outcomeOf(run, found),
      notes: found?.notes.map((note) => note.message) ?? [],
      peakKw: found?.peak?.engine_kw ?? null,
      peakUncertaintyKw: found?.peak?.uncertainty_kw ?? null,
    };
  });
}
