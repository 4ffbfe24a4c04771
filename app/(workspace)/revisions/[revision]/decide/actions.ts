"use server";

import { revalidatePath } from "next/cache";
import { redirect } from "next/navigation";
import { type FormState, runFormAction } from "@/lib/http/form-action";
import { agreeAsSecondLead } from "@/lib/services/decisions/agree";
import { promoteRevision } from "@/lib/services/decisions/promote";
import { agreeInput, decideInput } from "@/lib/services/decisions/schema";
import { holdRevision, turnDownRevision } from "@/lib/services/decisions/send-back";

/** Promotes, holds or turns down, as the form says, and goes to the record. */
export async function decideAction(input: unknown): Promise<FormState> {
  const state = await runFormAction(decideInput, input, async (ctx, { kind, ...decision }) => {
    switch (kind) {
      case "promote":
        return await promoteRevision(ctx, decision as Parameters<typeof promoteRevision>[1]);
      case "hold":
        return await holdRevision(ctx, decision);
      case "turn_down":
        return await turnDownRevision(ctx, decision);
    }
  });
  if (state.ok && state.value) redirect(`/records/${state.value.decisionId}`);
  return { ok: state.ok, message: state.message, fields: state.fields };
}

/** A second lead agrees to marked changes. Fields: revisionId, touchedSha256, reason, passphrase. */
export async function agreeAction(_: FormState | null, form: FormData): Promise<FormState> {
  const input = {
    revisionId: form.get("revisionId"),
    touchedSha256: form.get("touchedSha256"),
    reason: form.get("reason"),
    passphrase: form.get("passphrase"),
  };
  const state = await runFormAction(agreeInput, input, agreeAsSecondLead);
  if (state.ok) revalidatePath("/revisions/[revision]/decide", "page");
  return { ok: state.ok, message: state.message, fields: state.fields };
}
