import type { Queryable } from "@/db/client";
import { selectDescription } from "@/db/queries/descriptions";
import type { ShownDescription } from "@/lib/services/change-sets/schema";

/** A revision's description as pages show it; null where it has none. */
export async function shownDescription(
  db: Queryable,
  { workspaceId, descriptionId }: { workspaceId: string; descriptionId: string | null },
): Promise<ShownDescription | null> {
  if (descriptionId === null) return null;
  const row = await selectDescription(db, { workspaceId, descriptionId });
  return (
    row && {
      id: row.id,
      fileNames: row.files.map(({ name }) => name),
      state: row.state,
      failure: row.failure,
      summary: row.summary,
    }
  );
}
