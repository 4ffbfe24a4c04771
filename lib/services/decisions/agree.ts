import { selectRevision } from "@/db/queries/revisions";
import { insertSecondAgreement } from "@/db/queries/second-agreements";
import { reauthenticate } from "@/lib/auth/reauthenticate";
import { ConflictError, ForbiddenError } from "@/lib/errors";
import { authorise, type Ctx, withTransaction } from "@/lib/services/ctx";
import { lockDesk } from "@/lib/services/decisions/lock-desk";
import { retryLost } from "@/lib/services/decisions/retry";
import { type AgreeInput, agreeInput } from "@/lib/services/decisions/schema";
import { gateDesk } from "@/lib/services/gates/status";
import { appendLedger } from "@/lib/services/ledger/append";
import { refuseArchived } from "@/lib/services/programmes/refuse-archived";
import { noRevision, requireState } from "@/lib/services/revisions/load";

/**
 * A second lead agrees that marked functions are changed, signed; it holds for exactly the change set that they saw. Whoever
 * promotes then must be another lead. It decides nothing by itself.
 * @throws ForbiddenError author, submitter, role or passphrase; NotFoundError; ConflictError `evidence_moved`, `nothing_to_agree`,
 *   `agreed_already`, `wrong_state`, `programme_archived`; TooManyRequestsError
 */
export async function agreeAsSecondLead(ctx: Ctx, raw: AgreeInput): Promise<void> {
  const { revisionId, touchedSha256, reason, passphrase } = agreeInput.parse(raw);
  authorise(ctx, "decision.agree");
  const { workspaceId, userId, userName } = ctx;
  const before = await selectRevision(ctx.db, { workspaceId, revisionId });
  if (!before) throw noRevision();
  const reauthMethod = await reauthenticate(ctx, passphrase);
  const { programmeId } = before;
  await retryLost(() =>
    withTransaction(ctx, async (tx, inner) => {
      const { actor, revision, programme, otherActiveLead } = await lockDesk(tx, inner, {
        programmeId,
        revisionId,
      });
      const { authorId, submitterId, number } = revision;
      authorise(actor, "decision.agree", { authorId, submitterId, otherActiveLead });
      // Being the only lead lets nobody agree with themselves.
      if (authorId === userId || submitterId === userId)
        throw new ForbiddenError(
          "not_allowed",
          "You can't agree as second lead: you made it or asked for the decision.",
        );
      refuseArchived(programme);
      requireState(revision, ["in_review"], "agree to it");
      const { calibration } = await gateDesk(tx, {
        workspaceId,
        revision,
        standingRevisionId: programme.standingRevisionId,
      });
      if (!calibration?.touchedSha256 || !calibration.changeSet)
        throw new ConflictError("nothing_to_agree", `R${number} touches nothing that is marked.`);
      if (calibration.touchedSha256 !== touchedSha256)
        throw new ConflictError(
          "evidence_moved",
          "The changes or the marks are not what you saw. Nothing was agreed. Open the page again and look once more.",
        );
      const made = await insertSecondAgreement(tx, {
        workspaceId,
        revisionId,
        changeSetId: calibration.changeSet.id,
        seenSha256: touchedSha256,
        leadId: userId,
        leadName: userName,
        reason,
        reauthMethod,
      });
      if (!made) throw new ConflictError("agreed_already", "You agreed to exactly this before.");
      await appendLedger(tx, actor, {
        event: "decision.agreed",
        subjectType: "revision",
        subjectId: revisionId,
        programmeId,
        data: {
          number,
          changeSet: calibration.changeSet,
          touched: calibration.touched.map(({ mark }) => mark.name),
          seen: touchedSha256,
          reason,
        },
      });
    }),
  );
}
