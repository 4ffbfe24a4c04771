import { and, asc, eq, isNull, lte, sql } from "drizzle-orm";
import type { Queryable } from "@/db/client";
import { mailQueue } from "@/db/tables";

export type QueuedMail = Pick<
  typeof mailQueue.$inferSelect,
  "id" | "toAddress" | "subject" | "body" | "attempts"
>;

/** Channel that wakes the worker. */
export const MAIL_CHANNEL = "twinpass_mail";

/** Puts a mail into the queue in the caller's transaction and wakes the worker when that commits. */
export async function enqueueMail(
  tx: Queryable,
  mail: { workspaceId: string | null; toAddress: string; subject: string; body: string },
): Promise<void> {
  await tx.insert(mailQueue).values(mail);
  await tx.execute(sql`select pg_notify(${MAIL_CHANNEL}, '')`);
}

/** Takes due mails under lock, oldest first; another worker skips them. */
export async function lockDueMail(tx: Queryable, { limit }: { limit: number }): Promise<QueuedMail[]> {
  return await tx
    .select({
      id: mailQueue.id,
      toAddress: mailQueue.toAddress,
      subject: mailQueue.subject,
      body: mailQueue.body,
      attempts: mailQueue.attempts,
    })
    .from(mailQueue)
    .where(and(isNull(mailQueue.sentAt), lte(mailQueue.nextTryAt, sql`now()`)))
    .orderBy(asc(mailQueue.createdAt))
    .limit(limit)
    .for("update", { skipLocked: true });
}

/** Marks a mail as sent. */
export async function markMailSent(tx: Queryable, { id }: { id: string }): Promise<void> {
  await tx.update(mailQueue).set({ sentAt: sql`now()` }).where(eq(mailQueue.id, id));
}

/** Tries again later: after 1, 2, 4 … minutes, at most every hour. */
export async function postponeMail(tx: Queryable, { id }: { id: string }): Promise<void> {
  await tx
    .update(mailQueue)
    .set({
      attempts: sql`${mailQueue.attempts} + 1`,
      nextTryAt: sql`now() + least(interval '1 hour', interval '1 minute' * power(2, least(${mailQueue.attempts}, 10)))`,
    })
    .where(eq(mailQueue.id, id));
}
