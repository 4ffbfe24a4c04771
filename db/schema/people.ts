import { sql } from "drizzle-orm";
import { boolean, integer, pgTable, primaryKey, text, uniqueIndex, uuid } from "drizzle-orm/pg-core";
import { createdAt, idColumn, instant } from "./column";

/** People. `name`, `email`, `emailVerified` and `image` are spelled as the sign-in adapter expects them. */
export const users = pgTable(
  "users",
  {
    id: idColumn(),
    name: text("name"),
    email: text("email").notNull(),
    emailVerified: instant("email_verified"),
    image: text("image"),
    sample: boolean("sample").notNull().default(false),
    createdAt: createdAt(),
  },
  (t) => [uniqueIndex("users_email").on(sql`lower(${t.email})`)],
);

/** `sessionToken` holds the SHA-256 of the cookie's value, never the value. */
export const sessions = pgTable("sessions", {
  sessionToken: text("session_token").primaryKey(),
  userId: uuid("user_id")
    .notNull()
    .references(() => users.id),
  expires: instant("expires").notNull(),
  createdAt: createdAt(),
  activeWorkspaceId: uuid("active_workspace_id"),
});

/** `token` holds the SHA-256 that the sign-in library makes of the link's token. */
export const verificationTokens = pgTable(
  "verification_tokens",
  {
    identifier: text("identifier").notNull(),
    token: text("token").notNull(),
    expires: instant("expires").notNull(),
  },
  (t) => [primaryKey({ columns: [t.identifier, t.token] })],
);

/** The second component of a decision: a passphrase kept as scrypt hash, locked after five wrong tries. */
export const signingPassphrases = pgTable("signing_passphrases", {
  userId: uuid("user_id")
    .primaryKey()
    .references(() => users.id),
  scryptHash: text("scrypt_hash").notNull(),
  failedTries: integer("failed_tries").notNull().default(0),
  lockedUntil: instant("locked_until"),
  setAt: instant("set_at").notNull().defaultNow(),
});

/** Counters of a time window, e.g. sign-in links per address; rows are renewed, not piled up. */
export const rateLimits = pgTable("rate_limits", {
  bucket: text("bucket").primaryKey(),
  windowStart: instant("window_start").notNull().defaultNow(),
  count: integer("count").notNull().default(0),
});
