"use server";

import { revalidatePath } from "next/cache";
import { redirect } from "next/navigation";
import { type FormState, runFormAction } from "@/lib/http/form-action";
import { confirmChecklist } from "@/lib/services/road-days/confirm-checklist";
import { createRoadDay } from "@/lib/services/road-days/create";
import { editRoadDay } from "@/lib/services/road-days/edit";
import { confirmChecklistSchema, editRoadDaySchema, newRoadDaySchema } from "@/lib/services/road-days/schema";

const PAGE = "/road-days/[roadDay]";

/** Opens a road day and goes there. */
export async function createRoadDayAction(input: unknown): Promise<FormState> {
  const state = await runFormAction(newRoadDaySchema, input, createRoadDay);
  if (state.ok && state.value) redirect(`/road-days/${state.value.id}`);
  return { ok: state.ok, message: state.message, fields: state.fields };
}

/** Corrects a road day's figures. */
export async function editRoadDayAction(input: unknown): Promise<FormState> {
  const state = await runFormAction(editRoadDaySchema, input, editRoadDay);
  if (state.ok) revalidatePath(PAGE, "page");
  return { ok: state.ok, message: state.message, fields: state.fields };
}

/** Writes down which lines of the checklist are confirmed. Fields: roadDayId, confirmed (several). */
export async function confirmChecklistAction(_: FormState | null, form: FormData): Promise<FormState> {
  const input = { roadDayId: form.get("roadDayId"), confirmed: form.getAll("confirmed") };
  const state = await runFormAction(confirmChecklistSchema, input, confirmChecklist);
  if (state.ok) revalidatePath(PAGE, "page");
  return { ok: state.ok, message: state.message };
}
