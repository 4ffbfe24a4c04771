import { and, eq, sql } from "drizzle-orm";
import type { Queryable } from "@/db/client";
import { idempotencyKeys } from "@/db/tables";

/** Waits for another request with the same key and holds the key until the transaction ends. */
export async function lockIdempotencyKey(
  tx: Queryable,
  { userId, key }: { userId: string; key: string },
): Promise<void> {
  await tx.execute(sql`select pg_advisory_xact_lock(hashtextextended(${`${userId}:${key}`}, 0))`);
}

export async function selectAnswer(tx: Queryable, { userId, key }: { userId: string; key: string }) {
  const [row] = await tx
    .select({ requestSha256: idempotencyKeys.requestSha256, body: idempotencyKeys.body })
    .from(idempotencyKeys)
    .where(and(eq(idempotencyKeys.userId, userId), eq(idempotencyKeys.key, key)));
  return row ?? null;
}

export async function insertAnswer(
  tx: Queryable,
  values: { userId: string; key: string; requestSha256: string; body: unknown },
): Promise<void> {
  await tx.insert(idempotencyKeys).values({ ...values, status: 200 });
}
