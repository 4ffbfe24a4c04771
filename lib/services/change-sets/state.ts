import { selectChangeSetHead } from "@/db/queries/change-sets";
import { NotFoundError } from "@/lib/errors";
import { coverageStateNow } from "@/lib/services/change-sets/coverage-now";
import { loadSides } from "@/lib/services/change-sets/pair";
import type { ChangeSetState } from "@/lib/services/change-sets/schema";
import type { Ctx } from "@/lib/services/ctx";

/** How far a change set and its coverage are: what a page polls while it waits. @throws NotFoundError; ForbiddenError as the page */
export async function getChangeSetState(ctx: Ctx, changeSetId: string): Promise<ChangeSetState> {
  const { db, workspaceId } = ctx;
  const row = await selectChangeSetHead(db, { workspaceId, changeSetId });
  if (!row) throw new NotFoundError("no_change_set", "There is no such change set.");
  const pair = { revisionId: row.revisionBId, againstId: row.revisionAId };
  await loadSides(ctx, pair, "revision.compare_images");
  if (row.state !== "ready") return { state: row.state, coverage: "not_asked" };
  return { state: "ready", coverage: await coverageStateNow(db, row) };
}
