import { insertMembership } from "@/db/queries/members";
import { selectUser, updateUserName } from "@/db/queries/people";
import { insertWorkspace } from "@/db/queries/workspaces";
import { ROLES } from "@/lib/policy/actor";
import { type Asker, inWorkspace } from "@/lib/services/asker";
import { appendLedger } from "@/lib/services/ledger/append";
import { limitTries } from "@/lib/services/limit-tries";
import { newWorkspaceSchema } from "@/lib/services/workspaces/schema";

/**
 * Makes a workspace; who makes it holds every role there.
 * @param input name, and the person's own name where they have none yet
 * @throws TooManyRequestsError after five an hour
 */
export async function createWorkspace(
  asker: Asker,
  input: { name: string; yourName?: string; sample?: boolean },
): Promise<{ workspaceId: string }> {
  const { name, yourName } = newWorkspaceSchema.parse(input);
  const sample = input.sample ?? false;
  await limitTries(asker.db, { doing: "make workspaces", userId: asker.userId });
  return await asker.db.transaction(async (tx) => {
    const { userId } = asker;
    const person = await selectUser(tx, { userId });
    const userName = person?.name ?? yourName ?? asker.userName;
    if (!person?.name && yourName) await updateUserName(tx, { userId, name: yourName });
    const workspaceId = await insertWorkspace(tx, { name, sample });
    const roles = [...ROLES];
    await insertMembership(tx, { workspaceId, userId, roles });
    await appendLedger(tx, inWorkspace({ ...asker, userName }, tx, { workspaceId, roles }), {
      event: "workspace.created",
      subjectType: "workspace",
      subjectId: workspaceId,
      data: { name, roles },
    });
    return { workspaceId };
  });
}
