import "server-only";
import { cookies } from "next/headers";
import { env } from "@/lib/env";

/** However busy, a session ends after thirty days; twelve idle hours end it earlier (lib/auth/config). */
export const SESSION_LIFE_S = 30 * 24 * 60 * 60;

const isSecure = () => env().AUTH_URL.startsWith("https:");

/** `__Host-` binds the cookie to this very host over https; a browser refuses that prefix on plain http. */
export function sessionCookieName(): string {
  return isSecure() ? "__Host-twinpass.session" : "twinpass.session";
}

/** Lives as long as a session may at most: whether it still counts is decided by its row. */
export function sessionCookieOptions() {
  return {
    httpOnly: true,
    sameSite: "lax",
    secure: isSecure(),
    path: "/",
    maxAge: SESSION_LIFE_S,
  } as const;
}

/** The session token of this request's cookie, or null. */
export async function readSessionToken(): Promise<string | null> {
  return (await cookies()).get(sessionCookieName())?.value ?? null;
}

export async function setSessionCookie(token: string): Promise<void> {
  (await cookies()).set(sessionCookieName(), token, sessionCookieOptions());
}
