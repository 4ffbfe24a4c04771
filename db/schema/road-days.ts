import {
  boolean,
  date,
  foreignKey,
  integer,
  jsonb,
  pgTable,
  real,
  text,
  unique,
  uuid,
} from "drizzle-orm/pg-core";
import { createdAt, idColumn } from "./column";
import { users } from "./people";
import { programmes } from "./programmes";
import { revisions } from "./revisions";
import { workspaces } from "./workspaces";

/** One line of the safety checklist as confirmed at the road side. */
export interface ChecklistAnswer {
  item: string;
  confirmed: boolean;
  /** Who confirmed it and when (ISO 8601), where it is confirmed. */
  byName?: string;
  at?: string;
}

/** One day on one strip for one programme. `zone` is the road's own time zone (IANA name). */
export const roadDays = pgTable(
  "road_days",
  {
    id: idColumn(),
    workspaceId: uuid("workspace_id")
      .notNull()
      .references(() => workspaces.id),
    programmeId: uuid("programme_id").notNull(),
    day: date("day", { mode: "string" }).notNull(),
    zone: text("zone").notNull(),
    stripName: text("strip_name").notNull(),
    stripLengthM: real("strip_length_m"),
    driver: text("driver").notNull(),
    recorder: text("recorder").notNull(),
    tempC: real("temp_c").notNull(),
    pressureHpa: real("pressure_hpa").notNull(),
    humidityPct: real("humidity_pct").notNull(),
    windNote: text("wind_note").notNull().default(""),
    fuelNote: text("fuel_note").notNull().default(""),
    tyrePressureFrontKpa: real("tyre_pressure_front_kpa"),
    tyrePressureRearKpa: real("tyre_pressure_rear_kpa"),
    /** Mass as tested on that day where it differs from the sheet, e.g. another driver. */
    massKg: real("mass_kg"),
    /** The one image that a null test drives against itself; null on every other road day. Set when it is opened. */
    nullTestRevisionId: uuid("null_test_revision_id"),
    /** Whether that image is written anew wherever the card changes the letter. */
    nullTestRewrites: boolean("null_test_rewrites").notNull().default(false),
    /** Twins a side that the day was planned with; null: what the gate plan asks for. */
    plannedTwins: integer("planned_twins"),
    checklist: jsonb("checklist").$type<ChecklistAnswer[]>().notNull(),
    sample: boolean("sample").notNull().default(false),
    rowVersion: integer("row_version").notNull().default(1),
    createdBy: uuid("created_by")
      .notNull()
      .references(() => users.id),
    createdAt: createdAt(),
  },
  (t) => [
    unique("road_days_tenant").on(t.workspaceId, t.id),
    foreignKey({
      columns: [t.workspaceId, t.programmeId],
      foreignColumns: [programmes.workspaceId, programmes.id],
    }),
    foreignKey({
      columns: [t.workspaceId, t.nullTestRevisionId],
      foreignColumns: [revisions.workspaceId, revisions.id],
    }),
  ],
);
