import type { Database } from "@/db/client";
import { lockDueMail, markMailSent, postponeMail } from "@/db/queries/mail";
import { logger } from "@/lib/logger";
import { type Letter, mailTransport } from "@/lib/mail/transport";

/** At most so many in one go; the worker asks again. */
const BATCH = 100;

type Outcome = "sent" | "postponed" | "none";

/** One mail, one transaction: sent and marked together. A crash between the two sends it again under the same Message-ID. */
async function sendOne(db: Database, send: (letter: Letter) => Promise<void>): Promise<Outcome> {
  return await db.transaction(async (tx) => {
    const [mail] = await lockDueMail(tx, { limit: 1 });
    if (!mail) return "none";
    try {
      await send({ id: mail.id, to: mail.toAddress, subject: mail.subject, text: mail.body });
    } catch (error) {
      logger().warn({ event: "mail.failed", mailId: mail.id, attempts: mail.attempts + 1, err: error });
      await postponeMail(tx, { id: mail.id });
      return "postponed";
    }
    await markMailSent(tx, { id: mail.id });
    return "sent";
  });
}

/**
 * Sends what is due, oldest first; a mail that fails is tried again later. Several workers share the queue.
 * @returns how many were sent
 */
export async function sendDueMail(db: Database, send = mailTransport()): Promise<number> {
  let sent = 0;
  for (let tried = 0; tried < BATCH; tried += 1) {
    const outcome = await sendOne(db, send);
    if (outcome === "none") break;
    if (outcome === "sent") sent += 1;
  }
  return sent;
}
