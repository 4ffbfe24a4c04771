import { sql } from "drizzle-orm";
import {
  boolean,
  check,
  foreignKey,
  integer,
  jsonb,
  pgEnum,
  pgTable,
  text,
  unique,
  uniqueIndex,
  uuid,
} from "drizzle-orm/pg-core";
import type { GateResult } from "@/lib/gates/plan";
import { createdAt, idColumn } from "./column";
import { users } from "./people";
import { programmes } from "./programmes";
import { revisions } from "./revisions";
import { workspaces } from "./workspaces";

export const decisionKindEnum = pgEnum("decision_kind", [
  "as_found",
  "promote",
  "hold",
  "turn_down",
  "roll_back",
]);

/** One run of the evidence, as it was when the decision was taken. */
export interface EvidenceRun {
  runId: string;
  number: number;
  logSha256: string;
  side: string;
  usable: boolean;
  testerName: string | null;
  /** Why it did not count; null for a run that did. */
  leftOut: string | null;
}

/** What the revision was when the decision was taken. */
export interface EvidenceRevision {
  number: number;
  title: string;
  parentNumber: number | null;
  imageFileName: string;
  imageBytes: number;
  changeReason: string;
  intendedUse: string | null;
  touchesEmissionOrSafety: boolean | null;
}

/** What was known of the changed values, and by whose word marked functions were released for the road. */
export interface EvidenceCalibration {
  changeSetId: string;
  inputSha256: string;
  /** Digest of the change set's canonical JSON, and of the coverage's; null where none was there. */
  resultSha256: string;
  coverageSha256: string | null;
  readBy: "both" | "a" | "b" | "none";
  changedBytes: number;
  changedCharacteristics: number;
  uncoveredBytes: number;
  /** Marked functions and characteristics that the change touches. */
  touched: { name: string; relevance: "emission" | "safety"; characteristics: string[] }[];
  approval: { document: string; issuer: string } | null;
  secondLead: { id: string; name: string; at: string; reason: string } | null;
}

/** The evidence a decision was taken on, frozen with it. */
export interface DecisionEvidence {
  comparisonId: string | null;
  comparisonInputSha256: string | null;
  /** Digest of the result's canonical JSON: the figures on the record are these and no others. */
  resultSha256: string | null;
  /** The result belonged to earlier inputs; the runs are those it was computed from. Absent where it did not. */
  stale?: true;
  analysisVersion: string | null;
  sheetVersion: number | null;
  gatePlanVersion: number | null;
  gates: GateResult[];
  /** Absent where no change set was there. */
  calibration?: EvidenceCalibration;
  runs: EvidenceRun[];
  revision: EvidenceRevision;
  fromNumber: number | null;
  imageSha256: string;
  standingImageSha256: string | null;
  /** How many leads had to sign. */
  leadsRequired: number;
}

/** Append-only: a decision is its own row and only a new one can supersede it. */
export const decisions = pgTable(
  "decisions",
  {
    id: idColumn(),
    workspaceId: uuid("workspace_id")
      .notNull()
      .references(() => workspaces.id),
    programmeId: uuid("programme_id").notNull(),
    revisionId: uuid("revision_id").notNull(),
    /** The revision that stood when it was taken. */
    fromRevisionId: uuid("from_revision_id"),
    kind: decisionKindEnum("kind").notNull(),
    recordNumber: integer("record_number").notNull(),
    reason: text("reason").notNull(),
    meaning: text("meaning").notNull(),
    deciderId: uuid("decider_id")
      .notNull()
      .references(() => users.id),
    deciderName: text("decider_name").notNull(),
    authorId: uuid("author_id")
      .notNull()
      .references(() => users.id),
    submitterId: uuid("submitter_id").references(() => users.id),
    selfReleased: boolean("self_released").notNull().default(false),
    reauthMethod: text("reauth_method").notNull(),
    evidence: jsonb("evidence").$type<DecisionEvidence>().notNull(),
    recordSha256: text("record_sha256").notNull(),
    previousRecordSha256: text("previous_record_sha256"),
    decidedAt: createdAt(),
  },
  (t) => [
    unique("decisions_record_number").on(t.workspaceId, t.recordNumber),
    uniqueIndex("decisions_promoted_once").on(t.revisionId).where(sql`${t.kind} = 'promote'`),
    foreignKey({
      columns: [t.workspaceId, t.programmeId],
      foreignColumns: [programmes.workspaceId, programmes.id],
    }),
    foreignKey({
      columns: [t.workspaceId, t.revisionId],
      foreignColumns: [revisions.workspaceId, revisions.id],
    }),
    check("decisions_reason", sql`btrim(${t.reason}) <> ''`),
    check("decisions_digest", sql`${t.recordSha256} ~ '^[0-9a-f]{64}$'`),
    check(
      "decisions_not_own",
      sql`${t.kind} in ('roll_back','as_found') or ${t.selfReleased} or (${t.deciderId} <> ${t.authorId} and ${t.deciderId} is distinct from ${t.submitterId})`,
    ),
  ],
);

/** A lead's signed exception to one gate; printed with the decision for ever. */
export const waivers = pgTable(
  "waivers",
  {
    id: idColumn(),
    workspaceId: uuid("workspace_id")
      .notNull()
      .references(() => workspaces.id),
    decisionId: uuid("decision_id")
      .notNull()
      .references(() => decisions.id),
    revisionId: uuid("revision_id").notNull(),
    gateId: text("gate_id").notNull(),
    gateState: text("gate_state").notNull(),
    reason: text("reason").notNull(),
    waivedBy: uuid("waived_by")
      .notNull()
      .references(() => users.id),
    createdAt: createdAt(),
  },
  (t) => [
    unique("waivers_once").on(t.decisionId, t.gateId),
    check("waivers_reason", sql`length(btrim(${t.reason})) >= 20`),
  ],
);
