import {
  selectComparisonsOfProgramme,
  selectOlderDecisions,
  selectOlderInputs,
} from "@/db/queries/analysis-versions";
import { type ComparisonRow, selectComparedRevisions, selectResult } from "@/db/queries/comparisons";
import { digestOf } from "@/lib/canonical-json";
import { resultMoves } from "@/lib/compare/result-moves";
import { evaluateGates } from "@/lib/gates/evaluate-gates";
import { ANALYSIS_VERSION } from "@/lib/measure/analysis-version";
import type { CampaignResult } from "@/lib/measure/types";
import type { ComparisonMoves, GateMove } from "@/lib/services/analysis/schema";
import { type CurrentInput, currentInput } from "@/lib/services/comparisons/current-input";
import { sideLabels } from "@/lib/services/comparisons/schema";
import { STANDARD_SHA256 } from "@/lib/services/comparisons/standard-digest";
import { authorise, type Ctx } from "@/lib/services/ctx";
import { gateEvidence } from "@/lib/services/gates/evidence";
import { type LoadedProgramme, loadProgramme } from "@/lib/services/programmes/load";

export interface AnalysisMoves {
  programme: { id: string; name: string };
  version: string;
  comparisons: ComparisonMoves[];
  /** Comparisons that have only ever been computed under this version. */
  untouched: number;
  /** Decisions that rest on an older version: their records stay sealed as they are. */
  decisions: (Omit<Awaited<ReturnType<typeof selectOlderDecisions>>[number], "revisionId"> & {
    stands: boolean;
  })[];
}

/** Digest of an input with its version left out: equal = only the version differs. */
const digestWithoutVersion = (input: CurrentInput["input"]) => digestOf({ ...input, analysisVersion: "" });

function gateMoves(
  { plan, sheet }: LoadedProgramme,
  current: CurrentInput,
  before: CampaignResult,
  after: CampaignResult,
): GateMove[] | null {
  if (!plan) return null;
  const judge = (result: CampaignResult) =>
    evaluateGates(plan.plan, gateEvidence({ current, shown: { result } }, sheet.figures, null));
  const now = new Map(judge(after).map((gate) => [gate.id, gate]));
  return judge(before).flatMap(({ id, title, state }) => {
    const found = now.get(id);
    return found && found.state !== state ? [{ id, title, before: state, after: found.state }] : [];
  });
}

async function movesOf(
  ctx: Ctx,
  loaded: LoadedProgramme,
  comparison: ComparisonRow,
): Promise<ComparisonMoves | null> {
  const { db, workspaceId } = ctx;
  const { id: comparisonId, revisionAId, revisionBId, nullTestRoadDayId, settings } = comparison;
  const key = { workspaceId, comparisonId };
  const older = await selectOlderInputs(db, { ...key, analysisVersion: ANALYSIS_VERSION });
  const newest = older[0];
  if (!newest) return null;
  const current = await currentInput(db, comparison);
  const wanted = digestWithoutVersion(current.input);
  const same = older.find((row) => digestWithoutVersion(row.input) === wanted);
  const sides = await selectComparedRevisions(db, { workspaceId, revisionIds: [revisionAId, revisionBId] });
  const numbered = (id: string) => ({ number: sides.find((side) => side.id === id)?.number ?? 0 });
  const base = {
    comparisonId,
    labels: sideLabels({ a: numbered(revisionAId), b: numbered(revisionBId), nullTestRoadDayId }),
    settings,
    isNullTest: nullTestRoadDayId !== null,
    oldVersion: (same ?? newest).input.analysisVersion,
    moves: null,
    gates: null,
  };
  if (!same) return { ...base, state: "other input" };
  const before = (await selectResult(db, { ...key, inputSha256: same.inputSha256 }))?.result;
  const after = (await selectResult(db, { ...key, inputSha256: current.inputSha256 }))?.result;
  if (!before || !after) return { ...base, state: "being computed" };
  const feedsGates = !base.isNullTest && comparison.settingsSha256 === STANDARD_SHA256;
  return {
    ...base,
    state: "told",
    moves: resultMoves(before, after),
    gates: feedsGates ? gateMoves(loaded, current, before, after) : null,
  };
}

/**
 * What the present analysis version moves in a programme, comparison by comparison, against the newest result of an older
 * version that rests on the same runs, settings and vehicle sheet.
 * @throws NotFoundError for another workspace's; ForbiddenError
 */
export async function getAnalysisMoves(ctx: Ctx, programmeId: string): Promise<AnalysisMoves> {
  authorise(ctx, "analysis.view");
  const loaded = await loadProgramme(ctx, programmeId);
  const { programme } = loaded;
  const place = { workspaceId: ctx.workspaceId, programmeId };
  const rows = await selectComparisonsOfProgramme(ctx.db, place);
  const moved: ComparisonMoves[] = [];
  for (const row of rows) {
    const found = await movesOf(ctx, loaded, row);
    if (found) moved.push(found);
  }
  const decisions = await selectOlderDecisions(ctx.db, { ...place, analysisVersion: ANALYSIS_VERSION });
  return {
    programme: { id: programme.id, name: programme.name },
    version: ANALYSIS_VERSION,
    comparisons: moved,
    untouched: rows.length - moved.length,
    decisions: decisions.map(({ revisionId, ...row }) => ({
      ...row,
      stands: row.kind === "promote" && revisionId === programme.standingRevisionId,
    })),
  };
}
