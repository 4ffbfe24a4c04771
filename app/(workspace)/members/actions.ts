"use server";

import { revalidatePath } from "next/cache";
import { z } from "zod";
import { requirePerson } from "@/lib/auth/current";
import { env } from "@/lib/env";
import { type FormState, runFormAction } from "@/lib/http/form-action";
import { changeRoles } from "@/lib/services/members/change-roles";
import { disableMember } from "@/lib/services/members/disable";
import { inviteMember, withdrawInvitation } from "@/lib/services/members/invite";
import { changeRolesSchema, disableMemberSchema, inviteSchema } from "@/lib/services/members/schema";
import { renameWorkspace } from "@/lib/services/workspaces/rename";
import { renameWorkspaceSchema } from "@/lib/services/workspaces/schema";

const PAGE = "/members";

const field = (form: FormData, name: string) => form.get(name) ?? undefined;

/** How identity is confirmed: a young session, else the passphrase of the form. */
async function proofOf(passphrase: string | undefined) {
  const { sessionAgeS } = await requirePerson();
  return { sessionAgeS, passphrase };
}

function answer(state: FormState): FormState {
  if (state.ok) revalidatePath(PAGE, "page");
  return { ok: state.ok, message: state.message, fields: state.fields };
}

/** Invites by mail. Fields: email, roles (several), passphrase. */
export async function inviteAction(_: FormState | null, form: FormData): Promise<FormState> {
  const input = {
    email: form.get("email"),
    roles: form.getAll("roles"),
    passphrase: field(form, "passphrase"),
  };
  const state = await runFormAction(inviteSchema, input, async (ctx, wanted) =>
    inviteMember(ctx, wanted, await proofOf(wanted.passphrase), env().AUTH_URL),
  );
  return answer(state);
}

/** Ends an open invitation. Field: invitationId. */
export async function withdrawInvitationAction(_: FormState | null, form: FormData): Promise<FormState> {
  const schema = z.object({ invitationId: z.uuid() });
  const input = { invitationId: form.get("invitationId") };
  return answer(
    await runFormAction(schema, input, (ctx, { invitationId }) => withdrawInvitation(ctx, invitationId)),
  );
}

/** Changes what a member may do. Fields: userId, roles (several), passphrase. */
export async function changeRolesAction(_: FormState | null, form: FormData): Promise<FormState> {
  const input = {
    userId: form.get("userId"),
    roles: form.getAll("roles"),
    passphrase: field(form, "passphrase"),
  };
  const state = await runFormAction(changeRolesSchema, input, async (ctx, wanted) =>
    changeRoles(ctx, wanted, await proofOf(wanted.passphrase)),
  );
  return answer(state);
}

/** Ends a membership and every session of that person. Fields: userId, passphrase. */
export async function disableMemberAction(_: FormState | null, form: FormData): Promise<FormState> {
  const input = { userId: form.get("userId"), passphrase: field(form, "passphrase") };
  const state = await runFormAction(disableMemberSchema, input, async (ctx, wanted) =>
    disableMember(ctx, wanted, await proofOf(wanted.passphrase)),
  );
  return answer(state);
}

/** Renames the workspace. Field: name. */
export async function renameWorkspaceAction(_: FormState | null, form: FormData): Promise<FormState> {
  const state = await runFormAction(renameWorkspaceSchema, { name: form.get("name") }, renameWorkspace);
  // The name stands in the frame around every page too.
  if (state.ok) revalidatePath("/", "layout");
  return answer(state);
}
