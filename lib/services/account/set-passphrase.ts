import type { Queryable } from "@/db/client";
import { enqueueMail } from "@/db/queries/mail";
import { hasPassphrase, savePassphrase, selectUser } from "@/db/queries/people";
import { hashPassphrase } from "@/lib/auth/passphrase";
import { RECENT_SIGN_IN_S, reauthenticate } from "@/lib/auth/reauthenticate";
import { ForbiddenError } from "@/lib/errors";
import { passphraseSchema } from "@/lib/services/account/schema";
import { type Asker, appendToOwnLedgers } from "@/lib/services/asker";

/**
 * Sets or replaces a person's own signing passphrase: within five minutes of signing in, or with the old one.
 * The person is told by mail, so that a stranger at an open screen does not go unnoticed.
 * @throws ForbiddenError neither of the two, or a wrong old one; TooManyRequestsError while locked
 */
export async function setPassphrase(
  asker: Asker,
  input: { old?: string; fresh: string; again: string },
  sessionAgeS: number,
): Promise<void> {
  const { old, fresh } = passphraseSchema.parse(input);
  const { userId } = asker;
  if (sessionAgeS > RECENT_SIGN_IN_S) {
    if (!old)
      throw new ForbiddenError(
        "identity_not_confirmed",
        (await hasPassphrase(asker.db, { userId }))
          ? "You signed in more than five minutes ago. Write the old passphrase too, or sign in again."
          : "You signed in more than five minutes ago. Sign in again, then set your passphrase.",
      );
    await reauthenticate(asker, old);
  }
  const scryptHash = await hashPassphrase(fresh);
  await asker.db.transaction(async (tx) => {
    const replaced = await hasPassphrase(tx, { userId });
    await savePassphrase(tx, { userId, scryptHash });
    const person = await selectUser(tx, { userId });
    if (person) await enqueueMail(tx, { workspaceId: null, ...notice(person.email, replaced) });
    await appendToOwnLedgers(tx, asker, {
      event: "passphrase.set",
      subjectType: "passphrase",
      subjectId: userId,
      data: { replaced },
    });
  });
}

function notice(toAddress: string, replaced: boolean) {
  return {
    toAddress,
    subject: `Your signing passphrase for Twinpass was ${replaced ? "changed" : "set"}`,
    body: [
      `Your signing passphrase for Twinpass was ${replaced ? "changed" : "set"} just now.`,
      "",
      "If it was not you, tell an admin of your workspace at once: they can disable your membership.",
    ].join("\n"),
  };
}

/** Whether a person has set a signing passphrase. */
export async function personHasPassphrase(db: Queryable, userId: string): Promise<boolean> {
  return await hasPassphrase(db, { userId });
}
