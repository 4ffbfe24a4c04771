"use server";

import { revalidatePath } from "next/cache";
import { type FormState, runFormAction } from "@/lib/http/form-action";
import { adoptRevisionAsFound } from "@/lib/services/revisions/adopt";
import { askForDecision } from "@/lib/services/revisions/ask-for-decision";
import { editRevisionText } from "@/lib/services/revisions/edit";
import { adoptAsFound, editRevision, revisionStep, stepWithReason } from "@/lib/services/revisions/schema";
import { bringRevisionBack, setRevisionAside } from "@/lib/services/revisions/set-aside";
import { startValidating } from "@/lib/services/revisions/start-validating";
import { withdrawRevision } from "@/lib/services/revisions/withdraw";

/** The page shows the new state after a step. */
function shown(state: FormState): FormState {
  if (state.ok) revalidatePath("/revisions/[revision]", "page");
  return state;
}

const withReason = (form: FormData) => ({ revisionId: form.get("revisionId"), reason: form.get("reason") });

/** Rewrites a draft's text; the form sends its parsed values. */
export async function editRevisionAction(input: unknown): Promise<FormState> {
  return shown(await runFormAction(editRevision, input, editRevisionText));
}

/** draft → validating. Field: revisionId. */
export async function startValidatingAction(_: FormState | null, form: FormData): Promise<FormState> {
  return shown(await runFormAction(revisionStep, { revisionId: form.get("revisionId") }, startValidating));
}

/** validating → in review. Field: revisionId. */
export async function askForDecisionAction(_: FormState | null, form: FormData): Promise<FormState> {
  return shown(await runFormAction(revisionStep, { revisionId: form.get("revisionId") }, askForDecision));
}

/** → withdrawn. Fields: revisionId, reason. */
export async function withdrawAction(_: FormState | null, form: FormData): Promise<FormState> {
  return shown(await runFormAction(stepWithReason, withReason(form), withdrawRevision));
}

/** Sets a draft aside. Fields: revisionId, reason. */
export async function setAsideAction(_: FormState | null, form: FormData): Promise<FormState> {
  return shown(await runFormAction(stepWithReason, withReason(form), setRevisionAside));
}

/** Brings a draft back. Fields: revisionId, reason. */
export async function bringBackAction(_: FormState | null, form: FormData): Promise<FormState> {
  return shown(await runFormAction(stepWithReason, withReason(form), bringRevisionBack));
}

/** A lead adopts a draft as found. Fields: revisionId, reason, howRead, secondReadEqual, passphrase. */
export async function adoptAction(_: FormState | null, form: FormData): Promise<FormState> {
  const input = {
    ...withReason(form),
    howRead: form.get("howRead"),
    secondReadEqual: form.get("secondReadEqual") === "on",
    passphrase: form.get("passphrase"),
  };
  return shown(await runFormAction(adoptAsFound, input, adoptRevisionAsFound));
}
