import type { Transaction } from "@/db/client";
import { lockRevision, type RevisionRow, type RevisionState } from "@/db/queries/revisions";
import { ConflictError, NotFoundError } from "@/lib/errors";
import type { Ctx } from "@/lib/services/ctx";

/** States in the words of the pages. */
export const STATE_WORDS: Record<RevisionState, string> = {
  draft: "draft",
  validating: "validating",
  in_review: "in review",
  promoted: "stands",
  superseded: "superseded",
  turned_down: "turned down",
  withdrawn: "withdrawn",
  rolled_back: "rolled back",
};

export const noRevision = () => new NotFoundError("no_revision", "There is no such revision.");

/** The revision, locked. @throws NotFoundError for another workspace's */
export async function loadRevisionForUpdate(
  tx: Transaction,
  ctx: Ctx,
  revisionId: string,
): Promise<RevisionRow> {
  const row = await lockRevision(tx, { workspaceId: ctx.workspaceId, revisionId });
  if (!row) throw noRevision();
  return row;
}

/** @throws ConflictError naming the state it is in */
export function requireState(row: RevisionRow, states: readonly RevisionState[], doing: string): void {
  if (row.setAsideAt)
    throw new ConflictError("set_aside", `R${row.number} is set aside. Bring it back first.`);
  if (!states.includes(row.state)) {
    const asked = states.map((state) => STATE_WORDS[state]).join(" or ");
    throw new ConflictError(
      "wrong_state",
      `R${row.number} is ${STATE_WORDS[row.state]}; to ${doing} it must be ${asked}.`,
      {
        state: row.state,
      },
    );
  }
}
