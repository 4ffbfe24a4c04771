import { sql } from "drizzle-orm";
import { check, index, integer, jsonb, pgTable, primaryKey, text, unique, uuid } from "drizzle-orm/pg-core";
import { createdAt, idColumn, instant, wholeNumber } from "./column";
import { users } from "./people";
import { workspaces } from "./workspaces";

/** Append-only and chained: each entry's digest covers the one before. The runtime role may only insert and read. */
export const ledger = pgTable(
  "ledger",
  {
    workspaceId: uuid("workspace_id")
      .notNull()
      .references(() => workspaces.id),
    seq: wholeNumber("seq").notNull(),
    at: instant("at").notNull(),
    actorId: uuid("actor_id").references(() => users.id),
    actorName: text("actor_name").notNull(),
    event: text("event").notNull(),
    subjectType: text("subject_type").notNull(),
    subjectId: uuid("subject_id"),
    /** Programme that the entry belongs to, where there is one. */
    programmeId: uuid("programme_id"),
    data: jsonb("data").$type<Record<string, unknown>>().notNull(),
    requestId: text("request_id"),
    previousSha256: text("previous_sha256").notNull(),
    sha256: text("sha256").notNull(),
  },
  (t) => [
    primaryKey({ columns: [t.workspaceId, t.seq] }),
    unique("ledger_digest").on(t.workspaceId, t.sha256),
    index("ledger_by_programme").on(t.workspaceId, t.programmeId, t.seq),
    index("ledger_by_subject").on(t.workspaceId, t.subjectType, t.subjectId, t.seq),
    check("ledger_sha256", sql`${t.sha256} ~ '^[0-9a-f]{64}$' and ${t.previousSha256} ~ '^[0-9a-f]{64}$'`),
  ],
);

/** Head of the chain; its row lock puts entries of one workspace in one order. */
export const ledgerHeads = pgTable("ledger_heads", {
  workspaceId: uuid("workspace_id")
    .primaryKey()
    .references(() => workspaces.id),
  seq: wholeNumber("seq").notNull(),
  sha256: text("sha256").notNull(),
});

/** Mail caused by a change, written in the change's own transaction and sent by the worker. */
export const mailQueue = pgTable(
  "mail_queue",
  {
    id: idColumn(),
    workspaceId: uuid("workspace_id").references(() => workspaces.id),
    toAddress: text("to_address").notNull(),
    subject: text("subject").notNull(),
    /** Emptied once sent: it may hold a link that opens a door. */
    body: text("body").notNull(),
    /** Not sent any more after this; null = always of use. */
    usefulUntil: instant("useful_until"),
    attempts: integer("attempts").notNull().default(0),
    nextTryAt: instant("next_try_at").notNull().defaultNow(),
    sentAt: instant("sent_at"),
    createdAt: createdAt(),
  },
  (t) => [index("mail_queue_due").on(t.nextTryAt).where(sql`${t.sentAt} is null`)],
);
