"use server";

import { revalidatePath } from "next/cache";
import { redirect } from "next/navigation";
import { type FormState, runFormAction } from "@/lib/http/form-action";
import { changeSettings, openComparison, recomputeComparison } from "@/lib/services/comparisons/open";
import {
  changeSettingsInput,
  comparisonIdInput,
  openComparisonInput,
} from "@/lib/services/comparisons/schema";

/** Opens the comparison of two revisions and goes there. Fields: revisionAId, revisionBId. */
export async function openComparisonAction(_: FormState | null, form: FormData): Promise<FormState> {
  const input = { revisionAId: form.get("revisionAId"), revisionBId: form.get("revisionBId") };
  const state = await runFormAction(openComparisonInput, input, openComparison);
  if (state.ok && state.value) redirect(`/comparisons/${state.value.comparisonId}`);
  return state;
}

/** The same sides under other settings. Fields: comparisonId, factor, rpmStep. */
export async function changeSettingsAction(_: FormState | null, form: FormData): Promise<FormState> {
  const input = {
    comparisonId: form.get("comparisonId"),
    factor: form.get("factor"),
    rpmStep: form.get("rpmStep"),
  };
  const state = await runFormAction(changeSettingsInput, input, changeSettings);
  if (state.ok && state.value) redirect(`/comparisons/${state.value.comparisonId}`);
  return state;
}

/** Computes for what counts now. Field: comparisonId. */
export async function recomputeAction(_: FormState | null, form: FormData): Promise<FormState> {
  const input = { comparisonId: form.get("comparisonId") };
  const state = await runFormAction(comparisonIdInput, input, recomputeComparison);
  if (state.ok) revalidatePath("/comparisons/[comparison]", "page");
  return state;
}
