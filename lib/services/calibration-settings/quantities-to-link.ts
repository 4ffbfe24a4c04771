import { selectComparableRevisions } from "@/db/queries/change-sets";
import { getRevisionChanges } from "@/lib/services/change-sets/get";
import type { ShownQuantity, ShownRevision } from "@/lib/services/change-sets/schema";
import type { Ctx } from "@/lib/services/ctx";

/**
 * Quantities along the axes of what a revision changes, with the links in use and what may be meant; of the newest revision where
 * none is named, against what it is usually compared with unless another is named. Null where the programme has none.
 * @throws NotFoundError for another programme's; ForbiddenError
 */
export async function quantitiesToLink(
  ctx: Ctx,
  { programmeId, revisionId, againstId }: { programmeId: string; revisionId?: string; againstId?: string },
): Promise<{ revision: ShownRevision; quantities: ShownQuantity[] } | null> {
  const { db, workspaceId } = ctx;
  const rows = await selectComparableRevisions(db, { workspaceId, programmeId });
  const row = revisionId === undefined ? rows[0] : rows.find(({ id }) => id === revisionId);
  if (!row) return null;
  const { revision, inputQuantities } = await getRevisionChanges(ctx, row.id, againstId);
  return { revision, quantities: inputQuantities };
}
