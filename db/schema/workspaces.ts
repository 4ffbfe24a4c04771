import { sql } from "drizzle-orm";
import {
  boolean,
  check,
  integer,
  pgEnum,
  pgTable,
  primaryKey,
  text,
  uniqueIndex,
  uuid,
} from "drizzle-orm/pg-core";
import { createdAt, idColumn, instant } from "./column";
import { users } from "./people";

export const roleEnum = pgEnum("role", ["reader", "tester", "calibrator", "lead", "admin"]);

export const workspaces = pgTable("workspaces", {
  id: idColumn(),
  name: text("name").notNull(),
  sample: boolean("sample").notNull().default(false),
  /** Next number of a run and of a record in this workspace; taken under the row's lock. */
  nextRunNumber: integer("next_run_number").notNull().default(1),
  nextRecordNumber: integer("next_record_number").notNull().default(1),
  createdAt: createdAt(),
});

/** A membership is disabled, never deleted or reused. */
export const memberships = pgTable(
  "memberships",
  {
    workspaceId: uuid("workspace_id")
      .notNull()
      .references(() => workspaces.id),
    userId: uuid("user_id")
      .notNull()
      .references(() => users.id),
    roles: roleEnum("roles").array().notNull(),
    disabledAt: instant("disabled_at"),
    createdAt: createdAt(),
  },
  (t) => [
    primaryKey({ columns: [t.workspaceId, t.userId] }),
    check("memberships_some_role", sql`cardinality(${t.roles}) > 0`),
  ],
);

/** An invitation is bound to one address, used once, valid seven days. */
export const invitations = pgTable(
  "invitations",
  {
    id: idColumn(),
    workspaceId: uuid("workspace_id")
      .notNull()
      .references(() => workspaces.id),
    email: text("email").notNull(),
    roles: roleEnum("roles").array().notNull(),
    tokenSha256: text("token_sha256").notNull(),
    invitedBy: uuid("invited_by")
      .notNull()
      .references(() => users.id),
    expiresAt: instant("expires_at").notNull(),
    acceptedAt: instant("accepted_at"),
    createdAt: createdAt(),
  },
  (t) => [uniqueIndex("invitations_token").on(t.tokenSha256)],
);
