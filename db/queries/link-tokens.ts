import { and, eq, lt, sql } from "drizzle-orm";
import type { Queryable } from "@/db/client";
import { verificationTokens } from "@/db/tables";

/** Keeps the hash of a sign-in link's token, and clears away links that ran out a day ago. */
export async function insertLinkToken(
  db: Queryable,
  { identifier, token, lifeS }: { identifier: string; token: string; lifeS: number },
): Promise<void> {
  await db.delete(verificationTokens).where(lt(verificationTokens.expires, sql`now() - interval '1 day'`));
  await db
    .insert(verificationTokens)
    .values({ identifier, token, expires: sql`now() + ${lifeS} * interval '1 second'` });
}

/** Uses a link up: its row goes at once, so it works once. Null when there is none or it ran out. */
export async function takeLinkToken(
  db: Queryable,
  { identifier, token }: { identifier: string; token: string },
) {
  const [row] = await db
    .delete(verificationTokens)
    .where(and(eq(verificationTokens.identifier, identifier), eq(verificationTokens.token, token)))
    .returning({
      identifier: verificationTokens.identifier,
      token: verificationTokens.token,
      expires: verificationTokens.expires,
      inForce: sql<boolean>`${verificationTokens.expires} > now()`,
    });
  if (!row?.inForce) return null;
  return { identifier: row.identifier, token: row.token, expires: row.expires };
}
