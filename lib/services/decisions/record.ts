import { randomUUID } from "node:crypto";
import type { Transaction } from "@/db/client";
import {
  type DecidedRevision,
  type DecisionRow,
  insertDecision,
  insertWaivers,
  selectPreviousRecordSha256,
  takeRecordNumber,
} from "@/db/queries/decisions";
import { lockLedgerHead } from "@/db/queries/ledger";
import { selectProgramme } from "@/db/queries/programmes";
import { selectRevision } from "@/db/queries/revisions";
import type { DecisionEvidence } from "@/db/schema/decisions";
import { NotFoundError } from "@/lib/errors";
import type { Ctx } from "@/lib/services/ctx";
import { announceDecision } from "@/lib/services/decisions/announce";
import { recordDigest } from "@/lib/services/decisions/record-digest";
import { MEANING } from "@/lib/services/decisions/schema";
import { appendLedger } from "@/lib/services/ledger/append";

/** Names of the ledger as authorisation.csv has them. */
const EVENT: Record<DecisionRow["kind"], string> = {
  as_found: "revision.as_found",
  promote: "decision.promoted",
  hold: "decision.rejected",
  turn_down: "decision.rejected",
  roll_back: "decision.rolled_back",
};

/** What of the evidence comes from a comparison; a decision without one has none of it. */
export type ComparedEvidence = Pick<
  DecisionEvidence,
  | "comparisonId"
  | "comparisonInputSha256"
  | "resultSha256"
  | "stale"
  | "analysisVersion"
  | "sheetVersion"
  | "gatePlanVersion"
  | "gates"
  | "calibration"
  | "runs"
>;

const NO_COMPARISON: ComparedEvidence = {
  comparisonId: null,
  comparisonInputSha256: null,
  resultSha256: null,
  analysisVersion: null,
  sheetVersion: null,
  gatePlanVersion: null,
  gates: [],
  runs: [],
};

export interface DecisionToRecord {
  kind: DecisionRow["kind"];
  programmeId: string;
  revisionId: string;
  /** The revision that stood; null when none did. */
  fromRevisionId: string | null;
  reason: string;
  /** What reauthenticate answered. */
  reauthMethod: string;
  selfReleased?: boolean;
  evidence?: ComparedEvidence;
  waivers?: readonly { gateId: string; gateState: string; reason: string }[];
}

export interface RecordedDecision {
  decisionId: string;
  recordNumber: number;
  recordSha256: string;
  /** By the database's clock; use it for when a revision stands from and until. */
  decidedAt: Date;
  mails: number;
}

async function load(tx: Transaction, ctx: Ctx, revisionId: string): Promise<DecidedRevision> {
  const row = await selectRevision(tx, { workspaceId: ctx.workspaceId, revisionId });
  if (!row) throw new NotFoundError("no_revision", "There is no such revision.");
  return row;
}

/**
 * Writes a decision into its own row, in the caller's transaction: next record number, evidence frozen, digest over all
 * of it and the record before, waivers, one ledger entry for the decision and one a waiver, and the mails that it causes.
 * It changes no revision: the caller does, in the same transaction, after having asked the policy and locked the rows.
 * @throws NotFoundError
 */
export async function recordDecision(
  tx: Transaction,
  ctx: Ctx,
  args: DecisionToRecord,
): Promise<RecordedDecision> {
  const { workspaceId } = ctx;
  const recordNumber = await takeRecordNumber(tx, { workspaceId });
  const head = await lockLedgerHead(tx, { workspaceId });
  const revision = await load(tx, ctx, args.revisionId);
  const from = args.fromRevisionId ? await load(tx, ctx, args.fromRevisionId) : null;
  const parent = revision.parentId ? await load(tx, ctx, revision.parentId) : null;
  const programme = await selectProgramme(tx, { workspaceId, programmeId: args.programmeId });
  if (!programme) throw new NotFoundError("programme_not_found", "There is no such programme here.");

  const waivers = (args.waivers ?? []).map((waiver) => ({ ...waiver, waivedBy: ctx.userId }));
  const evidence: DecisionEvidence = {
    ...(args.evidence ?? NO_COMPARISON),
    revision: {
      number: revision.number,
      title: revision.title,
      parentNumber: parent?.number ?? null,
      imageFileName: revision.imageFileName,
      imageBytes: revision.imageBytes,
      changeReason: revision.changeReason,
      intendedUse: revision.intendedUse,
      touchesEmissionOrSafety: revision.touchesEmissionOrSafety,
    },
    fromNumber: from?.number ?? null,
    imageSha256: revision.imageSha256,
    standingImageSha256: from?.imageSha256 ?? null,
    leadsRequired: 1,
  };
  const content = {
    id: randomUUID(),
    workspaceId,
    programmeId: args.programmeId,
    revisionId: revision.id,
    fromRevisionId: from?.id ?? null,
    kind: args.kind,
    recordNumber,
    reason: args.reason,
    meaning: MEANING[args.kind],
    deciderId: ctx.userId,
    deciderName: ctx.userName,
    authorId: revision.authorId,
    submitterId: revision.submitterId,
    selfReleased: args.selfReleased ?? false,
    reauthMethod: args.reauthMethod,
    // As the database will give it back: JSON without undefined members.
    evidence: JSON.parse(JSON.stringify(evidence)) as DecisionEvidence,
    previousRecordSha256: await selectPreviousRecordSha256(tx, { workspaceId, recordNumber }),
    decidedAt: new Date(head.now),
  };
  const recordSha256 = recordDigest({ ...content, waivers });
  const decision = await insertDecision(tx, { ...content, recordSha256 });
  await insertWaivers(
    tx,
    waivers.map((waiver) => ({
      ...waiver,
      workspaceId,
      decisionId: decision.id,
      revisionId: revision.id,
      createdAt: content.decidedAt,
    })),
  );

  const subject = {
    subjectType: "decision",
    subjectId: decision.id,
    programmeId: args.programmeId,
  } as const;
  for (const { gateId, gateState, reason } of waivers) {
    const data = { recordNumber, revision: revision.number, gate: gateId, state: gateState, reason };
    await appendLedger(tx, ctx, { event: "gate.waived", ...subject, data });
  }
  await appendLedger(tx, ctx, {
    event: EVENT[args.kind],
    ...subject,
    data: {
      kind: args.kind,
      recordNumber,
      recordSha256,
      meaning: decision.meaning,
      reason: decision.reason,
      from: from && { id: from.id, number: from.number, imageSha256: from.imageSha256 },
      to: { id: revision.id, number: revision.number, imageSha256: revision.imageSha256 },
      selfReleased: decision.selfReleased,
      waived: waivers.map((waiver) => waiver.gateId),
    },
  });
  const mails = await announceDecision(tx, { decision, waivers, programmeName: programme.name });
  return { decisionId: decision.id, recordNumber, recordSha256, decidedAt: content.decidedAt, mails };
}
