import type { Transaction } from "@/db/client";
import {
  type ComparisonRow,
  insertComparison,
  openResult,
  selectComparedRevisions,
  selectComparisonsOf,
  selectResult,
} from "@/db/queries/comparisons";
import { digestOf } from "@/lib/canonical-json";
import { InvalidInputError, NotFoundError } from "@/lib/errors";
import { enqueueJob } from "@/lib/jobs/enqueue";
import { currentInput } from "@/lib/services/comparisons/current-input";
import { type ComparisonSettings, toCampaignSettings } from "@/lib/services/comparisons/schema";
import type { Ctx } from "@/lib/services/ctx";
import { appendLedger } from "@/lib/services/ledger/append";

/** Marks the current input as waiting and has it computed, unless its result is there already. */
export async function enqueueCompute(tx: Transaction, comparison: ComparisonRow): Promise<void> {
  const { workspaceId, id: comparisonId } = comparison;
  const { input, inputSha256 } = await currentInput(tx, comparison);
  const known = await selectResult(tx, { workspaceId, comparisonId, inputSha256 });
  if (known?.state === "ready") return;
  const { analysisVersion, sheetVersion } = input;
  await openResult(tx, { workspaceId, comparisonId, inputSha256, analysisVersion, sheetVersion, input });
  await enqueueJob(tx, { name: "compute-comparison", data: { workspaceId, comparisonId } });
}

async function loadSides(tx: Transaction, ctx: Ctx, revisionAId: string, revisionBId: string) {
  const { workspaceId } = ctx;
  const sides = await selectComparedRevisions(tx, { workspaceId, revisionIds: [revisionAId, revisionBId] });
  const a = sides.find((side) => side.id === revisionAId);
  const b = sides.find((side) => side.id === revisionBId);
  if (!a || !b)
    throw new NotFoundError("no_revision", "One of the two revisions does not exist in this workspace.");
  if (a.programmeId !== b.programmeId)
    throw new InvalidInputError(
      "other_programme",
      "The two revisions belong to different programmes. Choose two of one programme.",
    );
  return { a, b };
}

/**
 * Finds or makes the comparison of a question, in the caller's transaction; the same question has one comparison.
 * @param question both sides, the road day where it is a null test, and the settings
 * @throws NotFoundError, InvalidInputError `other_programme`
 */
export async function findOrOpen(
  tx: Transaction,
  ctx: Ctx,
  question: {
    revisionAId: string;
    revisionBId: string;
    nullTestRoadDayId: string | null;
    settings: ComparisonSettings;
  },
): Promise<{ comparison: ComparisonRow; created: boolean }> {
  const { workspaceId } = ctx;
  const { revisionAId, revisionBId, nullTestRoadDayId } = question;
  const { a, b } = await loadSides(tx, ctx, revisionAId, revisionBId);
  const { programmeId } = a;
  const settings = toCampaignSettings(question.settings);
  const settingsSha256 = digestOf(settings);
  const sides = { workspaceId, revisionAId, revisionBId, nullTestRoadDayId };
  const values = { ...sides, programmeId, settings, settingsSha256, createdBy: ctx.userId };
  const created = await insertComparison(tx, values);
  const rows = created ? [created] : await selectComparisonsOf(tx, sides);
  const comparison = rows.find((row) => row.settingsSha256 === settingsSha256);
  if (!comparison) throw new NotFoundError("no_comparison", "The comparison could not be opened. Try again.");
  if (created) {
    await appendLedger(tx, ctx, {
      event: "compare.saved",
      subjectType: "comparison",
      subjectId: comparison.id,
      programmeId,
      data: {
        a: { id: a.id, number: a.number },
        b: { id: b.id, number: b.number },
        ...(nullTestRoadDayId && { nullTestRoadDayId }),
        settings,
      },
    });
  }
  return { comparison, created: created !== null };
}
