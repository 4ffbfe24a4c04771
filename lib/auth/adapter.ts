import { createHash } from "node:crypto";
import type { Adapter } from "@auth/core/adapters";
import { DrizzleAdapter } from "@auth/drizzle-adapter";
import type { Database } from "@/db/client";
import { sessions, users, verificationTokens } from "@/db/tables";

/** What the sessions table keeps of a cookie's value: reading the table gives nobody a session. */
export function hashSessionToken(token: string): string {
  return createHash("sha256").update(token).digest("hex");
}

/** The Drizzle adapter with session tokens stored as their SHA-256. */
export function createAdapter(db: Database): Adapter {
  const tables = { usersTable: users, sessionsTable: sessions, verificationTokensTable: verificationTokens };
  // The type asks for an accounts table too; only outside account providers would use it, and there are none.
  const inner = DrizzleAdapter(db, tables as typeof tables & { accountsTable: never });
  return {
    ...inner,
    async createSession(session) {
      await inner.createSession?.({ ...session, sessionToken: hashSessionToken(session.sessionToken) });
      return session;
    },
    async getSessionAndUser(sessionToken) {
      const found = await inner.getSessionAndUser?.(hashSessionToken(sessionToken));
      return found ? { ...found, session: { ...found.session, sessionToken } } : null;
    },
    async updateSession(session) {
      const found = await inner.updateSession?.({
        ...session,
        sessionToken: hashSessionToken(session.sessionToken),
      });
      return found ? { ...found, sessionToken: session.sessionToken } : null;
    },
    async deleteSession(sessionToken) {
      await inner.deleteSession?.(hashSessionToken(sessionToken));
    },
  };
}
