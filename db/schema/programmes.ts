import { boolean, date, integer, jsonb, pgTable, primaryKey, text, unique, uuid } from "drizzle-orm/pg-core";
import type { GatePlan } from "@/lib/gates/plan";
import type { VehicleSheetFigures } from "@/lib/measure/vehicle/vehicle-sheet";
import { createdAt, idColumn, instant } from "./column";
import { users } from "./people";
import { workspaces } from "./workspaces";

export const programmes = pgTable(
  "programmes",
  {
    id: idColumn(),
    workspaceId: uuid("workspace_id")
      .notNull()
      .references(() => workspaces.id),
    name: text("name").notNull(),
    goal: text("goal").notNull().default(""),
    sample: boolean("sample").notNull().default(false),
    /** The revision that stands; kept in step with revisions.state in one transaction. */
    standingRevisionId: uuid("standing_revision_id"),
    nextRevisionNumber: integer("next_revision_number").notNull().default(1),
    rowVersion: integer("row_version").notNull().default(1),
    archivedAt: instant("archived_at"),
    createdBy: uuid("created_by")
      .notNull()
      .references(() => users.id),
    createdAt: createdAt(),
  },
  (t) => [unique("programmes_tenant").on(t.workspaceId, t.id)],
);

/** Versioned: old versions stay, a result names the version it used. */
export const vehicleSheets = pgTable(
  "vehicle_sheets",
  {
    id: idColumn(),
    workspaceId: uuid("workspace_id")
      .notNull()
      .references(() => workspaces.id),
    programmeId: uuid("programme_id")
      .notNull()
      .references(() => programmes.id),
    version: integer("version").notNull(),
    figures: jsonb("figures").$type<VehicleSheetFigures>().notNull(),
    createdBy: uuid("created_by")
      .notNull()
      .references(() => users.id),
    createdAt: createdAt(),
  },
  (t) => [unique("vehicle_sheets_version").on(t.programmeId, t.version)],
);

export const gatePlans = pgTable(
  "gate_plans",
  {
    id: idColumn(),
    workspaceId: uuid("workspace_id")
      .notNull()
      .references(() => workspaces.id),
    programmeId: uuid("programme_id")
      .notNull()
      .references(() => programmes.id),
    version: integer("version").notNull(),
    plan: jsonb("plan").$type<GatePlan>().notNull(),
    createdBy: uuid("created_by")
      .notNull()
      .references(() => users.id),
    createdAt: createdAt(),
  },
  (t) => [unique("gate_plans_version").on(t.programmeId, t.version)],
);

/** A reader sees a programme's released revisions until the share runs out. */
export const programmeShares = pgTable(
  "programme_shares",
  {
    workspaceId: uuid("workspace_id")
      .notNull()
      .references(() => workspaces.id),
    programmeId: uuid("programme_id")
      .notNull()
      .references(() => programmes.id),
    userId: uuid("user_id")
      .notNull()
      .references(() => users.id),
    expiresOn: date("expires_on", { mode: "string" }).notNull(),
    sharedBy: uuid("shared_by")
      .notNull()
      .references(() => users.id),
    createdAt: createdAt(),
  },
  (t) => [primaryKey({ columns: [t.programmeId, t.userId] })],
);
