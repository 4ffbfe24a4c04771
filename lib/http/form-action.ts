import "server-only";
import { randomUUID } from "node:crypto";
import { unstable_rethrow } from "next/navigation";
import type { z } from "zod";
import { type Person, requireAskerOrThrow, requireCtxOrThrow } from "@/lib/auth/current";
import { errorBody, requireOwnOrigin } from "@/lib/http/respond";
import type { Asker } from "@/lib/services/asker";
import type { Ctx } from "@/lib/services/ctx";

/** What a form shows after it was sent. */
export interface FormState<T = unknown> {
  ok: boolean;
  message?: string;
  /** Plain sentences by field name. */
  fields?: Record<string, string[] | undefined>;
  value?: T;
}

async function asFormState<T>(work: () => Promise<T>): Promise<FormState<T>> {
  try {
    await requireOwnOrigin();
    return { ok: true, value: await work() };
  } catch (error) {
    unstable_rethrow(error);
    const { body } = errorBody(error, randomUUID());
    return { ok: false, message: String(body.message), fields: body.fields as FormState["fields"] };
  }
}

/** As runFormAction, for a person outside any one workspace: their account, a new workspace, an invitation. */
export async function runPersonAction<Input, T>(
  schema: z.ZodType<Input>,
  input: unknown,
  work: (as: { asker: Asker; person: Person }, input: Input) => Promise<T>,
): Promise<FormState<T>> {
  return await asFormState(async () => work(await requireAskerOrThrow(), schema.parse(input)));
}

/** As runFormAction, for somebody who is not signed in: asking for a link, using it. */
export async function runOpenAction<Input, T>(
  schema: z.ZodType<Input>,
  input: unknown,
  work: (input: Input) => Promise<T>,
): Promise<FormState<T>> {
  return await asFormState(async () => work(schema.parse(input)));
}

/**
 * Runs a verb for a form: origin, session, schema, verb; errors become sentences. A redirect inside `work` passes through.
 * @param input what the form sent, unparsed
 */
export async function runFormAction<Input, T>(
  schema: z.ZodType<Input>,
  input: unknown,
  work: (ctx: Ctx, input: Input) => Promise<T>,
): Promise<FormState<T>> {
  return await asFormState(async () => work(await requireCtxOrThrow(), schema.parse(input)));
}
