"use server";

import { redirect } from "next/navigation";
import { z } from "zod";
import { type FormState, runPersonAction } from "@/lib/http/form-action";
import { acceptInvitation } from "@/lib/services/members/accept";
import { personName } from "@/lib/services/workspaces/schema";
import { switchWorkspace } from "@/lib/services/workspaces/switch";

const acceptSchema = z.object({ token: z.string().min(1).max(200), name: personName.optional() });

/** Joins the workspace of an invitation and looks at it. Fields: token, name where the person has none. */
export async function acceptInvitationAction(_: FormState | null, form: FormData): Promise<FormState> {
  const input = { token: form.get("token"), name: form.get("name") ?? undefined };
  const state = await runPersonAction(acceptSchema, input, async ({ asker, person }, wanted) => {
    const joined = await acceptInvitation(asker, wanted);
    await switchWorkspace(asker, person.tokenHash, joined);
  });
  if (state.ok) redirect("/programmes");
  return { ok: false, message: state.message, fields: state.fields };
}
