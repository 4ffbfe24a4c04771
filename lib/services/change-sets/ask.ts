import type { z } from "zod";
import { selectChangeSetHead } from "@/db/queries/change-sets";
import { loadSides } from "@/lib/services/change-sets/pair";
import { openPair } from "@/lib/services/change-sets/refresh";
import { openCoverageOf } from "@/lib/services/change-sets/refresh-coverage";
import { askForChangeSetSchema } from "@/lib/services/change-sets/schema";
import { type Ctx, withTransaction } from "@/lib/services/ctx";

/**
 * Has the changes from one revision to another worked out, or their coverage where the changes are there; what failed is tried
 * again. Nothing happens where all of it is there already.
 * @throws ForbiddenError; NotFoundError
 */
export async function askForChangeSet(
  ctx: Ctx,
  input: z.input<typeof askForChangeSetSchema>,
): Promise<{ changeSetId: string }> {
  const asked = askForChangeSetSchema.parse(input);
  const sides = await loadSides(ctx, asked, "change_set.ask");
  const { workspaceId } = ctx;
  return await withTransaction(ctx, async (tx, inner) => {
    const changeSetId = await openPair(tx, inner, sides);
    const row = await selectChangeSetHead(tx, { workspaceId, changeSetId });
    if (row?.state === "ready" && row.readBy !== "none") await openCoverageOf(tx, inner, row);
    return { changeSetId };
  });
}
