import { selectRunsOfRoadDay } from "@/db/queries/runs";
import { findingsOf } from "@/lib/measure/judge/consequence";
import type { RunResult } from "@/lib/measure/types";
import { authorise, type Ctx } from "@/lib/services/ctx";
import { loadRoadDay } from "@/lib/services/road-days/load";
import { nextStep } from "@/lib/services/runs/next-step";
import type { RoadDayRuns, RunLine } from "@/lib/services/runs/schema";

type Row = Awaited<ReturnType<typeof selectRunsOfRoadDay>>[number];

/** The worst of what masks or warns, in its first sentence. */
function worstFinding(result: RunResult): RunLine["finding"] {
  for (const { consequence, message } of findingsOf(result)) {
    if (consequence === "refused") continue;
    return { consequence, sentence: message.split(/(?<=[.;:]) (?=\p{L})/u)[0].replace(/[;:]$/, ".") };
  }
  return null;
}

function lineOf({ run, revisionNumber, testerName, result }: Row): RunLine {
  const setAside = run.setAsideAt !== null;
  const reasons = run.state === "refused" ? (result?.reasons ?? []) : [];
  const peak = run.state === "usable" ? result?.peak : null;
  const why = setAside ? [run.setAsideReason ?? ""] : reasons.map((reason) => reason.message);
  return {
    id: run.id,
    number: run.number,
    driveOrder: run.driveOrder,
    leg: run.leg,
    kind: run.kind,
    gear: run.gear,
    revisionId: run.revisionId,
    revisionNumber,
    letter: run.letter,
    testerName: testerName ?? "somebody",
    fileName: run.logFileName,
    verdict: run.state,
    setAside,
    why,
    next: run.state === "refused" && !setAside ? nextStep(reasons[0]?.code) : null,
    notes: result?.notes.length ?? 0,
    finding: why.length === 0 && result ? worstFinding(result) : null,
    peakKw: peak?.engine_kw ?? null,
    peakUncertaintyKw: peak?.uncertainty_kw ?? null,
  };
}

/**
 * Runs of a road day in the order driven with the verdict of each, as the page polls them.
 * @throws NotFoundError; ForbiddenError for readers: a road day also holds runs of what is not released
 */
export async function listRoadDayRuns(ctx: Ctx, roadDayId: string): Promise<RoadDayRuns> {
  authorise(ctx, "run.view");
  await loadRoadDay(ctx, roadDayId);
  const rows = await selectRunsOfRoadDay(ctx.db, { workspaceId: ctx.workspaceId, roadDayId });
  const runs = rows.map(lineOf);
  const waiting = runs.filter((run) => run.verdict === "waiting" && !run.setAside).length;
  return { runs, waiting };
}
