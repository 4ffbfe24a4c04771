import { selectRoles, setActiveWorkspace } from "@/db/queries/people";
import { NotFoundError } from "@/lib/errors";
import type { Asker } from "@/lib/services/asker";
import { switchWorkspaceSchema } from "@/lib/services/workspaces/schema";

/**
 * Points a session at another workspace of the person.
 * @param tokenHash hash of the session's token
 * @throws NotFoundError where the person is no active member
 */
export async function switchWorkspace(
  asker: Pick<Asker, "db" | "userId">,
  tokenHash: string,
  input: { workspaceId: string },
): Promise<void> {
  const { workspaceId } = switchWorkspaceSchema.parse(input);
  const roles = await selectRoles(asker.db, { workspaceId, userId: asker.userId });
  if (!roles) throw new NotFoundError("workspace_not_found", "There is no such workspace.");
  await setActiveWorkspace(asker.db, { tokenHash, workspaceId });
}
