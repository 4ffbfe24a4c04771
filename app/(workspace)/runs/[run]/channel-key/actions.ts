"use server";

import { revalidatePath } from "next/cache";
import { type FormState, runFormAction } from "@/lib/http/form-action";
import { applyChannelKey } from "@/lib/services/channel-keys/apply";
import { saveChannelKey } from "@/lib/services/channel-keys/save";
import {
  type AppliedKey,
  applyChannelKeySchema,
  saveChannelKeySchema,
} from "@/lib/services/channel-keys/schema";

function done<T>(state: FormState<T>): FormState<T> {
  if (state.ok) revalidatePath("/runs/[run]", "layout");
  return state;
}

/** The whole key, as the page states it. */
export async function saveChannelKeyAction(
  input: unknown,
): Promise<FormState<AppliedKey & { version: number }>> {
  return done(await runFormAction(saveChannelKeySchema, input, saveChannelKey));
}

/** Which saved key a run is read with: its id, or null for none. */
export async function applyChannelKeyAction(input: unknown): Promise<FormState<AppliedKey>> {
  return done(await runFormAction(applyChannelKeySchema, input, applyChannelKey));
}
