import { and, eq, inArray } from "drizzle-orm";
import type { Queryable } from "@/db/client";
import { lookedAt } from "@/db/tables";

interface Own {
  workspaceId: string;
  userId: string;
  revisionId: string;
}

const at = ({ workspaceId, userId, revisionId }: Own) =>
  and(
    eq(lookedAt.workspaceId, workspaceId),
    eq(lookedAt.userId, userId),
    eq(lookedAt.revisionId, revisionId),
  );

/** Digests that a person has looked at on a revision. */
export async function selectLookedAt(db: Queryable, own: Own): Promise<string[]> {
  const rows = await db.select({ digest: lookedAt.digest }).from(lookedAt).where(at(own));
  return rows.map(({ digest }) => digest);
}

export async function insertLookedAt(tx: Queryable, own: Own, digests: readonly string[]): Promise<void> {
  const { workspaceId, userId, revisionId } = own;
  await tx
    .insert(lookedAt)
    .values(digests.map((digest) => ({ workspaceId, userId, revisionId, digest })))
    .onConflictDoNothing();
}

export async function deleteLookedAt(tx: Queryable, own: Own, digests: readonly string[]): Promise<void> {
  await tx.delete(lookedAt).where(and(at(own), inArray(lookedAt.digest, [...digests])));
}
