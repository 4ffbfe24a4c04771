"use server";

import { revalidatePath } from "next/cache";
import type { z } from "zod";
import { type FormState, runFormAction } from "@/lib/http/form-action";
import type { Ctx } from "@/lib/services/ctx";
import { bringRunBack } from "@/lib/services/runs/bring-back";
import { editRunNote } from "@/lib/services/runs/edit-note";
import { bringBackRunSchema, editRunNoteSchema, setAsideRunSchema } from "@/lib/services/runs/schema";
import { setRunAside } from "@/lib/services/runs/set-aside";

async function changeRun<Input>(
  schema: z.ZodType<Input>,
  input: Record<string, unknown>,
  work: (ctx: Ctx, input: Input) => Promise<unknown>,
): Promise<FormState> {
  const { ok, message, fields } = await runFormAction(schema, input, work);
  if (ok) revalidatePath("/runs/[run]", "page");
  return { ok, message, fields };
}

const fieldsOf = (form: FormData, text: "reason" | "note") => ({
  runId: form.get("runId"),
  rowVersion: form.get("rowVersion"),
  [text]: form.get(text) ?? "",
});

/** Fields: runId, rowVersion, reason. */
export async function setRunAsideAction(_: FormState | null, form: FormData): Promise<FormState> {
  return await changeRun(setAsideRunSchema, fieldsOf(form, "reason"), setRunAside);
}

/** Fields: runId, rowVersion, reason. */
export async function bringRunBackAction(_: FormState | null, form: FormData): Promise<FormState> {
  return await changeRun(bringBackRunSchema, fieldsOf(form, "reason"), bringRunBack);
}

/** Fields: runId, rowVersion, note. */
export async function editRunNoteAction(_: FormState | null, form: FormData): Promise<FormState> {
  return await changeRun(editRunNoteSchema, fieldsOf(form, "note"), editRunNote);
}
