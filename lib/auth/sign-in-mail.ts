import "server-only";
import { enqueueMail } from "@/db/queries/mail";
import { env } from "@/lib/env";
import { database } from "@/lib/runtime";

/** Address of the landing page for a link; opening it consumes nothing, its button does. */
function signInLink(origin: string, email: string, token: string): string {
  const url = new URL("/sign-in/link", origin);
  url.searchParams.set("email", email);
  url.searchParams.set("token", token);
  return url.toString();
}

/** A sign-in mail that could not be sent for an hour is not sent: its link is dead, and nobody waits for it. */
const USEFUL_FOR_S = 60 * 60;

/** Queues the sign-in mail; the worker sends it. The origin is the configured one, never a request's. */
export async function queueSignInMail(email: string, token: string): Promise<void> {
  const link = signInLink(env().AUTH_URL, email, token);
  await enqueueMail(database(), {
    workspaceId: null,
    toAddress: email,
    usefulForS: USEFUL_FOR_S,
    subject: "Your sign-in link for Twinpass",
    body: [
      "You asked to sign in to Twinpass. Open this link and press the button there:",
      "",
      link,
      "",
      "It works once, within ten minutes. If you did not ask for it, do nothing.",
    ].join("\n"),
  });
}
