import type { z } from "zod";
import { setStandingRevision } from "@/db/queries/decisions";
import { selectRevision, updateRevision } from "@/db/queries/revisions";
import { reauthenticate } from "@/lib/auth/reauthenticate";
import { ConflictError } from "@/lib/errors";
import { refreshAgainstStanding } from "@/lib/services/change-sets/refresh";
import { authorise, type Ctx, withTransaction } from "@/lib/services/ctx";
import { asConflict } from "@/lib/services/decisions/decide";
import { lockDesk } from "@/lib/services/decisions/lock-desk";
import { type RecordedDecision, recordDecision } from "@/lib/services/decisions/record";
import { retryLost } from "@/lib/services/decisions/retry";
import { refuseArchived } from "@/lib/services/programmes/refuse-archived";
import { noRevision, requireState } from "@/lib/services/revisions/load";
import { adoptAsFound } from "@/lib/services/revisions/schema";

/**
 * A draft becomes the image that the car came with: it stands without gates, and stays a target for rolling back.
 * @throws ForbiddenError role or passphrase; ConflictError when a revision stands already, the programme is archived, or somebody
 *   decided at the same moment
 */
export async function adoptRevisionAsFound(
  ctx: Ctx,
  input: z.input<typeof adoptAsFound>,
): Promise<RecordedDecision> {
  const { revisionId, reason, howRead, secondReadEqual, passphrase } = adoptAsFound.parse(input);
  authorise(ctx, "revision.adopt");
  const { workspaceId } = ctx;
  const found = await selectRevision(ctx.db, { workspaceId, revisionId });
  if (!found) throw noRevision();
  const { programmeId } = found;
  const reauthMethod = await reauthenticate(ctx, passphrase);
  const howItWasRead = `${howRead} · ${secondReadEqual ? "a second read was equal" : "read once only"}`;
  try {
    return await retryLost(() =>
      withTransaction(ctx, async (tx, inner) => {
        const desk = await lockDesk(tx, inner, { programmeId, revisionId });
        const { actor, revision, programme, standing } = desk;
        authorise(actor, "revision.adopt");
        refuseArchived(programme);
        requireState(revision, ["draft"], "adopt it as found");
        if (standing) {
          throw new ConflictError(
            "stands_already",
            `R${standing.number} stands already. Only a programme where nothing stands takes an image as found.`,
          );
        }
        const recorded = await recordDecision(tx, actor, {
          kind: "as_found",
          programmeId,
          revisionId,
          fromRevisionId: null,
          reason,
          reauthMethod,
        });
        const set = {
          state: "promoted" as const,
          asFound: true,
          howRead: howItWasRead,
          stoodFrom: recorded.decidedAt,
        };
        const { rowVersion } = revision;
        await updateRevision(tx, { workspaceId, revisionId, rowVersion, set });
        await setStandingRevision(tx, { workspaceId, programmeId, from: null, to: revisionId });
        await refreshAgainstStanding(tx, actor, { programmeId });
        return recorded;
      }),
    );
  } catch (error) {
    throw asConflict(error);
  }
}
