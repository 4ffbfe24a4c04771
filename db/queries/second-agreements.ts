import { and, asc, eq } from "drizzle-orm";
import type { Queryable } from "@/db/client";
import { secondAgreements } from "@/db/tables";

export type SecondAgreementRow = typeof secondAgreements.$inferSelect;

/** Agreements to exactly what was seen of a revision, oldest first. */
export async function selectSecondAgreements(
  db: Queryable,
  { workspaceId, revisionId, seenSha256 }: { workspaceId: string; revisionId: string; seenSha256: string },
): Promise<SecondAgreementRow[]> {
  return await db
    .select()
    .from(secondAgreements)
    .where(
      and(
        eq(secondAgreements.workspaceId, workspaceId),
        eq(secondAgreements.revisionId, revisionId),
        eq(secondAgreements.seenSha256, seenSha256),
      ),
    )
    .orderBy(asc(secondAgreements.createdAt));
}

/** Keeps an agreement. @returns null when the lead has agreed to just this before */
export async function insertSecondAgreement(
  tx: Queryable,
  values: Omit<typeof secondAgreements.$inferInsert, "id" | "createdAt">,
): Promise<SecondAgreementRow | null> {
  const [row] = await tx
    .insert(secondAgreements)
    .values(values)
    .onConflictDoNothing({
      target: [secondAgreements.revisionId, secondAgreements.seenSha256, secondAgreements.leadId],
    })
    .returning();
  return row ?? null;
}
