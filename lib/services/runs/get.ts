import { selectChannelKey } from "@/db/queries/channel-keys";
import { selectDecisionsOfProgramme } from "@/db/queries/decisions";
import { selectUser } from "@/db/queries/people";
import { selectLineage } from "@/db/queries/programme-overview";
import { selectRevision } from "@/db/queries/revisions";
import {
  type RunAnalysisRow,
  selectCitingRecords,
  selectComparisonsWithRevision,
  selectRunAnalyses,
} from "@/db/queries/run-analyses";
import type { RunRow } from "@/db/queries/runs";
import { canBringBack } from "@/lib/policy/bring-back";
import { can } from "@/lib/policy/can";
import { isReaderOnly, RELEASED_STATES, RELEASING_KINDS } from "@/lib/policy/released";
import type { Ctx } from "@/lib/services/ctx";
import { loadProgramme } from "@/lib/services/programmes/load";
import { noRevision } from "@/lib/services/revisions/load";
import { loadRoadDay } from "@/lib/services/road-days/load";
import { hasOtherTesterOrLead } from "@/lib/services/runs/bring-back";
import { loadRun } from "@/lib/services/runs/load";
import { nextStep } from "@/lib/services/runs/next-step";
import { citedSentence } from "@/lib/services/runs/refuse-cited";

/** Why an act is off for this person and this run; null = it may be done. */
export interface RunActs {
  setAside: string | null;
  bringBack: string | null;
  editNote: string | null;
  download: string | null;
  chooseColumns: string | null;
}

async function actsOn(ctx: Ctx, run: RunRow, cited: string | null): Promise<RunActs> {
  const own = { ownerId: run.testerId };
  const reason = (verdict: ReturnType<typeof can>) => (verdict.ok ? null : verdict.reason);
  const otherActive = run.setAsideBy === ctx.userId && (await hasOtherTesterOrLead(ctx));
  return {
    setAside: reason(can(ctx, "run.set_aside", own)) ?? cited,
    bringBack: reason(canBringBack(ctx, { setAsideBy: run.setAsideBy, otherActive })) ?? cited,
    editNote: reason(can(ctx, "run.edit", own)) ?? cited,
    download: reason(can(ctx, "run.download")),
    chooseColumns: reason(can(ctx, "channel_key.save")) ?? cited,
  };
}

/** What the newest verdict of a run rests on and says. */
function verdictOf(analysis: RunAnalysisRow | undefined) {
  if (!analysis) return null;
  const { result, traces, sheetVersion, analysisVersion, inputSha256, createdAt } = analysis;
  return { result, traces, sheetVersion, analysisVersion, inputSha256, at: createdAt };
}

type Citing = Awaited<ReturnType<typeof selectCitingRecords>>;
type Compared = Awaited<ReturnType<typeof selectComparisonsWithRevision>>;

/** For a reader: without records that released nothing, and without comparisons that have an unreleased side. */
async function releasedOnly(ctx: Ctx, programmeId: string, all: { citing: Citing; comparisons: Compared }) {
  if (!isReaderOnly(ctx)) return all;
  const { workspaceId, db } = ctx;
  const decisions = await selectDecisionsOfProgramme(db, { workspaceId, programmeId });
  const lineage = await selectLineage(db, { workspaceId, programmeIds: [programmeId] });
  const records = new Set(decisions.filter((row) => RELEASING_KINDS.has(row.kind)).map((row) => row.id));
  const released = new Set(lineage.filter((row) => RELEASED_STATES.has(row.state)).map((row) => row.number));
  return {
    citing: all.citing.filter((row) => records.has(row.decisionId)),
    comparisons: all.comparisons.filter(
      (row) => row.a !== row.b && released.has(row.a) && released.has(row.b),
    ),
  };
}

/**
 * Everything the run page shows.
 * @throws NotFoundError for another workspace's; ForbiddenError for an unshared reader
 */
export async function getRun(ctx: Ctx, runId: string) {
  const run = await loadRun(ctx, runId);
  const { workspaceId, db } = ctx;
  const { revisionId } = run;
  const { programme, sheet } = await loadProgramme(ctx, run.programmeId);
  const [roadDay, revision, analyses, allCiting, allCompared, tester, setAsideBy, channelKey] =
    await Promise.all([
      loadRoadDay(ctx, run.roadDayId),
      selectRevision(db, { workspaceId, revisionId }),
      selectRunAnalyses(db, { workspaceId, runId }),
      selectCitingRecords(db, { workspaceId, runIds: [runId] }),
      selectComparisonsWithRevision(db, { workspaceId, revisionId }),
      selectUser(db, { userId: run.testerId }),
      run.setAsideBy ? selectUser(db, { userId: run.setAsideBy }) : null,
      run.channelKeyId ? selectChannelKey(db, { workspaceId, channelKeyId: run.channelKeyId }) : null,
    ]);
  if (!revision) throw noRevision();
  const all = { citing: allCiting, comparisons: allCompared };
  const { citing, comparisons } = await releasedOnly(ctx, programme.id, all);
  const verdict = verdictOf(analyses[0]);
  const cited = citedSentence(`Run ${run.number}`, citing);
  return {
    run,
    programme: { id: programme.id, name: programme.name },
    revision: {
      id: revision.id,
      number: revision.number,
      title: revision.title,
      imageSha256: revision.imageSha256,
    },
    roadDay,
    testerName: tester?.name ?? "somebody",
    setAsideByName: setAsideBy?.name ?? null,
    channelKey: channelKey && { name: channelKey.name, version: channelKey.version },
    verdict,
    next: run.state === "refused" ? nextStep(verdict?.result.reasons[0]?.code) : null,
    newestSheetVersion: sheet.version,
    records: citing.map(({ recordNumber, decisionId }) => ({ recordNumber, decisionId })),
    cited,
    comparisons,
    acts: await actsOn(ctx, run, cited),
  };
}
export type RunView = Awaited<ReturnType<typeof getRun>>;
