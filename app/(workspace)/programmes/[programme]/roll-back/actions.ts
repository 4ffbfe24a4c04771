"use server";

import { redirect } from "next/navigation";
import { type FormState, runFormAction } from "@/lib/http/form-action";
import { rollBack } from "@/lib/services/decisions/roll-back";
import { rollBackInput } from "@/lib/services/decisions/schema";

/** Rolls the programme back to an earlier standing revision and goes to the record. */
export async function rollBackAction(input: unknown): Promise<FormState> {
  const state = await runFormAction(rollBackInput, input, rollBack);
  if (state.ok && state.value) redirect(`/records/${state.value.decisionId}`);
  return { ok: state.ok, message: state.message, fields: state.fields };
}
