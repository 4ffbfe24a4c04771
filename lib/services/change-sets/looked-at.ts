import { selectChangeDigests } from "@/db/queries/change-sets";
import { deleteLookedAt, insertLookedAt } from "@/db/queries/looked-at";
import type { ChangeSet } from "@/lib/calibration/changes/types";
import { ConflictError, NotFoundError } from "@/lib/errors";
import { type SetLookedAt, setLookedAtSchema } from "@/lib/services/change-sets/schema";
import { authorise, type Ctx, withTransaction } from "@/lib/services/ctx";

/** Digests of everything in a change set that can be looked at. */
export function digestsOf({ characteristics, uncovered }: ChangeSet): Set<string> {
  return new Set([...characteristics, ...uncovered].map(({ digest }) => digest));
}

/**
 * Marks changes as looked at by this person, or takes the marks back. A mark names the content of a change, so it is gone by
 * itself when the thing changes. It concerns nobody else and decides nothing, so the ledger does not note it.
 * @throws ForbiddenError; NotFoundError; ConflictError `changes_moved` when a digest is none of this change set's
 */
export async function setLookedAt(ctx: Ctx, input: SetLookedAt): Promise<void> {
  authorise(ctx, "change_set.look_at");
  const { revisionId, changeSetId, digests, looked } = setLookedAtSchema.parse(input);
  const { workspaceId, userId } = ctx;
  await withTransaction(ctx, async (tx) => {
    const row = await selectChangeDigests(tx, { workspaceId, changeSetId });
    if (row?.revisionBId !== revisionId)
      throw new NotFoundError("no_change_set", "There is no such change set.");
    const known = new Set(row.digests);
    if (!digests.every((digest) => known.has(digest)))
      throw new ConflictError("changes_moved", "The changes are other ones than you saw. Reload the page.");
    const own = { workspaceId, userId, revisionId };
    await (looked ? insertLookedAt(tx, own, digests) : deleteLookedAt(tx, own, digests));
  });
}
