import type { Transaction } from "@/db/client";
import {
  type ComparisonRow,
  insertComparison,
  openResult,
  selectComparedRevisions,
  selectComparison,
  selectComparisonsOf,
  selectResult,
} from "@/db/queries/comparisons";
import { digestOf } from "@/lib/canonical-json";
import { InvalidInputError, NotFoundError } from "@/lib/errors";
import { enqueueJob } from "@/lib/jobs/enqueue";
import { currentInput } from "@/lib/services/comparisons/current-input";
import {
  changeSettingsInput,
  type OpenComparisonInput,
  openComparisonInput,
  toCampaignSettings,
} from "@/lib/services/comparisons/schema";
import { authorise, type Ctx, withTransaction } from "@/lib/services/ctx";
import { appendLedger } from "@/lib/services/ledger/append";

/** Marks the current input as waiting and has it computed, unless its result is there already. */
async function enqueueCompute(tx: Transaction, comparison: ComparisonRow): Promise<void> {
  const { workspaceId, id: comparisonId } = comparison;
  const { input, inputSha256 } = await currentInput(tx, comparison);
  const known = await selectResult(tx, { workspaceId, comparisonId, inputSha256 });
  if (known?.state === "ready") return;
  const { analysisVersion, sheetVersion } = input;
  await openResult(tx, { workspaceId, comparisonId, inputSha256, analysisVersion, sheetVersion, input });
  await enqueueJob(tx, { name: "compute-comparison", data: { workspaceId, comparisonId } });
}

/**
 * Opens the comparison of two revisions of one programme; the same question has one comparison.
 * Other settings are another comparison, so that bases never mix. The result is computed by the worker.
 * @returns the comparison's id, and whether it is a new one
 * @throws ForbiddenError, NotFoundError, InvalidInputError `other_programme`
 */
export async function openComparison(
  ctx: Ctx,
  raw: OpenComparisonInput,
): Promise<{ comparisonId: string; created: boolean }> {
  authorise(ctx, "comparison.create");
  const { revisionAId, revisionBId, settings } = openComparisonInput.parse(raw);
  const { workspaceId } = ctx;
  return await withTransaction(ctx, async (tx, inner) => {
    const revisionIds = [revisionAId, revisionBId];
    const sides = await selectComparedRevisions(tx, { workspaceId, revisionIds });
    const a = sides.find((side) => side.id === revisionAId);
    const b = sides.find((side) => side.id === revisionBId);
    if (!a || !b)
      throw new NotFoundError("no_revision", "One of the two revisions does not exist in this workspace.");
    if (a.programmeId !== b.programmeId)
      throw new InvalidInputError(
        "other_programme",
        "The two revisions belong to different programmes. Choose two of one programme.",
      );
    const { programmeId } = a;
    const wanted = toCampaignSettings(settings);
    const settingsSha256 = digestOf(wanted);
    const created = await insertComparison(tx, {
      workspaceId,
      programmeId,
      revisionAId,
      revisionBId,
      settings: wanted,
      settingsSha256,
      createdBy: ctx.userId,
    });
    const rows = created
      ? [created]
      : await selectComparisonsOf(tx, { workspaceId, revisionAId, revisionBId });
    const comparison = rows.find((row) => row.settingsSha256 === settingsSha256);
    if (!comparison)
      throw new NotFoundError("no_comparison", "The comparison could not be opened. Try again.");
    if (created) {
      await appendLedger(tx, inner, {
        event: "compare.saved",
        subjectType: "comparison",
        subjectId: comparison.id,
        programmeId,
        data: { a: { id: a.id, number: a.number }, b: { id: b.id, number: b.number }, settings: wanted },
      });
    }
    await enqueueCompute(tx, comparison);
    return { comparisonId: comparison.id, created: created !== null };
  });
}

async function loadComparison(tx: Transaction, ctx: Ctx, comparisonId: string): Promise<ComparisonRow> {
  const row = await selectComparison(tx, { workspaceId: ctx.workspaceId, comparisonId });
  if (!row) throw new NotFoundError("no_comparison", "There is no such comparison in this workspace.");
  return row;
}

/**
 * The same two sides under other settings: a comparison of its own beside this one.
 * @throws ForbiddenError, NotFoundError
 */
export async function changeSettings(
  ctx: Ctx,
  raw: { comparisonId: string; factor: string; rpmStep: number },
): Promise<{ comparisonId: string; created: boolean }> {
  authorise(ctx, "comparison.settings");
  const { comparisonId, factor, rpmStep } = changeSettingsInput.parse(raw);
  const row = await withTransaction(ctx, (tx, inner) => loadComparison(tx, inner, comparisonId));
  const { revisionAId, revisionBId } = row;
  return await openComparison(ctx, { revisionAId, revisionBId, settings: { factor, rpmStep } });
}

/**
 * Computes the comparison anew for what counts now; nothing happens when that result is there.
 * @throws ForbiddenError, NotFoundError
 */
export async function recomputeComparison(
  ctx: Ctx,
  { comparisonId }: { comparisonId: string },
): Promise<void> {
  authorise(ctx, "comparison.settings");
  await withTransaction(ctx, async (tx, inner) => {
    await enqueueCompute(tx, await loadComparison(tx, inner, comparisonId));
  });
}
