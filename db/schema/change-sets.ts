import { sql } from "drizzle-orm";
import {
  check,
  foreignKey,
  index,
  integer,
  jsonb,
  pgEnum,
  pgTable,
  primaryKey,
  text,
  unique,
  uuid,
} from "drizzle-orm/pg-core";
import type { RelevanceMark } from "@/lib/calibration/changes/relevance";
import type { ChangeSet } from "@/lib/calibration/changes/types";
import type { AxisLink, Coverage } from "@/lib/calibration/coverage/types";
import type { ChecksumRegion, RegionResult } from "@/lib/calibration/image/checksum-regions";
import type { ImageReading } from "@/lib/calibration/values/types";
import { blobs } from "./blobs";
import { createdAt, idColumn } from "./column";
import { descriptions } from "./descriptions";
import { users } from "./people";
import { programmes } from "./programmes";
import { revisions } from "./revisions";
import { workspaces } from "./workspaces";

export const computeStateEnum = pgEnum("compute_state", ["computing", "ready", "failed"]);
export const calibrationSettingEnum = pgEnum("calibration_setting", [
  "relevance_marks",
  "axis_links",
  "checksum_regions",
]);

const workspace = () =>
  uuid("workspace_id")
    .notNull()
    .references(() => workspaces.id);

/** What is told of a reading without opening it. */
export type ReadingSummary = Pick<ImageReading, "epk" | "problems"> & {
  characteristics: number;
  notRead: number;
};

/** A revision's image read by a description: the values are a packed blob, since they may be many. */
export const imageReadings = pgTable(
  "image_readings",
  {
    workspaceId: workspace(),
    revisionId: uuid("revision_id").notNull(),
    descriptionId: uuid("description_id")
      .notNull()
      .references(() => descriptions.id),
    readerVersion: text("reader_version").notNull(),
    /** JSON of the reading, packed by gzip. */
    blobSha256: text("blob_sha256").notNull(),
    summary: jsonb("summary").$type<ReadingSummary>().notNull(),
    createdAt: createdAt(),
  },
  (t) => [
    primaryKey({ columns: [t.revisionId, t.descriptionId, t.readerVersion] }),
    foreignKey({
      columns: [t.workspaceId, t.revisionId],
      foreignColumns: [revisions.workspaceId, revisions.id],
    }),
    foreignKey({ columns: [t.workspaceId, t.blobSha256], foreignColumns: [blobs.workspaceId, blobs.sha256] }),
  ],
);

/** What the stored image was last found to be: its fingerprint, and the declared regions of one version. */
export interface ImageCheck {
  fingerprintHolds: boolean;
  regions: RegionResult[];
}

export const imageChecks = pgTable(
  "image_checks",
  {
    workspaceId: workspace(),
    revisionId: uuid("revision_id").notNull(),
    /** Version of the programme's checksum regions; 0 where none was declared. */
    regionsVersion: integer("regions_version").notNull(),
    result: jsonb("result").$type<ImageCheck>().notNull(),
    createdAt: createdAt(),
  },
  (t) => [
    primaryKey({ columns: [t.revisionId, t.regionsVersion] }),
    foreignKey({
      columns: [t.workspaceId, t.revisionId],
      foreignColumns: [revisions.workspaceId, revisions.id],
    }),
  ],
);

/** What differs from revision A to revision B, for exact inputs; other descriptions or another reader are another row. */
export const changeSets = pgTable(
  "change_sets",
  {
    id: idColumn(),
    workspaceId: workspace(),
    programmeId: uuid("programme_id").notNull(),
    revisionAId: uuid("revision_a_id").notNull(),
    revisionBId: uuid("revision_b_id").notNull(),
    inputSha256: text("input_sha256").notNull(),
    readerVersion: text("reader_version").notNull(),
    state: computeStateEnum("state").notNull().default("computing"),
    /** A plain sentence when it could not be computed. */
    failure: text("failure"),
    result: jsonb("result").$type<ChangeSet>(),
    /** Digest of the result's canonical JSON. */
    resultSha256: text("result_sha256"),
    createdAt: createdAt(),
  },
  (t) => [
    unique("change_sets_input").on(t.revisionAId, t.revisionBId, t.inputSha256),
    unique("change_sets_tenant").on(t.workspaceId, t.id),
    index("change_sets_of_b").on(t.revisionBId),
    foreignKey({
      columns: [t.workspaceId, t.revisionAId],
      foreignColumns: [revisions.workspaceId, revisions.id],
    }),
    foreignKey({
      columns: [t.workspaceId, t.revisionBId],
      foreignColumns: [revisions.workspaceId, revisions.id],
    }),
    check("change_sets_two_sides", sql`${t.revisionAId} <> ${t.revisionBId}`),
    check("change_sets_ready", sql`(${t.state} = 'ready') = (${t.result} is not null)`),
  ],
);

/** A column that a run's log has, as far as links need it. */
export interface FoundColumn {
  title: string;
  channel: string | null;
  unit: string;
}

export const coverages = pgTable(
  "coverages",
  {
    workspaceId: workspace(),
    changeSetId: uuid("change_set_id").notNull(),
    /** Of the change set, the runs with their keys, and the links. */
    inputSha256: text("input_sha256").notNull(),
    state: computeStateEnum("state").notNull().default("computing"),
    failure: text("failure"),
    result: jsonb("result").$type<Coverage>(),
    resultSha256: text("result_sha256"),
    /** Columns of the logs that were read: what axes can be linked to. */
    columns: jsonb("columns").$type<FoundColumn[]>(),
    createdAt: createdAt(),
  },
  (t) => [
    primaryKey({ columns: [t.changeSetId, t.inputSha256] }),
    foreignKey({
      columns: [t.workspaceId, t.changeSetId],
      foreignColumns: [changeSets.workspaceId, changeSets.id],
    }),
    check("coverages_ready", sql`(${t.state} = 'ready') = (${t.result} is not null)`),
  ],
);

/** What each kind of setting holds. */
export interface CalibrationSettings {
  relevance_marks: RelevanceMark[];
  axis_links: AxisLink[];
  checksum_regions: ChecksumRegion[];
}

/** Versioned by kind: old versions stay, newest counts. */
export const calibrationSettings = pgTable(
  "calibration_settings",
  {
    id: idColumn(),
    workspaceId: workspace(),
    programmeId: uuid("programme_id").notNull(),
    kind: calibrationSettingEnum("kind").notNull(),
    version: integer("version").notNull(),
    content: jsonb("content").$type<CalibrationSettings[keyof CalibrationSettings]>().notNull(),
    createdBy: uuid("created_by")
      .notNull()
      .references(() => users.id),
    createdAt: createdAt(),
  },
  (t) => [
    unique("calibration_settings_version").on(t.programmeId, t.kind, t.version),
    foreignKey({
      columns: [t.workspaceId, t.programmeId],
      foreignColumns: [programmes.workspaceId, programmes.id],
    }),
  ],
);

/** A person's own marks: each holds for one content of a change and no other. */
export const lookedAt = pgTable(
  "looked_at",
  {
    workspaceId: workspace(),
    userId: uuid("user_id")
      .notNull()
      .references(() => users.id),
    revisionId: uuid("revision_id").notNull(),
    /** Digest of the change: its name and what it was and became. */
    digest: text("digest").notNull(),
    createdAt: createdAt(),
  },
  (t) => [
    primaryKey({ columns: [t.userId, t.revisionId, t.digest] }),
    foreignKey({
      columns: [t.workspaceId, t.revisionId],
      foreignColumns: [revisions.workspaceId, revisions.id],
    }),
  ],
);

/** A second lead's signed agreement to a change of emission- or safety-relevant functions; it holds for exactly what was seen. */
export const secondAgreements = pgTable(
  "second_agreements",
  {
    id: idColumn(),
    workspaceId: workspace(),
    revisionId: uuid("revision_id").notNull(),
    changeSetId: uuid("change_set_id").notNull(),
    /** Digest of the change set's result and of what in it is marked. */
    seenSha256: text("seen_sha256").notNull(),
    leadId: uuid("lead_id")
      .notNull()
      .references(() => users.id),
    leadName: text("lead_name").notNull(),
    reason: text("reason").notNull(),
    reauthMethod: text("reauth_method").notNull(),
    createdAt: createdAt(),
  },
  (t) => [
    unique("second_agreements_once").on(t.revisionId, t.seenSha256, t.leadId),
    foreignKey({
      columns: [t.workspaceId, t.revisionId],
      foreignColumns: [revisions.workspaceId, revisions.id],
    }),
    foreignKey({
      columns: [t.workspaceId, t.changeSetId],
      foreignColumns: [changeSets.workspaceId, changeSets.id],
    }),
    check("second_agreements_reason", sql`btrim(${t.reason}) <> ''`),
  ],
);
