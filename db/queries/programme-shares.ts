import { and, asc, eq, sql } from "drizzle-orm";
import type { Queryable } from "@/db/client";
import { inForce } from "@/db/queries/programmes";
import { programmeShares, users } from "@/db/tables";

/** The day by the database's clock, in UTC. */
export async function selectToday(db: Queryable): Promise<string> {
  const answer = await db.execute<{ today: string }>(
    sql`select to_char(now() at time zone 'UTC', 'YYYY-MM-DD') as today`,
  );
  return answer.rows[0].today;
}

/** Shares of a programme, those that have run out too. */
export async function selectShares(
  db: Queryable,
  { workspaceId, programmeId }: { workspaceId: string; programmeId: string },
) {
  return await db
    .select({
      userId: programmeShares.userId,
      name: users.name,
      email: users.email,
      expiresOn: programmeShares.expiresOn,
      inForce: sql<boolean>`${inForce()}`,
    })
    .from(programmeShares)
    .innerJoin(users, eq(users.id, programmeShares.userId))
    .where(and(eq(programmeShares.workspaceId, workspaceId), eq(programmeShares.programmeId, programmeId)))
    .orderBy(asc(users.name));
}

/** Shares with a person until a day, or moves that day. */
export async function upsertShare(
  tx: Queryable,
  values: { workspaceId: string; programmeId: string; userId: string; expiresOn: string; sharedBy: string },
): Promise<void> {
  await tx
    .insert(programmeShares)
    .values(values)
    .onConflictDoUpdate({
      target: [programmeShares.programmeId, programmeShares.userId],
      set: { expiresOn: values.expiresOn, sharedBy: values.sharedBy },
    });
}

/** Ends a share. @returns whether there was one */
export async function deleteShare(
  tx: Queryable,
  args: { workspaceId: string; programmeId: string; userId: string },
): Promise<boolean> {
  const gone = await tx
    .delete(programmeShares)
    .where(
      and(
        eq(programmeShares.workspaceId, args.workspaceId),
        eq(programmeShares.programmeId, args.programmeId),
        eq(programmeShares.userId, args.userId),
      ),
    )
    .returning({ userId: programmeShares.userId });
  return gone.length > 0;
}
