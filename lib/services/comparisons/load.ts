import type { Queryable } from "@/db/client";
import {
  type ComparisonResultRow,
  type ComparisonRow,
  selectComparedRevisions,
  selectComparison,
  selectComparisonsOf,
  selectEarlierResult,
  selectResult,
} from "@/db/queries/comparisons";
import { isShared, selectProgramme } from "@/db/queries/programmes";
import type { ComparisonInput } from "@/db/schema/comparisons";
import { digestOf } from "@/lib/canonical-json";
import { NotFoundError } from "@/lib/errors";
import type { CampaignResult } from "@/lib/measure/types";
import { RELEASED_STATES } from "@/lib/policy/released";
import type { Action } from "@/lib/policy/rules";
import { sideConditions } from "@/lib/services/comparisons/conditions";
import { type CurrentInput, currentInput } from "@/lib/services/comparisons/current-input";
import { runLines } from "@/lib/services/comparisons/run-lines";
import type { ComparedSide, ComparisonState, ComparisonView } from "@/lib/services/comparisons/schema";
import { whatMoved } from "@/lib/services/comparisons/what-moved";
import { authorise, type Ctx } from "@/lib/services/ctx";

/** How a comparison stands: its newest result, and whether that still belongs to what counts now. */
export interface ComparisonStanding {
  comparison: ComparisonRow;
  current: CurrentInput;
  state: ComparisonState["state"];
  /** A result for the current input is on its way. */
  recomputing: boolean;
  failure: string | null;
  /** What moved since the result shown, one sentence each; only when stale. */
  moved: string[];
  /** Nothing but the analysis version moved. */
  versionOnly: boolean;
  /** The result shown; of an earlier input when stale. */
  shown: { inputSha256: string; input: ComparisonInput; result: CampaignResult; at: Date } | null;
}

const shownOf = (row: ComparisonResultRow | null): ComparisonStanding["shown"] =>
  row?.result
    ? { inputSha256: row.inputSha256, input: row.input, result: row.result, at: row.createdAt }
    : null;

/** Reads how a comparison stands at this moment; asks no policy. */
export async function comparisonStanding(
  db: Queryable,
  comparison: ComparisonRow,
): Promise<ComparisonStanding> {
  const current = await currentInput(db, comparison);
  const key = {
    workspaceId: comparison.workspaceId,
    comparisonId: comparison.id,
    inputSha256: current.inputSha256,
  };
  const now = await selectResult(db, key);
  const base = {
    comparison,
    current,
    moved: [],
    versionOnly: false,
    failure: null,
    recomputing: false,
  };
  if (now?.state === "ready") return { ...base, state: "ready", shown: shownOf(now) };
  const earlier = shownOf(await selectEarlierResult(db, key));
  if (now?.state === "failed") return { ...base, state: "failed", failure: now.failure, shown: null };
  if (!earlier) return { ...base, state: "waiting", recomputing: now !== null, shown: null };
  const moved = whatMoved(earlier.input, current.input, current.runs);
  const { analysisVersion } = earlier.input;
  const versionOnly = digestOf({ ...current.input, analysisVersion }) === earlier.inputSha256;
  const recomputing = now?.state === "waiting";
  return { ...base, state: "stale", recomputing, moved, versionOnly, shown: earlier };
}

async function readComparison(ctx: Ctx, comparisonId: string, action: Action) {
  const { db, workspaceId } = ctx;
  const comparison = await selectComparison(db, { workspaceId, comparisonId });
  const missing = () => new NotFoundError("no_comparison", "There is no such comparison in this workspace.");
  if (!comparison) throw missing();
  const { programmeId, revisionAId, revisionBId } = comparison;
  const [programme, revisions, shared] = await Promise.all([
    selectProgramme(db, { workspaceId, programmeId }),
    selectComparedRevisions(db, { workspaceId, revisionIds: [revisionAId, revisionBId] }),
    isShared(db, { workspaceId, programmeId, userId: ctx.userId }),
  ]);
  const a = revisions.find((row) => row.id === revisionAId);
  const b = revisions.find((row) => row.id === revisionBId);
  if (!programme || !a || !b) throw missing();
  const isNullTest = comparison.nullTestRoadDayId !== null;
  const released = RELEASED_STATES.has(a.state) && RELEASED_STATES.has(b.state);
  authorise(ctx, action, { granted: shared && released && !isNullTest });
  return { comparison, programme, a, b };
}

/**
 * A comparison as its page shows it.
 * @throws NotFoundError for another workspace's; ForbiddenError
 */
export async function getComparison(
  ctx: Ctx,
  comparisonId: string,
  action: "comparison.view" | "comparison.export" = "comparison.view",
): Promise<ComparisonView> {
  const { comparison, programme, a, b } = await readComparison(ctx, comparisonId, action);
  const standing = await comparisonStanding(ctx.db, comparison);
  const siblings = await selectComparisonsOf(ctx.db, comparison);
  const { current, shown } = standing;
  const side = (row: typeof a): ComparedSide => ({
    id: row.id,
    number: row.number,
    title: row.title,
    state: row.state,
    asFound: row.asFound,
    stands: row.id === programme.standingRevisionId,
    imageSha256: row.imageSha256,
  });
  return {
    id: comparison.id,
    nullTestRoadDayId: comparison.nullTestRoadDayId,
    programme: {
      id: programme.id,
      name: programme.name,
      idleRpm: current.sheet.idleRpm,
      redlineRpm: current.sheet.redlineRpm,
    },
    a: side(a),
    b: side(b),
    settings: comparison.settings,
    state: standing.state,
    recomputing: standing.recomputing,
    inputSha256: current.inputSha256,
    failure: standing.failure,
    moved: standing.moved,
    versionOnly: standing.versionOnly,
    result: shown?.result ?? null,
    computedAt: shown?.at.toISOString() ?? null,
    basis: shown && {
      inputSha256: shown.inputSha256,
      sheetVersion: shown.input.sheetVersion,
      analysisVersion: shown.input.analysisVersion,
    },
    runs: runLines(current, shown?.result ?? null),
    conditions: { A: sideConditions(current, "A"), B: sideConditions(current, "B") },
    others: siblings
      .filter((row) => row.id !== comparison.id)
      .map((row) => ({ id: row.id, settings: row.settings })),
  };
}

/** How far the computation is: what the page polls while it waits. @throws as getComparison */
export async function getComparisonState(ctx: Ctx, comparisonId: string): Promise<ComparisonState> {
  const { comparison } = await readComparison(ctx, comparisonId, "comparison.view");
  const { state, recomputing, current } = await comparisonStanding(ctx.db, comparison);
  return { state, recomputing, inputSha256: current.inputSha256 };
}
