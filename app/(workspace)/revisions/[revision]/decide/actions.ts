"use server";

import { redirect } from "next/navigation";
import { type FormState, runFormAction } from "@/lib/http/form-action";
import { promoteRevision } from "@/lib/services/decisions/promote";
import { decideInput } from "@/lib/services/decisions/schema";
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
