import { sql } from "drizzle-orm";
import { check, index, integer, jsonb, pgEnum, pgTable, primaryKey, text, uuid } from "drizzle-orm/pg-core";
import { createdAt, idColumn, instant, wholeNumber } from "./column";
import { users } from "./people";
import { workspaces } from "./workspaces";

/** One row a content: "created once, never overwritten" rests on this key, not on the object store. */
export const blobs = pgTable(
  "blobs",
  {
    workspaceId: uuid("workspace_id")
      .notNull()
      .references(() => workspaces.id),
    sha256: text("sha256").notNull(),
    sizeBytes: wholeNumber("size_bytes").notNull(),
    createdAt: createdAt(),
  },
  (t) => [
    primaryKey({ columns: [t.workspaceId, t.sha256] }),
    check("blobs_digest", sql`${t.sha256} ~ '^[0-9a-f]{64}$'`),
  ],
);

export const uploadPurposeEnum = pgEnum("upload_purpose", ["image", "log", "description"]);
export const uploadStateEnum = pgEnum("upload_state", ["open", "complete", "used", "cancelled"]);

/** Bytes on their way in. Only its own user in its own workspace sees it. */
export const uploads = pgTable(
  "uploads",
  {
    id: idColumn(),
    workspaceId: uuid("workspace_id")
      .notNull()
      .references(() => workspaces.id),
    userId: uuid("user_id")
      .notNull()
      .references(() => users.id),
    purpose: uploadPurposeEnum("purpose").notNull(),
    fileName: text("file_name").notNull(),
    declaredBytes: wholeNumber("declared_bytes").notNull(),
    declaredSha256: text("declared_sha256").notNull(),
    stagingKey: text("staging_key").notNull(),
    receivedBytes: wholeNumber("received_bytes").notNull().default(0),
    state: uploadStateEnum("state").notNull().default("open"),
    expiresAt: instant("expires_at").notNull(),
    createdAt: createdAt(),
  },
  (t) => [index("uploads_state").on(t.state, t.expiresAt)],
);

/** What a key was answered with: the same key gives the same answer, another body is refused. */
export const idempotencyKeys = pgTable(
  "idempotency_keys",
  {
    userId: uuid("user_id")
      .notNull()
      .references(() => users.id),
    key: text("key").notNull(),
    requestSha256: text("request_sha256").notNull(),
    status: integer("status").notNull(),
    body: jsonb("body").$type<unknown>().notNull(),
    createdAt: createdAt(),
  },
  (t) => [primaryKey({ columns: [t.userId, t.key] })],
);
