import { enqueueMail } from "@/db/queries/mail";
import { notePassphraseTry, selectAddressesToWarn, selectPassphrase, selectUser } from "@/db/queries/people";
import { passphraseFits } from "@/lib/auth/passphrase";
import { ForbiddenError, TooManyRequestsError } from "@/lib/errors";
import { logger } from "@/lib/logger";
import type { Ctx } from "@/lib/services/ctx";

const TRIES = 5;

/** Tells the person and the leads and admins around them that somebody tried. */
async function warnOfLock(tx: Ctx["db"], userId: string): Promise<void> {
  const person = await selectUser(tx, { userId });
  for (const toAddress of await selectAddressesToWarn(tx, { userId })) {
    await enqueueMail(tx, {
      workspaceId: null,
      toAddress,
      subject: "Five wrong signing passphrases in Twinpass",
      body: [
        `Five wrong signing passphrases were tried as ${person?.name ?? person?.email}. Signing is locked for 15 minutes.`,
        "",
        "If it was not them, an admin can disable the membership, which ends every session at once.",
      ].join("\n"),
    });
  }
}

/**
 * Hashing takes long and memory, so it happens before the transaction and holds neither row nor connection. What it found
 * counts only if the row is still open and the same under lock: of any number of tries at once five are answered.
 */
async function tryPassphrase({ db, userId }: Pick<Ctx, "db" | "userId">, passphrase: string) {
  const before = await selectPassphrase(db, { userId });
  if (!before) return "none";
  if (before.locked) return "locked";
  const fits = await passphraseFits(passphrase, before.scryptHash);
  return await db.transaction(async (tx) => {
    const row = await selectPassphrase(tx, { userId, lock: true });
    if (!row) return "none";
    if (row.locked) return "locked";
    const right = fits && row.scryptHash === before.scryptHash;
    await notePassphraseTry(tx, { userId, right });
    if (!right && row.failedTries + 1 >= TRIES) await warnOfLock(tx, userId);
    return right ? "right" : "wrong";
  });
}

/**
 * Confirms that it is really this person, right before a decision. Its own transaction, so that a wrong try counts
 * even though the decision fails. Five wrong tries lock the passphrase for 15 minutes and are told by mail.
 * @returns how identity was confirmed, for the record
 * @throws ForbiddenError no passphrase set, or a wrong one; TooManyRequestsError while locked
 */
export async function reauthenticate(
  ctx: Pick<Ctx, "db" | "userId">,
  passphrase: string,
): Promise<"passphrase"> {
  const outcome = await tryPassphrase(ctx, passphrase);
  if (outcome !== "right")
    logger().warn({ event: "auth.reauthentication_failed", userId: ctx.userId, outcome });
  switch (outcome) {
    case "right":
      return "passphrase";
    case "locked":
      throw new TooManyRequestsError(
        "passphrase_locked",
        "Five wrong passphrases: signing is locked for 15 minutes.",
      );
    case "none":
      throw new ForbiddenError(
        "no_passphrase",
        "You have no signing passphrase yet. Set one on your account page first.",
      );
    case "wrong":
      throw new ForbiddenError("wrong_passphrase", "That is not your signing passphrase. Nothing was done.");
  }
}

/** A sign-in this young stands for the passphrase where people and settings are changed, never in a decision. */
export const RECENT_SIGN_IN_S = 5 * 60;

/** What confirms identity: how old the session is, and the passphrase where one was written. */
export interface Proof {
  sessionAgeS: number;
  passphrase?: string;
}

/**
 * Confirms identity before a change of people or settings: a sign-in within five minutes, else the passphrase.
 * @throws ForbiddenError when neither is there, or as reauthenticate
 */
export async function confirmIdentity(ctx: Ctx, proof: Proof): Promise<"recent sign-in" | "passphrase"> {
  if (proof.sessionAgeS <= RECENT_SIGN_IN_S) return "recent sign-in";
  if (!proof.passphrase)
    throw new ForbiddenError(
      "identity_not_confirmed",
      "You signed in more than five minutes ago. Write your signing passphrase, or sign in again.",
    );
  return await reauthenticate(ctx, proof.passphrase);
}
