"use server";

import { revalidatePath } from "next/cache";
import { redirect } from "next/navigation";
import { type FormState, runPersonAction } from "@/lib/http/form-action";
import { createWorkspace } from "@/lib/services/workspaces/create";
import { newWorkspaceSchema, switchWorkspaceSchema } from "@/lib/services/workspaces/schema";
import { switchWorkspace } from "@/lib/services/workspaces/switch";

/** Makes a workspace and looks at it. Fields: name, yourName where the person has none. */
export async function createWorkspaceAction(_: FormState | null, form: FormData): Promise<FormState> {
  const input = { name: form.get("name"), yourName: form.get("yourName") ?? undefined };
  const state = await runPersonAction(newWorkspaceSchema, input, async ({ asker, person }, wanted) => {
    const made = await createWorkspace(asker, wanted);
    await switchWorkspace(asker, person.tokenHash, made);
  });
  if (!state.ok) return { ok: false, message: state.message, fields: state.fields };
  revalidatePath("/", "layout");
  redirect("/programmes");
}

/** Looks at another workspace of the person. A workspace that is not theirs changes nothing. */
export async function switchWorkspaceAction(form: FormData): Promise<void> {
  const input = { workspaceId: form.get("workspaceId") };
  await runPersonAction(switchWorkspaceSchema, input, ({ asker, person }, wanted) =>
    switchWorkspace(asker, person.tokenHash, wanted),
  );
  revalidatePath("/", "layout");
  redirect("/programmes");
}
