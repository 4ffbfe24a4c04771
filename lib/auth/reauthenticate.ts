import { lockPassphrase, notePassphraseTry } from "@/db/queries/people";
import { passphraseFits } from "@/lib/auth/passphrase";
import { ForbiddenError, TooManyRequestsError } from "@/lib/errors";
import type { Ctx } from "@/lib/services/ctx";

/**
 * Confirms that it is really this person, right before a decision. Its own transaction, so that a wrong try counts
 * even though the decision fails. Five wrong tries lock the passphrase for 15 minutes.
 * @returns how identity was confirmed, for the record
 * @throws ForbiddenError no passphrase set, or a wrong one; TooManyRequestsError while locked
 */
export async function reauthenticate(
  ctx: Pick<Ctx, "db" | "userId">,
  passphrase: string,
): Promise<"passphrase"> {
  const outcome = await ctx.db.transaction(async (tx) => {
    const row = await lockPassphrase(tx, { userId: ctx.userId });
    if (!row) return "none";
    if (row.locked) return "locked";
    const right = await passphraseFits(passphrase, row.scryptHash);
    await notePassphraseTry(tx, { userId: ctx.userId, right });
    return right ? "right" : "wrong";
  });
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
