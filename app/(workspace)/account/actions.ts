"use server";

import { revalidatePath } from "next/cache";
import { type FormState, runPersonAction } from "@/lib/http/form-action";
import { renamePerson } from "@/lib/services/account/rename";
import { passphraseSchema, renamePersonSchema } from "@/lib/services/account/schema";
import { setPassphrase } from "@/lib/services/account/set-passphrase";

function answer(state: FormState): FormState {
  if (state.ok) revalidatePath("/account", "page");
  return { ok: state.ok, message: state.message, fields: state.fields };
}

/** Changes the person's own name. Field: name. */
export async function renamePersonAction(_: FormState | null, form: FormData): Promise<FormState> {
  const state = await runPersonAction(renamePersonSchema, { name: form.get("name") }, ({ asker }, input) =>
    renamePerson(asker, input),
  );
  // The name stands in the frame around every page too.
  if (state.ok) revalidatePath("/", "layout");
  return answer(state);
}

/** Sets or replaces the signing passphrase. Fields: old, fresh, again. */
export async function setPassphraseAction(_: FormState | null, form: FormData): Promise<FormState> {
  const input = { old: form.get("old") || undefined, fresh: form.get("fresh"), again: form.get("again") };
  return answer(
    await runPersonAction(passphraseSchema, input, ({ asker, person }, wanted) =>
      setPassphrase(asker, wanted, person.sessionAgeS),
    ),
  );
}
