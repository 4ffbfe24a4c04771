import { eq } from "drizzle-orm";
import type { Queryable } from "@/db/client";
import { workspaces } from "@/db/tables";

export async function insertWorkspace(
  tx: Queryable,
  values: { name: string; sample: boolean },
): Promise<string> {
  const [row] = await tx.insert(workspaces).values(values).returning({ id: workspaces.id });
  return row.id;
}

export async function selectWorkspace(db: Queryable, { workspaceId }: { workspaceId: string }) {
  const [row] = await db
    .select({ id: workspaces.id, name: workspaces.name, sample: workspaces.sample })
    .from(workspaces)
    .where(eq(workspaces.id, workspaceId));
  return row ?? null;
}

export async function updateWorkspaceName(
  tx: Queryable,
  { workspaceId, name }: { workspaceId: string; name: string },
): Promise<void> {
  await tx.update(workspaces).set({ name }).where(eq(workspaces.id, workspaceId));
}
