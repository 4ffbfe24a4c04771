import "server-only";
import { randomBytes } from "node:crypto";
import { cookies } from "next/headers";
import { createAdapter } from "@/lib/auth/adapter";
import { env } from "@/lib/env";
import { database } from "@/lib/runtime";

const LIFE_MS = 12 * 60 * 60 * 1000;

/** Name of the session cookie, as the sign-in library chooses it from the scheme. */
export function sessionCookieName(): string {
  return env().AUTH_URL.startsWith("https:") ? "__Secure-authjs.session-token" : "authjs.session-token";
}

/** Starts a session for a person without a link; only the demo's one-click sign-in may. */
export async function startSession(userId: string): Promise<void> {
  const sessionToken = randomBytes(32).toString("base64url");
  const expires = new Date(Date.now() + LIFE_MS);
  await createAdapter(database()).createSession?.({ sessionToken, userId, expires });
  const secure = env().AUTH_URL.startsWith("https:");
  (await cookies()).set(sessionCookieName(), sessionToken, {
    httpOnly: true,
    sameSite: "lax",
    secure,
    path: "/",
    expires,
  });
}
