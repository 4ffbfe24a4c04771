import "server-only";
import { randomUUID } from "node:crypto";
import { unstable_rethrow } from "next/navigation";
import type { z } from "zod";
import { requireCtxOrThrow } from "@/lib/auth/current";
import { errorBody, requireOwnOrigin } from "@/lib/http/respond";
import type { Ctx } from "@/lib/services/ctx";

/** What a form shows after it was sent. */
export interface FormState<T = unknown> {
  ok: boolean;
  message?: string;
  /** Plain sentences by field name. */
  fields?: Record<string, string[] | undefined>;
  value?: T;
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
  try {
    await requireOwnOrigin();
    const ctx = await requireCtxOrThrow();
    return { ok: true, value: await work(ctx, schema.parse(input)) };
  } catch (error) {
    unstable_rethrow(error);
    const { body } = errorBody(error, randomUUID());
    return { ok: false, message: String(body.message), fields: body.fields as FormState["fields"] };
  }
}
