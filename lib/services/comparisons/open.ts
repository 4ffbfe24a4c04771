import type { Transaction } from "@/db/client";
import { type ComparisonRow, selectComparison } from "@/db/queries/comparisons";
import { NotFoundError } from "@/lib/errors";
import { enqueueCompute, findOrOpen } from "@/lib/services/comparisons/question";
import {
  changeSettingsInput,
  type OpenComparisonInput,
  openComparisonInput,
} from "@/lib/services/comparisons/schema";
import { authorise, type Ctx, withTransaction } from "@/lib/services/ctx";

async function openAndCompute(tx: Transaction, ctx: Ctx, question: Parameters<typeof findOrOpen>[2]) {
  const { comparison, created } = await findOrOpen(tx, ctx, question);
  await enqueueCompute(tx, comparison);
  return { comparisonId: comparison.id, created };
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
  const question = { ...openComparisonInput.parse(raw), nullTestRoadDayId: null };
  return await withTransaction(ctx, (tx, inner) => openAndCompute(tx, inner, question));
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
  return await withTransaction(ctx, async (tx, inner) => {
    const { revisionAId, revisionBId, nullTestRoadDayId } = await loadComparison(tx, inner, comparisonId);
    const question = { revisionAId, revisionBId, nullTestRoadDayId, settings: { factor, rpmStep } };
    return await openAndCompute(tx, inner, question);
  });
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
