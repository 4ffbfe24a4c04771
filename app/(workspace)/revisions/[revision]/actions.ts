"use server";

import { revalidatePath } from "next/cache";
import { type FormState, runFormAction } from "@/lib/http/form-action";
import { askForChangeSet } from "@/lib/services/change-sets/ask";
import { setLookedAt } from "@/lib/services/change-sets/looked-at";
import { askForChangeSetSchema, setLookedAtSchema } from "@/lib/services/change-sets/schema";

const PAGE = "/revisions/[revision]";

/** Has two revisions set against each other, or coverage worked out. Fields: revisionId, againstId. */
export async function askForChangesAction(_: FormState | null, form: FormData): Promise<FormState> {
  const input = { revisionId: form.get("revisionId"), againstId: form.get("againstId") };
  const state = await runFormAction(askForChangeSetSchema, input, askForChangeSet);
  if (state.ok) revalidatePath(PAGE, "page");
  return { ok: state.ok, message: state.message };
}

/** Marks changes as looked at, or takes the marks back. Fields: revisionId, changeSetId, digest (each), looked (yes or no). */
export async function lookedAtAction(_: FormState | null, form: FormData): Promise<FormState> {
  const input = {
    revisionId: form.get("revisionId"),
    changeSetId: form.get("changeSetId"),
    digests: form.getAll("digest"),
    looked: form.get("looked") === "yes",
  };
  const state = await runFormAction(setLookedAtSchema, input, setLookedAt);
  if (state.ok) revalidatePath(PAGE, "page");
  return { ok: state.ok, message: state.message };
}
