import { sql } from "drizzle-orm";
import { check, foreignKey, jsonb, pgEnum, pgTable, text, unique, uuid } from "drizzle-orm/pg-core";
import type { DescriptionSummary } from "@/lib/services/descriptions/schema";
import { createdAt, idColumn } from "./column";
import { users } from "./people";
import { programmes } from "./programmes";
import { workspaces } from "./workspaces";

export const descriptionStateEnum = pgEnum("description_state", ["reading", "read", "refused"]);

/** One file of a description: the main one comes first. */
export interface KeptFile {
  name: string;
  sha256: string;
  bytes: number;
}

/** One content a programme: revisions that come with the same files share a row. The worker fills in what was understood. */
export const descriptions = pgTable(
  "descriptions",
  {
    id: idColumn(),
    workspaceId: uuid("workspace_id")
      .notNull()
      .references(() => workspaces.id),
    programmeId: uuid("programme_id").notNull(),
    /** Digest over names and contents of the files in their order. */
    sha256: text("sha256").notNull(),
    files: jsonb("files").$type<KeptFile[]>().notNull(),
    state: descriptionStateEnum("state").notNull().default("reading"),
    /** Version of the reader that settled the state; null until then. */
    readerVersion: text("reader_version"),
    summary: jsonb("summary").$type<DescriptionSummary>(),
    /** Why it was refused, in a plain sentence. */
    failure: text("failure"),
    createdBy: uuid("created_by")
      .notNull()
      .references(() => users.id),
    createdAt: createdAt(),
  },
  (t) => [
    unique("descriptions_content").on(t.programmeId, t.sha256),
    unique("descriptions_tenant").on(t.workspaceId, t.programmeId, t.id),
    foreignKey({
      columns: [t.workspaceId, t.programmeId],
      foreignColumns: [programmes.workspaceId, programmes.id],
    }),
    check("descriptions_digest", sql`${t.sha256} ~ '^[0-9a-f]{64}$'`),
    check("descriptions_refused_with_reason", sql`(${t.state} = 'refused') = (${t.failure} is not null)`),
  ],
);
