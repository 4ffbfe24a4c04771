import type { Transaction } from "@/db/client";
import { type RevisionRow, selectRevision } from "@/db/queries/revisions";
import { reauthenticate } from "@/lib/auth/reauthenticate";
import { ConflictError, NotFoundError } from "@/lib/errors";
import type { Action } from "@/lib/policy/rules";
import { authorise, type Ctx, withTransaction } from "@/lib/services/ctx";
import { type Desk, lockDesk, requireSameStanding, requireUnmoved } from "@/lib/services/decisions/lock-desk";
import type { RecordedDecision } from "@/lib/services/decisions/record";
import { retryLost, sqlState } from "@/lib/services/decisions/retry";
import { type GateDesk, gateDesk } from "@/lib/services/gates/status";

/** What every decision on a revision in review says of what the lead had in view. */
export interface Seen {
  revisionId: string;
  rowVersion: number;
  standingRevisionId: string | null;
  passphrase: string;
}

/** What a decision works with once everything is locked and read anew. */
export interface Signing {
  tx: Transaction;
  actor: Ctx;
  desk: Desk;
  gates: GateDesk;
  reauthMethod: string;
  selfReleased: boolean;
}

/** A unique index that refuses a decision is another decision that was first. */
export function asConflict(error: unknown): unknown {
  if (sqlState(error) !== "23505") return error;
  return new ConflictError(
    "decided_meanwhile",
    "Somebody else decided at the same moment and was first. Nothing was decided by you. Open the page again.",
  );
}

/**
 * The frame of promote, hold and turn down: policy, passphrase, then one transaction in which role, state, version and
 * standing revision are read anew under lock. The passphrase is asked outside, so that a wrong try counts.
 * @param look what takes long and must be looked at right before, outside the transaction; refuses by exception
 * @param sign writes the decision; all of it commits together or not at all
 * @throws ForbiddenError, NotFoundError, ConflictError naming what moved, TooManyRequestsError
 */
export async function decide(
  ctx: Ctx,
  { action, seen, look }: { action: Action; seen: Seen; look?: (revision: RevisionRow) => Promise<void> },
  sign: (signing: Signing) => Promise<RecordedDecision>,
): Promise<RecordedDecision> {
  const { workspaceId } = ctx;
  const { revisionId } = seen;
  authorise(ctx, action);
  const before = await selectRevision(ctx.db, { workspaceId, revisionId });
  if (!before) throw new NotFoundError("no_revision", "There is no such revision.");
  const reauthMethod = await reauthenticate(ctx, seen.passphrase);
  await look?.(before);
  const { programmeId } = before;
  try {
    return await retryLost(() =>
      withTransaction(ctx, async (tx, inner) => {
        const desk = await lockDesk(tx, inner, { programmeId, revisionId });
        const { authorId, submitterId } = desk.revision;
        await requireUnmoved(tx, desk, seen);
        const facts = { authorId, submitterId, otherActiveLead: desk.otherActiveLead };
        const { selfReleased } = authorise(desk.actor, action, facts);
        await requireSameStanding(tx, desk, seen);
        const gates = await gateDesk(tx, {
          workspaceId,
          revision: desk.revision,
          standingRevisionId: desk.programme.standingRevisionId,
        });
        return await sign({ tx, actor: desk.actor, desk, gates, reauthMethod, selfReleased });
      }),
    );
  } catch (error) {
    throw asConflict(error);
  }
}
