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
import type { ImageSummary } from "@/lib/calibration/image/image-summary";
import { blobs } from "./blobs";
import { createdAt, idColumn, instant, wholeNumber } from "./column";
import { descriptions } from "./descriptions";
import { users } from "./people";
import { programmes } from "./programmes";
import { workspaces } from "./workspaces";

export const revisionStateEnum = pgEnum("revision_state", [
  "draft",
  "validating",
  "in_review",
  "promoted",
  "superseded",
  "turned_down",
  "withdrawn",
  "rolled_back",
]);
export const intendedUseEnum = pgEnum("intended_use", ["road", "closed_course", "bench"]);

export const revisions = pgTable(
  "revisions",
  {
    id: idColumn(),
    workspaceId: uuid("workspace_id")
      .notNull()
      .references(() => workspaces.id),
    programmeId: uuid("programme_id").notNull(),
    number: integer("number").notNull(),
    parentId: uuid("parent_id"),
    state: revisionStateEnum("state").notNull().default("draft"),
    title: text("title").notNull(),
    note: text("note").notNull().default(""),
    changeReason: text("change_reason").notNull().default(""),
    intendedUse: intendedUseEnum("intended_use"),
    /** The calibrator's answer: does it touch emission- or safety-relevant functions? Null = not answered yet. */
    touchesEmissionOrSafety: boolean("touches_emission_or_safety"),
    asFound: boolean("as_found").notNull().default(false),
    /** How the as-found image was read; only there. */
    howRead: text("how_read"),
    imageSha256: text("image_sha256").notNull(),
    imageFileName: text("image_file_name").notNull(),
    imageBytes: wholeNumber("image_bytes").notNull(),
    imageBaseAddress: wholeNumber("image_base_address"),
    imageSummary: jsonb("image_summary").$type<ImageSummary>().notNull(),
    /** By which description the image is read; null where there is none. */
    descriptionId: uuid("description_id"),
    authorId: uuid("author_id")
      .notNull()
      .references(() => users.id),
    submitterId: uuid("submitter_id").references(() => users.id),
    submittedAt: instant("submitted_at"),
    gatePlanVersion: integer("gate_plan_version"),
    /** When it began to stand, the last time; null when it never stood. */
    stoodFrom: instant("stood_from"),
    stoodUntil: instant("stood_until"),
    setAsideAt: instant("set_aside_at"),
    setAsideReason: text("set_aside_reason"),
    barredAt: instant("barred_at"),
    barredReason: text("barred_reason"),
    rowVersion: integer("row_version").notNull().default(1),
    createdAt: createdAt(),
  },
  (t) => [
    unique("revisions_number").on(t.programmeId, t.number),
    unique("revisions_tenant").on(t.workspaceId, t.id),
    uniqueIndex("revisions_one_stands").on(t.programmeId).where(sql`${t.state} = 'promoted'`),
    foreignKey({
      columns: [t.workspaceId, t.programmeId],
      foreignColumns: [programmes.workspaceId, programmes.id],
    }),
    foreignKey({
      columns: [t.workspaceId, t.imageSha256],
      foreignColumns: [blobs.workspaceId, blobs.sha256],
    }),
    foreignKey({
      columns: [t.workspaceId, t.programmeId, t.descriptionId],
      foreignColumns: [descriptions.workspaceId, descriptions.programmeId, descriptions.id],
      name: "revisions_description",
    }),
    foreignKey({ columns: [t.workspaceId, t.parentId], foreignColumns: [t.workspaceId, t.id] }),
    check(
      "revisions_stated_before_validating",
      sql`${t.state} in ('draft','withdrawn') or ${t.asFound} or (btrim(${t.changeReason}) <> '' and ${t.intendedUse} is not null and ${t.touchesEmissionOrSafety} is not null)`,
    ),
  ],
);
