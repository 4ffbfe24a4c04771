import type { Transaction } from "@/db/client";
import {
  type DecidedRevision,
  lockNumbers,
  lockProgramme,
  lockRevisions,
  selectNewestDecisionOn,
} from "@/db/queries/decisions";
import { lockLedgerHead } from "@/db/queries/ledger";
import { countOthersWithRole, selectRoles } from "@/db/queries/people";
import { ConflictError, ForbiddenError, NotFoundError } from "@/lib/errors";
import type { Ctx } from "@/lib/services/ctx";
import { recordName } from "@/lib/services/decisions/record-name";
import { stateSentence } from "@/lib/services/decisions/state-sentence";

/** All that a decision relies on, locked and read anew. */
export interface Desk {
  /** The asker with the roles that hold now. */
  actor: Ctx;
  otherActiveLead: boolean;
  programme: NonNullable<Awaited<ReturnType<typeof lockProgramme>>>;
  revision: DecidedRevision;
  /** The revision that stands, or null. */
  standing: DecidedRevision | null;
}

const noRevision = () => new NotFoundError("no_revision", "There is no such revision.");

/**
 * Locks what a decision changes, and then the head of the ledger. Every change in a workspace writes the ledger before it
 * commits, so from here to the end of the transaction nothing else in the workspace moves: what is read now holds.
 * @throws NotFoundError for another workspace's; ForbiddenError when the person is no member any more
 */
export async function lockDesk(
  tx: Transaction,
  ctx: Ctx,
  { programmeId, revisionId }: { programmeId: string; revisionId: string },
): Promise<Desk> {
  const { workspaceId, userId } = ctx;
  const programme = await lockProgramme(tx, { workspaceId, programmeId });
  if (!programme) throw noRevision();
  const standingId = programme.standingRevisionId;
  const revisionIds = standingId ? [revisionId, standingId] : [revisionId];
  const rows = await lockRevisions(tx, { workspaceId, programmeId, revisionIds });
  const revision = rows.find((row) => row.id === revisionId);
  if (!revision) throw noRevision();
  // The workspace's row before the membership, as whoever changes members takes them.
  await lockNumbers(tx, { workspaceId });
  const roles = await selectRoles(tx, { workspaceId, userId, lock: true });
  if (!roles) throw new ForbiddenError("no_member", "You are no active member of this workspace any more.");
  await lockLedgerHead(tx, { workspaceId });
  const otherLeads = await countOthersWithRole(tx, { workspaceId, userId, role: "lead" });
  return {
    actor: { ...ctx, db: tx, roles },
    otherActiveLead: otherLeads > 0,
    programme,
    revision,
    standing: rows.find((row) => row.id === standingId) ?? null,
  };
}

/** Who decided last on a revision, as the end of a sentence; empty when nobody did. */
async function whoWasFirst(tx: Transaction, revision: DecidedRevision): Promise<string> {
  const newest = await selectNewestDecisionOn(tx, {
    workspaceId: revision.workspaceId,
    revisionId: revision.id,
  });
  if (!newest) return "";
  const at = newest.decidedAt.toISOString().slice(0, 16).replace("T", " ");
  return ` ${newest.deciderName} decided on it on ${at} UTC (${recordName(newest.recordNumber)}).`;
}

/** The revision must still be in review and as the lead saw it. @throws ConflictError naming what moved and who was first */
export async function requireUnmoved(
  tx: Transaction,
  { revision }: Desk,
  seen: { rowVersion: number },
): Promise<void> {
  if (revision.setAsideAt !== null)
    throw new ConflictError(
      "set_aside",
      `R${revision.number} is set aside. It must be brought back before a decision.`,
    );
  if (revision.state !== "in_review")
    throw new ConflictError(
      "revision_moved",
      `R${revision.number} is no longer in review: ${stateSentence(revision.state)}.${await whoWasFirst(tx, revision)} Nothing was decided by you.`,
      { state: revision.state },
    );
  if (revision.rowVersion !== seen.rowVersion)
    throw new ConflictError(
      "revision_moved",
      `R${revision.number} was changed since you opened this page.${await whoWasFirst(tx, revision)} Nothing was decided by you. Open the page again and look once more.`,
      { state: revision.state },
    );
}

/** The standing revision must still be the one that the lead saw. @throws ConflictError naming both */
export async function requireSameStanding(
  tx: Transaction,
  { standing }: Pick<Desk, "standing">,
  seen: { standingRevisionId: string | null },
): Promise<void> {
  if ((standing?.id ?? null) === seen.standingRevisionId) return;
  const now = standing
    ? `R${standing.number} stands now.${await whoWasFirst(tx, standing)}`
    : "None stands now.";
  throw new ConflictError(
    "standing_moved",
    `The standing revision has changed since you opened this page. ${now} Nothing was decided by you. Open the page again and compare anew.`,
    { standingRevisionId: standing?.id ?? null },
  );
}
