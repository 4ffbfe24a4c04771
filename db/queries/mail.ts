import { and, asc, eq, gt, isNull, lte, ne, or, sql } from "drizzle-orm";
import type { Queryable } from "@/db/client";
import { mailQueue } from "@/db/tables";

export type QueuedMail = Pick<
  typeof mailQueue.$inferSelect,
  "id" | "toAddress" | "subject" | "body" | "attempts"
>;

/** Channel that wakes the worker. */
export const MAIL_CHANNEL = "twinpass_mail";

/**
 * Puts a mail into the queue in the caller's transaction and wakes the worker when that commits.
 * @param mail.usefulForS seconds after which it is not worth sending, e.g. a link that is dead by then; left out = always
 */
export async function enqueueMail(
  tx: Queryable,
  {
    usefulForS,
    ...mail
  }: { workspaceId: string | null; toAddress: string; subject: string; body: string; usefulForS?: number },
): Promise<void> {
  const usefulUntil = usefulForS === undefined ? null : sql`now() + ${usefulForS} * interval '1 second'`;
  await tx.insert(mailQueue).values({ ...mail, usefulUntil });
  await tx.execute(sql`select pg_notify(${MAIL_CHANNEL}, '')`);
}

/** Takes due mails that are still of use under lock, oldest first; another worker skips them. */
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
    .where(
      and(
        isNull(mailQueue.sentAt),
        lte(mailQueue.nextTryAt, sql`now()`),
        or(isNull(mailQueue.usefulUntil), gt(mailQueue.usefulUntil, sql`now()`)),
      ),
    )
    .orderBy(asc(mailQueue.createdAt))
    .limit(limit)
    .for("update", { skipLocked: true });
}

/** Marks a mail as sent and empties its body: a link in it must not lie about. */
export async function markMailSent(tx: Queryable, { id }: { id: string }): Promise<void> {
  await tx.update(mailQueue).set({ sentAt: sql`now()`, body: "" }).where(eq(mailQueue.id, id));
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

/** Empties mails that nobody got and that are of no use any more. @returns how many */
export async function emptyUselessMail(db: Queryable): Promise<number> {
  const emptied = await db
    .update(mailQueue)
    .set({ body: "" })
    .where(and(lte(mailQueue.usefulUntil, sql`now()`), ne(mailQueue.body, "")))
    .returning({ id: mailQueue.id });
  return emptied.length;
}
