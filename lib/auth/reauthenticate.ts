import { lockPassphrase, notePassphraseTry } from "@/db/queries/people";
import { passphraseFits } from "@/lib/auth/passphrase";
import { ForbiddenError, TooManyRequestsError } from "@/lib/errors";
import { type Ctx, withTransaction } from "@/lib/services/ctx";

/**
 * Confirms that it is really this person, right before a decision. Its own transaction, so that a wrong try counts
 * even though the decision fails. Five wrong tries lock the passphrase for 15 minutes.
 * @returns how identity was confirmed, for the record
 * @throws ForbiddenError no passphrase set, or a wrong one; TooManyRequestsError while locked
 */
export async function reauthenticate(ctx: Ctx, passphrase: string): Promise<"passphrase"> {
  const outcome = await withTransaction(ctx, async (tx) => {
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
      throw new ForbiddenError(
        "wrong_passphrase",
        "That is not your signing passphrase. Nothing was decided.",
      );
  }
}
