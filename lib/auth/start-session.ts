import "server-only";
import { randomBytes } from "node:crypto";
import { createAdapter } from "@/lib/auth/adapter";
import { SESSION_IDLE_S } from "@/lib/auth/config";
import { readSessionToken, setSessionCookie } from "@/lib/auth/session-cookie";
import { database } from "@/lib/runtime";

/** Ends the session that this browser holds, so that a new sign-in never leaves an old one behind. */
export async function endCurrentSession(): Promise<void> {
  const token = await readSessionToken();
  if (token) await createAdapter(database()).deleteSession?.(token);
}

/** Starts a session for a person without a link; only the demo's one-click sign-in may. */
export async function startSession(userId: string): Promise<void> {
  await endCurrentSession();
  const sessionToken = randomBytes(32).toString("base64url");
  const expires = new Date(Date.now() + SESSION_IDLE_S * 1000);
  await createAdapter(database()).createSession?.({ sessionToken, userId, expires });
  await setSessionCookie(sessionToken);
}
