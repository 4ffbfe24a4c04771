import { lockWorkspace } from "@/db/queries/members";
import { selectWorkspace, updateWorkspaceName } from "@/db/queries/workspaces";
import { authorise, type Ctx, withTransaction } from "@/lib/services/ctx";
import { appendLedger } from "@/lib/services/ledger/append";
import { renameWorkspaceSchema } from "@/lib/services/workspaces/schema";

/** @throws ForbiddenError */
export async function renameWorkspace(ctx: Ctx, input: { name: string }): Promise<void> {
  authorise(ctx, "workspace.update");
  const { name } = renameWorkspaceSchema.parse(input);
  const { workspaceId } = ctx;
  await withTransaction(ctx, async (tx, inner) => {
    await lockWorkspace(tx, { workspaceId });
    const before = await selectWorkspace(tx, { workspaceId });
    if (before?.name === name) return;
    await updateWorkspaceName(tx, { workspaceId, name });
    await appendLedger(tx, inner, {
      event: "workspace.updated",
      subjectType: "workspace",
      subjectId: workspaceId,
      data: { old: { name: before?.name }, new: { name } },
    });
  });
}
