"use server";

import { revalidatePath } from "next/cache";
import { type FormState, runFormAction } from "@/lib/http/form-action";
import { saveAxisLinks } from "@/lib/services/calibration-settings/save-links";
import { saveRelevanceMarks } from "@/lib/services/calibration-settings/save-marks";
import { saveChecksumRegions } from "@/lib/services/calibration-settings/save-regions";
import {
  saveLinksSchema,
  saveMarksSchema,
  saveRegionsSchema,
} from "@/lib/services/calibration-settings/schema";

/** Pages show the new version. */
function shown(state: FormState<{ version: number }>): FormState<{ version: number }> {
  if (state.ok) revalidatePath("/programmes/[programme]", "layout");
  return state;
}

/** Adds a version of the emission- and safety-relevant marks. */
export async function saveMarksAction(input: unknown): Promise<FormState<{ version: number }>> {
  return shown(await runFormAction(saveMarksSchema, input, saveRelevanceMarks));
}

/** Adds a version of the axis links. */
export async function saveLinksAction(input: unknown): Promise<FormState<{ version: number }>> {
  return shown(await runFormAction(saveLinksSchema, input, saveAxisLinks));
}

/** Adds a version of the checksum regions. */
export async function saveRegionsAction(input: unknown): Promise<FormState<{ version: number }>> {
  return shown(await runFormAction(saveRegionsSchema, input, saveChecksumRegions));
}
