"use server";

import { revalidatePath } from "next/cache";
import { redirect } from "next/navigation";
import { type FormState, runFormAction } from "@/lib/http/form-action";
import { saveGatePlan } from "@/lib/services/gate-plans/save";
import { saveGatePlanSchema } from "@/lib/services/gate-plans/schema";
import { createProgramme } from "@/lib/services/programmes/create";
import { archiveProgramme, editProgramme } from "@/lib/services/programmes/edit";
import {
  archiveProgrammeSchema,
  editProgrammeSchema,
  endShareSchema,
  newProgrammeSchema,
  shareProgrammeSchema,
} from "@/lib/services/programmes/schema";
import { endShare, shareProgramme } from "@/lib/services/programmes/share";
import { saveVehicleSheet } from "@/lib/services/vehicle-sheets/save";
import { saveVehicleSheetSchema } from "@/lib/services/vehicle-sheets/schema";

const PAGE = "/programmes/[programme]";

/** Makes a programme and goes there. */
export async function createProgrammeAction(input: unknown): Promise<FormState> {
  const state = await runFormAction(newProgrammeSchema, input, createProgramme);
  if (state.ok && state.value) redirect(`/programmes/${state.value.programmeId}`);
  return { ok: false, message: state.message };
}

/** Adds a version of the vehicle sheet. */
export async function saveVehicleSheetAction(input: unknown): Promise<FormState<{ version: number }>> {
  const state = await runFormAction(saveVehicleSheetSchema, input, saveVehicleSheet);
  if (state.ok) revalidatePath(PAGE, "layout");
  return state;
}

/** Adds a version of the gate plan. */
export async function saveGatePlanAction(input: unknown): Promise<FormState<{ version: number }>> {
  const state = await runFormAction(saveGatePlanSchema, input, saveGatePlan);
  if (state.ok) revalidatePath(PAGE, "layout");
  return state;
}

/** Changes name and goal. Fields: programmeId, rowVersion, name, goal. */
export async function editProgrammeAction(_: FormState | null, form: FormData): Promise<FormState> {
  const input = {
    programmeId: form.get("programmeId"),
    rowVersion: Number(form.get("rowVersion")),
    name: form.get("name"),
    goal: form.get("goal"),
  };
  const state = await runFormAction(editProgrammeSchema, input, editProgramme);
  if (state.ok) revalidatePath(PAGE, "page");
  return { ok: state.ok, message: state.message, fields: state.fields };
}

/** Archives, or takes out of the archive. Fields: programmeId, archived (yes or no). */
export async function archiveProgrammeAction(_: FormState | null, form: FormData): Promise<FormState> {
  const input = { programmeId: form.get("programmeId"), archived: form.get("archived") === "yes" };
  const state = await runFormAction(archiveProgrammeSchema, input, archiveProgramme);
  if (state.ok) revalidatePath(PAGE, "page");
  return { ok: state.ok, message: state.message };
}

/** Shares with a reader until a day. Fields: programmeId, userId, expiresOn. */
export async function shareProgrammeAction(_: FormState | null, form: FormData): Promise<FormState> {
  const input = Object.fromEntries(form);
  const state = await runFormAction(shareProgrammeSchema, input, shareProgramme);
  if (state.ok) revalidatePath(PAGE, "page");
  return { ok: state.ok, message: state.message, fields: state.fields };
}

/** Ends a share. Fields: programmeId, userId. */
export async function endShareAction(_: FormState | null, form: FormData): Promise<FormState> {
  const state = await runFormAction(endShareSchema, Object.fromEntries(form), endShare);
  if (state.ok) revalidatePath(PAGE, "page");
  return { ok: state.ok, message: state.message };
}
