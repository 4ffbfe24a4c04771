import type { z } from "zod";
import { setStandingRevision } from "@/db/queries/decisions";
import { selectRevision, updateRevision } from "@/db/queries/revisions";
import { reauthenticate } from "@/lib/auth/reauthenticate";
import { ConflictError } from "@/lib/errors";
import { authorise, type Ctx, withTransaction } from "@/lib/services/ctx";
import { lockDesk } from "@/lib/services/decisions/lock-desk";
import { type RecordedDecision, recordDecision } from "@/lib/services/decisions/record";
import { loadRevisionForUpdate, noRevision, requireState } from "@/lib/services/revisions/load";
import { adoptAsFound } from "@/lib/services/revisions/schema";

/**
 * A draft becomes the image that the car came with: it stands without gates, and stays a target for rolling back.
 * @throws ForbiddenError role or passphrase; ConflictError when a revision stands already
 */
export async function adoptRevisionAsFound(
  ctx: Ctx,
  input: z.input<typeof adoptAsFound>,
): Promise<RecordedDecision> {
  const { revisionId, reason, howRead, secondReadEqual, passphrase } = adoptAsFound.parse(input);
  authorise(ctx, "revision.adopt");
  const reauthMethod = await reauthenticate(ctx, passphrase);
  return await withTransaction(ctx, async (tx, inner) => {
    const found = await selectRevision(tx, { workspaceId: inner.workspaceId, revisionId });
    if (!found) throw noRevision();
    const desk = await lockDesk(tx, inner, { programmeId: found.programmeId, revisionId });
    const row = await loadRevisionForUpdate(tx, inner, revisionId);
    authorise(desk.actor, "revision.adopt");
    requireState(row, ["draft"], "adopt it as found");
    if (desk.standing) {
      throw new ConflictError(
        "stands_already",
        `R${desk.standing.number} stands already. Only a programme where nothing stands takes an image as found.`,
      );
    }
    const recorded = await recordDecision(tx, desk.actor, {
      kind: "as_found",
      programmeId: row.programmeId,
      revisionId,
      fromRevisionId: null,
      reason,
      reauthMethod,
    });
    const { workspaceId } = inner;
    const set = {
      state: "promoted" as const,
      asFound: true,
      howRead: `${howRead} · ${secondReadEqual ? "a second read was equal" : "read once only"}`,
      stoodFrom: recorded.decidedAt,
    };
    await updateRevision(tx, { workspaceId, revisionId, rowVersion: row.rowVersion, set });
    await setStandingRevision(tx, { workspaceId, programmeId: row.programmeId, from: null, to: revisionId });
    return recorded;
  });
}
