import "server-only";
import { Auth, raw } from "@auth/core";
import { cookies, headers } from "next/headers";
import { z } from "zod";
import { countTry } from "@/db/queries/people";
import { authConfig, EMAIL_PROVIDER, signIn } from "@/lib/auth/config";
import { env } from "@/lib/env";
import { TooManyRequestsError } from "@/lib/errors";
import { database } from "@/lib/runtime";

const LINKS_PER_ADDRESS_AND_HOUR = 5;
const LINKS_PER_HOUR = 200;
const ASKED_HERE_COOKIE = "twinpass-link-asked";

export const emailSchema = z
  .email("Write an e-mail address, e.g. name@example.org.")
  .trim()
  .toLowerCase()
  .max(254);

/**
 * Mails a sign-in link. The answer is the same whether the address is known or not.
 * @throws TooManyRequestsError after five links an hour for one address, or 200 in all
 */
export async function requestLink(email: string): Promise<void> {
  const db = database();
  const forAddress = await countTry(db, { bucket: `link:${email}` });
  const inAll = await countTry(db, { bucket: "link" });
  if (forAddress > LINKS_PER_ADDRESS_AND_HOUR || inAll > LINKS_PER_HOUR) {
    throw new TooManyRequestsError(
      "too_many_links",
      "Too many sign-in links were asked for. Wait an hour and try again.",
    );
  }
  await signIn(EMAIL_PROVIDER, { email, redirect: false, redirectTo: "/programmes" });
  const jar = await cookies();
  const secure = env().AUTH_URL.startsWith("https:");
  jar.set(ASKED_HERE_COOKIE, "1", { httpOnly: true, sameSite: "lax", secure, path: "/", maxAge: 600 });
}

/** Whether the link was asked for in this very browser; shown on the landing page. */
export async function wasAskedHere(): Promise<boolean> {
  return (await cookies()).has(ASKED_HERE_COOKIE);
}

/**
 * Uses a link up and starts a session: the sign-in library's own callback, run by the button and never by a GET.
 * @returns whether it worked; a used, old or wrong link does not
 */
export async function consumeLink(email: string, token: string): Promise<boolean> {
  const url = new URL(`/api/auth/callback/${EMAIL_PROVIDER}`, env().AUTH_URL);
  url.searchParams.set("email", email);
  url.searchParams.set("token", token);
  const request = new Request(url, { headers: new Headers(await headers()) });
  const answer = await Auth(request, { ...authConfig(), raw });
  const jar = await cookies();
  const target = answer.redirect ?? "";
  if (target.includes("error=")) return false;
  for (const cookie of answer.cookies ?? []) jar.set(cookie.name, cookie.value, cookie.options);
  jar.delete(ASKED_HERE_COOKIE);
  return true;
}
