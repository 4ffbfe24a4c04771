import { createHash } from "node:crypto";
import type { Adapter } from "@auth/core/adapters";
import { DrizzleAdapter } from "@auth/drizzle-adapter";
import type { Database } from "@/db/client";
import { insertLinkToken, takeLinkToken } from "@/db/queries/link-tokens";
import { sessions, users, verificationTokens } from "@/db/tables";

/** What the sessions table keeps of a cookie's value: reading the table gives nobody a session. */
export function hashSessionToken(token: string): string {
  return createHash("sha256").update(token).digest("hex");
}

/**
 * The Drizzle adapter with two changes: session tokens are stored as their SHA-256, and how long a link has left is
 * kept and judged by the database's clock.
 */
export function createAdapter(db: Database): Adapter {
  const tables = { usersTable: users, sessionsTable: sessions, verificationTokensTable: verificationTokens };
  // The type asks for an accounts table too; only outside account providers would use it, and there are none.
  const inner = DrizzleAdapter(db, tables as typeof tables & { accountsTable: never });
  return {
    ...inner,
    async createVerificationToken(link) {
      const lifeS = (link.expires.getTime() - Date.now()) / 1000;
      await insertLinkToken(db, { identifier: link.identifier, token: link.token, lifeS });
      return link;
    },
    async useVerificationToken(link) {
      return await takeLinkToken(db, link);
    },
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
