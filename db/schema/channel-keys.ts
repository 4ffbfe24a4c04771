import { sql } from "drizzle-orm";
import { check, integer, jsonb, pgTable, text, unique, uuid } from "drizzle-orm/pg-core";
import type { ChannelKey, LogFormat } from "@/lib/logs/types";
import { createdAt, idColumn } from "./column";
import { users } from "./people";
import { workspaces } from "./workspaces";

/** One mapping a logger's header and version, append-only: runs name the version that they were read with. */
export const channelKeys = pgTable(
  "channel_keys",
  {
    id: idColumn(),
    workspaceId: uuid("workspace_id")
      .notNull()
      .references(() => workspaces.id),
    /** Fingerprint of titles, units and format: which files the key fits. */
    headerSha256: text("header_sha256").notNull(),
    format: text("format").$type<LogFormat>().notNull(),
    /** What the testers call the logger. */
    name: text("name").notNull(),
    version: integer("version").notNull(),
    key: jsonb("key").$type<ChannelKey>().notNull(),
    createdBy: uuid("created_by")
      .notNull()
      .references(() => users.id),
    createdAt: createdAt(),
  },
  (t) => [
    unique("channel_keys_tenant").on(t.workspaceId, t.id),
    unique("channel_keys_version").on(t.workspaceId, t.headerSha256, t.version),
    check("channel_keys_header", sql`${t.headerSha256} ~ '^[0-9a-f]{64}$'`),
  ],
);
