import type { Transaction } from "@/db/client";
import { type DecisionRow, selectPeopleToTell } from "@/db/queries/decisions";
import { enqueueMail } from "@/db/queries/mail";
import { env } from "@/lib/env";
import type { RecordWaiver } from "@/lib/services/decisions/record-digest";
import { recordName } from "@/lib/services/decisions/record-name";

const SUBJECT: Record<DecisionRow["kind"], (revision: string, from: string) => string> = {
  as_found: (revision) => `${revision} was adopted as found and stands`,
  promote: (revision) => `${revision} stands`,
  hold: (revision) => `${revision} is held for more runs`,
  turn_down: (revision) => `${revision} was turned down`,
  roll_back: (revision, from) => `Rolled back from ${from}: ${revision} stands again`,
};

/** By whose word marked functions were released; nothing where none are touched and nobody gave it. */
function releasedWords(calibration: DecisionRow["evidence"]["calibration"]): string[] {
  if (!calibration) return [];
  const { touched, approval, secondLead } = calibration;
  return [
    ...(touched.length > 0
      ? [
          `Touches what is marked: ${touched.map(({ name, relevance }) => `${name} (${relevance})`).join(", ")}.`,
        ]
      : []),
    ...(approval ? [`Approval document: ${approval.document}, issued by ${approval.issuer}.`] : []),
    ...(secondLead ? [`Second lead: ${secondLead.name}. ${secondLead.reason}`] : []),
  ];
}

/**
 * Queues the mails that a decision causes, in its own transaction: to author, submitter and every lead, the decider too,
 * so that a decision in somebody's name is never a secret to them. The link only opens the record.
 * @returns how many were queued
 */
export async function announceDecision(
  tx: Transaction,
  args: { decision: DecisionRow; waivers: readonly RecordWaiver[]; programmeName: string },
): Promise<number> {
  const { decision, waivers, programmeName } = args;
  const { workspaceId, evidence } = decision;
  const people = await selectPeopleToTell(tx, decision);
  const revision = `R${evidence.revision.number}`;
  const subject = SUBJECT[decision.kind](revision, `R${evidence.fromNumber ?? "?"}`);
  const body = [
    `${programmeName}: ${subject}.`,
    "",
    `${recordName(decision.recordNumber)}, signed by ${decision.deciderName} on ${decision.decidedAt.toISOString().slice(0, 16).replace("T", " ")} UTC.`,
    `Meaning: ${decision.meaning}.`,
    `Reason: ${decision.reason}`,
    ...(decision.selfReleased
      ? ["Self-released: author or submitter decided, no other lead was active."]
      : []),
    ...waivers.map((waiver) => `Gate waived: ${waiver.gateId}. ${waiver.reason}`),
    ...releasedWords(evidence.calibration),
    "",
    `Fingerprint of the record: ${decision.recordSha256}`,
    new URL(`/records/${decision.id}`, env().AUTH_URL).toString(),
  ].join("\n");
  for (const person of people) await enqueueMail(tx, { workspaceId, toAddress: person.email, subject, body });
  return people.length;
}
