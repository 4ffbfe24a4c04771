import "server-only";
import { Auth, raw } from "@auth/core";
import { Verification } from "@auth/core/errors";
import { cookies, headers } from "next/headers";
import { countTry, selectSession } from "@/db/queries/people";
import { hashSessionToken } from "@/lib/auth/adapter";
import { authConfig, EMAIL_PROVIDER, signIn } from "@/lib/auth/config";
import { ownPath } from "@/lib/auth/own-path";
import { sessionCookieName, setSessionCookie } from "@/lib/auth/session-cookie";
import { endCurrentSession } from "@/lib/auth/start-session";
import { env } from "@/lib/env";
import { TooManyRequestsError, UnavailableError } from "@/lib/errors";
import { clientAddress } from "@/lib/http/client-address";
import { logger } from "@/lib/logger";
import { database } from "@/lib/runtime";

const LINKS_PER_ADDRESS_AND_HOUR = 5;
/** authorisation.csv, A02; only behind a trusted edge, else everybody would seem to be one client. */
const LINKS_PER_CLIENT_AND_HOUR = 20;
/** From here on people are alarmed, and nobody is locked out. */
const LINKS_PER_HOUR_ALARM = 200;
/** Hard stop that spares the mail server; far above what the per-address and per-client limits let one sender cause. */
const LINKS_PER_HOUR_AT_MOST = 2_000;
/** Set in the browser that asked; holds where to go after signing in. */
const ASKED_HERE_COOKIE = "twinpass.link-asked";
const ASKED_HERE_S = 600;

const tooMany = () =>
  new TooManyRequestsError(
    "too_many_links",
    "Too many sign-in links were asked for. Wait an hour and try again.",
  );

/** Counts a wish for a link; known and unknown addresses alike. A refused one does not count against everybody else. */
async function countLink(email: string): Promise<void> {
  const db = database();
  if ((await countTry(db, { bucket: `link:${email}` })) > LINKS_PER_ADDRESS_AND_HOUR) throw tooMany();
  const client = clientAddress(new Headers(await headers()), env().TRUST_PROXY);
  if (client && (await countTry(db, { bucket: `link-client:${client}` })) > LINKS_PER_CLIENT_AND_HOUR)
    throw tooMany();
  const inAll = await countTry(db, { bucket: "link" });
  if (inAll === LINKS_PER_HOUR_ALARM || inAll === LINKS_PER_HOUR_AT_MOST)
    logger().error({ event: "security.many_links", inAnHour: inAll });
  if (inAll > LINKS_PER_HOUR_AT_MOST) throw tooMany();
}

/**
 * Mails a sign-in link. The answer is the same whether the address is known or not.
 * @param email as emailAddress of lib/services/members/schema gives it
 * @param next path to go to after signing in
 * @throws TooManyRequestsError after five links an hour for one address, 20 for one client behind a trusted edge, or 2,000 in all;
 *   UnavailableError
 */
export async function requestLink(email: string, next: string): Promise<void> {
  await countLink(email);
  try {
    await signIn(EMAIL_PROVIDER, { email, redirect: false, redirectTo: "/programmes" });
  } catch (error) {
    logger().error({ event: "auth.link_not_sent", err: error });
    throw new UnavailableError("link_not_sent", "The sign-in link could not be sent. Try again in a minute.");
  }
  logger().info({ event: "auth.link_requested" });
  const secure = env().AUTH_URL.startsWith("https:");
  const options = { httpOnly: true, sameSite: "lax", secure, path: "/", maxAge: ASKED_HERE_S } as const;
  (await cookies()).set(ASKED_HERE_COOKIE, ownPath(next), options);
}

/** Whether a link was asked for in this very browser within ten minutes; shown on the landing page. */
export async function wasAskedHere(): Promise<boolean> {
  return (await cookies()).has(ASKED_HERE_COOKIE);
}

/** Runs the library's own callback. @returns the new session's token, or null where the link does not work */
async function callLibrary(email: string, token: string): Promise<string | null> {
  const url = new URL(`/api/auth/callback/${EMAIL_PROVIDER}`, env().AUTH_URL);
  url.searchParams.set("email", email);
  url.searchParams.set("token", token);
  try {
    const answer = await Auth(new Request(url, { headers: new Headers(await headers()) }), {
      ...authConfig(),
      raw,
    });
    return answer.cookies?.find((cookie) => cookie.name === sessionCookieName())?.value ?? null;
  } catch (error) {
    if (error instanceof Verification) return null;
    throw error;
  }
}

/**
 * Uses a link up and starts a session; run by the button and never by a GET. A session that this browser had before ends.
 * @returns the path to go to, or null where the link was used, is too old or is wrong
 */
export async function consumeLink(email: string, token: string): Promise<string | null> {
  const sessionToken = await callLibrary(email, token);
  if (sessionToken === null) {
    logger().warn({ event: "auth.failed", reason: "link used, too old or wrong" });
    return null;
  }
  await endCurrentSession();
  await setSessionCookie(sessionToken);
  const jar = await cookies();
  const next = ownPath(jar.get(ASKED_HERE_COOKIE)?.value);
  jar.delete(ASKED_HERE_COOKIE);
  const session = await selectSession(database(), { tokenHash: hashSessionToken(sessionToken) });
  logger().info({ event: "auth.signed_in", userId: session?.userId });
  return next;
}
