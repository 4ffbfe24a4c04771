import { sql } from "drizzle-orm";
import {
  check,
  foreignKey,
  integer,
  jsonb,
  pgEnum,
  pgTable,
  primaryKey,
  text,
  unique,
  uuid,
} from "drizzle-orm/pg-core";
import type { CampaignResult, CampaignSettings } from "@/lib/measure/types";
import { createdAt, idColumn } from "./column";
import { users } from "./people";
import { revisions } from "./revisions";
import { roadDays } from "./road-days";
import { workspaces } from "./workspaces";

export const comparisonStateEnum = pgEnum("comparison_state", ["waiting", "ready", "failed"]);

/** Side A against side B under fixed settings; its results come and go with the runs. */
export const comparisons = pgTable(
  "comparisons",
  {
    id: idColumn(),
    workspaceId: uuid("workspace_id")
      .notNull()
      .references(() => workspaces.id),
    programmeId: uuid("programme_id").notNull(),
    revisionAId: uuid("revision_a_id").notNull(),
    revisionBId: uuid("revision_b_id").notNull(),
    /** The road day of a null test, whose two sides are one image; null where two revisions are compared. */
    nullTestRoadDayId: uuid("null_test_road_day_id"),
    settings: jsonb("settings").$type<CampaignSettings>().notNull(),
    settingsSha256: text("settings_sha256").notNull(),
    createdBy: uuid("created_by")
      .notNull()
      .references(() => users.id),
    createdAt: createdAt(),
  },
  (t) => [
    unique("comparisons_question")
      .on(t.revisionAId, t.revisionBId, t.nullTestRoadDayId, t.settingsSha256)
      .nullsNotDistinct(),
    unique("comparisons_tenant").on(t.workspaceId, t.id),
    foreignKey({
      columns: [t.workspaceId, t.revisionAId],
      foreignColumns: [revisions.workspaceId, revisions.id],
    }),
    foreignKey({
      columns: [t.workspaceId, t.revisionBId],
      foreignColumns: [revisions.workspaceId, revisions.id],
    }),
    foreignKey({
      columns: [t.workspaceId, t.nullTestRoadDayId],
      foreignColumns: [roadDays.workspaceId, roadDays.id],
    }),
    check(
      "comparisons_two_sides",
      sql`(${t.revisionAId} = ${t.revisionBId}) = (${t.nullTestRoadDayId} is not null)`,
    ),
  ],
);

/** What exactly went into a result: its digest is `inputSha256`; a result whose digest is no longer current is stale. */
export interface ComparisonInput {
  analysisVersion: string;
  sheetVersion: number;
  settings: CampaignSettings;
  runs: {
    runId: string;
    number: number;
    side: "A" | "B";
    logSha256: string;
    leg: string;
    order: number;
    kind: string;
    roadDayId: string;
    fields: string;
  }[];
}

export const comparisonResults = pgTable(
  "comparison_results",
  {
    comparisonId: uuid("comparison_id")
      .notNull()
      .references(() => comparisons.id),
    inputSha256: text("input_sha256").notNull(),
    workspaceId: uuid("workspace_id")
      .notNull()
      .references(() => workspaces.id),
    analysisVersion: text("analysis_version").notNull(),
    sheetVersion: integer("sheet_version").notNull(),
    state: comparisonStateEnum("state").notNull().default("waiting"),
    input: jsonb("input").$type<ComparisonInput>().notNull(),
    result: jsonb("result").$type<CampaignResult>(),
    /** A plain sentence when it could not be computed. */
    failure: text("failure"),
    createdAt: createdAt(),
  },
  (t) => [primaryKey({ columns: [t.comparisonId, t.inputSha256] })],
);
