import { sql } from "drizzle-orm";
import {
  boolean,
  foreignKey,
  index,
  integer,
  jsonb,
  pgEnum,
  pgTable,
  primaryKey,
  real,
  text,
  unique,
  uniqueIndex,
  uuid,
} from "drizzle-orm/pg-core";
import type { RunTraces } from "@/lib/measure/run/traces";
import type { RunResult } from "@/lib/measure/types";
import { blobs } from "./blobs";
import { channelKeys } from "./channel-keys";
import { createdAt, idColumn, instant, wholeNumber } from "./column";
import { users } from "./people";
import { revisions } from "./revisions";
import { roadDays } from "./road-days";
import { workspaces } from "./workspaces";

export const runKindEnum = pgEnum("run_kind", ["pull", "coast-down", "sprint"]);
export const legEnum = pgEnum("leg", ["out", "back"]);
export const runStateEnum = pgEnum("run_state", ["waiting", "usable", "refused"]);

export const runs = pgTable(
  "runs",
  {
    id: idColumn(),
    workspaceId: uuid("workspace_id")
      .notNull()
      .references(() => workspaces.id),
    programmeId: uuid("programme_id").notNull(),
    roadDayId: uuid("road_day_id").notNull(),
    revisionId: uuid("revision_id").notNull(),
    number: integer("number").notNull(),
    kind: runKindEnum("kind").notNull(),
    leg: legEnum("leg").notNull(),
    /** Place in the driven order of its road day, first = 1. */
    driveOrder: integer("drive_order").notNull(),
    /** Letter of the order card on a null test, where both letters are one image; null on every other road day. */
    letter: text("letter", { enum: ["A", "B"] }),
    gear: integer("gear"),
    startedAt: instant("started_at"),
    tempC: real("temp_c").notNull(),
    pressureHpa: real("pressure_hpa").notNull(),
    humidityPct: real("humidity_pct").notNull(),
    note: text("note").notNull().default(""),
    logSha256: text("log_sha256").notNull(),
    logFileName: text("log_file_name").notNull(),
    logBytes: wholeNumber("log_bytes").notNull(),
    /** Fingerprint of the log's header, by which channel keys fit; null where the log has no header that can be read. */
    headerSha256: text("header_sha256"),
    /** The version of the channel key that the log is read with; null: by what the file says alone. */
    channelKeyId: uuid("channel_key_id"),
    state: runStateEnum("state").notNull().default("waiting"),
    setAsideAt: instant("set_aside_at"),
    setAsideBy: uuid("set_aside_by").references(() => users.id),
    setAsideReason: text("set_aside_reason"),
    /** Whether the result could be seen when the run was set aside. */
    resultWasVisible: boolean("result_was_visible"),
    sample: boolean("sample").notNull().default(false),
    rowVersion: integer("row_version").notNull().default(1),
    testerId: uuid("tester_id")
      .notNull()
      .references(() => users.id),
    createdAt: createdAt(),
  },
  (t) => [
    unique("runs_number").on(t.workspaceId, t.number),
    unique("runs_tenant").on(t.workspaceId, t.id),
    uniqueIndex("runs_same_log_once").on(t.programmeId, t.logSha256).where(sql`${t.setAsideAt} is null`),
    uniqueIndex("runs_one_place_in_order").on(t.roadDayId, t.driveOrder).where(sql`${t.setAsideAt} is null`),
    index("runs_by_revision").on(t.programmeId, t.revisionId),
    foreignKey({
      columns: [t.workspaceId, t.roadDayId],
      foreignColumns: [roadDays.workspaceId, roadDays.id],
    }),
    foreignKey({
      columns: [t.workspaceId, t.revisionId],
      foreignColumns: [revisions.workspaceId, revisions.id],
    }),
    foreignKey({ columns: [t.workspaceId, t.logSha256], foreignColumns: [blobs.workspaceId, blobs.sha256] }),
    foreignKey({
      columns: [t.workspaceId, t.channelKeyId],
      foreignColumns: [channelKeys.workspaceId, channelKeys.id],
    }),
  ],
);

/** One verdict a run, analysis version and input; a new version adds a row, the old one stays. */
export const runAnalyses = pgTable(
  "run_analyses",
  {
    runId: uuid("run_id")
      .notNull()
      .references(() => runs.id),
    inputSha256: text("input_sha256").notNull(),
    workspaceId: uuid("workspace_id")
      .notNull()
      .references(() => workspaces.id),
    analysisVersion: text("analysis_version").notNull(),
    sheetVersion: integer("sheet_version").notNull(),
    result: jsonb("result").$type<RunResult>().notNull(),
    traces: jsonb("traces").$type<RunTraces>(),
    createdAt: createdAt(),
  },
  (t) => [primaryKey({ columns: [t.runId, t.inputSha256] })],
);
