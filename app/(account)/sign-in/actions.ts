"use server";

import type { Route } from "next";
import { redirect } from "next/navigation";
import { z } from "zod";
import { consumeLink, requestLink } from "@/lib/auth/link";
import { ownPath } from "@/lib/auth/own-path";
import { startSampleSession } from "@/lib/auth/sample-people";
import { type FormState, runOpenAction } from "@/lib/http/form-action";
import { emailAddress } from "@/lib/services/members/schema";

/** Where to go after signing in; read from the page's address, kept in a hidden field. */
const next = z.unknown().transform(ownPath);
const askSchema = z.object({ email: emailAddress, next });
const useSchema = z.object({ email: emailAddress, token: z.string().min(1).max(200) });
const sampleSchema = z.object({ userId: z.uuid(), next });

/** Mails a sign-in link; the same answer for a known and an unknown address. */
export async function requestLinkAction(_: FormState | null, form: FormData): Promise<FormState> {
  const input = { email: form.get("email"), next: form.get("next") };
  const state = await runOpenAction(askSchema, input, (asked) => requestLink(asked.email, asked.next));
  if (state.ok) redirect("/sign-in/sent");
  return { ok: false, message: state.message, fields: state.fields };
}

/** Uses a link up: the button of the landing page. */
export async function consumeLinkAction(_: FormState | null, form: FormData): Promise<FormState> {
  const input = { email: form.get("email"), token: form.get("token") };
  const state = await runOpenAction(useSchema, input, (link) => consumeLink(link.email, link.token));
  if (state.ok && state.value) redirect(state.value as Route);
  const used =
    "This link was used already, is older than ten minutes, or is not complete. Ask for a new one.";
  return { ok: false, message: state.ok ? used : state.message };
}

/** Signs in as a person of the demo; does nothing outside demo mode. */
export async function signInAsSampleAction(_: FormState | null, form: FormData): Promise<FormState> {
  const input = { userId: form.get("userId"), next: form.get("next") };
  const state = await runOpenAction(sampleSchema, input, async (wanted) => {
    await startSampleSession(wanted.userId);
    return wanted.next;
  });
  if (state.ok && state.value) redirect(state.value as Route);
  return { ok: false, message: state.message };
}
