import { moveRevision, setStandingRevision } from "@/db/queries/decisions";
import { reauthenticate } from "@/lib/auth/reauthenticate";
import { ConflictError, InvalidInputError } from "@/lib/errors";
import { refreshAgainstStanding } from "@/lib/services/change-sets/refresh";
import { authorise, type Ctx, withTransaction } from "@/lib/services/ctx";
import { asConflict } from "@/lib/services/decisions/decide";
import { type Desk, lockDesk, requireSameStanding } from "@/lib/services/decisions/lock-desk";
import { type RecordedDecision, recordDecision } from "@/lib/services/decisions/record";
import { retryLost } from "@/lib/services/decisions/retry";
import { namesRevision, type RollBackInput, rollBackInput } from "@/lib/services/decisions/schema";

/** Stood before and is not barred; no gate is asked. @throws ConflictError saying why it can't be the target */
function requireTarget({ revision, standing }: Desk): NonNullable<Desk["standing"]> {
  const name = `R${revision.number}`;
  if (standing === null)
    throw new ConflictError("none_stands", "No revision stands, so there is nothing to roll back from.");
  if (standing.id === revision.id)
    throw new ConflictError("stands_already", `${name} stands already. Nothing was changed.`);
  if (revision.barredAt !== null)
    throw new ConflictError("barred", `${name} is barred for good: ${revision.barredReason}`);
  if (revision.stoodFrom === null || !["superseded", "rolled_back"].includes(revision.state))
    throw new ConflictError(
      "never_stood",
      `${name} never stood. Rolling back goes to an earlier promoted revision or to the image as found.`,
    );
  return standing;
}

/**
 * Puts an earlier standing revision back: one lead, at once, with a reason, never blocked by a gate.
 * The one that stood is marked as rolled back; nothing is erased, the step is a record of its own.
 * @throws ForbiddenError, NotFoundError, InvalidInputError typed number; ConflictError when the standing revision has moved
 */
export async function rollBack(ctx: Ctx, raw: RollBackInput): Promise<RecordedDecision> {
  authorise(ctx, "decision.roll_back");
  const input = rollBackInput.parse(raw);
  const { workspaceId } = ctx;
  const { programmeId, toRevisionId } = input;
  const reauthMethod = await reauthenticate(ctx, input.passphrase);
  try {
    return await retryLost(() =>
      withTransaction(ctx, async (tx, inner) => {
        const desk = await lockDesk(tx, inner, { programmeId, revisionId: toRevisionId });
        const { actor, revision } = desk;
        authorise(actor, "decision.roll_back");
        await requireSameStanding(tx, desk, input);
        const standing = requireTarget(desk);
        if (!namesRevision(input.typedNumber, revision.number))
          throw new InvalidInputError(
            "wrong_number",
            `You typed "${input.typedNumber}", but you chose R${revision.number}. Nothing was changed.`,
          );
        const recorded = await recordDecision(tx, actor, {
          kind: "roll_back",
          programmeId,
          revisionId: revision.id,
          fromRevisionId: standing.id,
          reason: input.reason,
          reauthMethod,
        });
        const { decidedAt } = recorded;
        const left = await moveRevision(tx, {
          workspaceId,
          revisionId: standing.id,
          rowVersion: standing.rowVersion,
          from: "promoted",
          set: { state: "rolled_back", stoodUntil: decidedAt },
        });
        const back = await moveRevision(tx, {
          workspaceId,
          revisionId: revision.id,
          rowVersion: revision.rowVersion,
          from: revision.state,
          set: { state: "promoted", stoodFrom: decidedAt, stoodUntil: null },
        });
        const stands = await setStandingRevision(tx, {
          workspaceId,
          programmeId,
          from: standing.id,
          to: revision.id,
        });
        if (!left || !back || !stands)
          throw new ConflictError("revision_moved", "The revisions could not be moved. Nothing was changed.");
        await refreshAgainstStanding(tx, actor, { programmeId });
        return recorded;
      }),
    );
  } catch (error) {
    throw asConflict(error);
  }
}
