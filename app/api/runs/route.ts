import { readJson, route } from "@/lib/http/respond";
import { attachRun } from "@/lib/services/runs/attach";
import { type AttachRunForm, attachRunSchema } from "@/lib/services/runs/schema";

/** Makes a run of an uploaded log. Needs an Idempotency-Key. */
export const POST = route(async ({ ctx, request }) =>
  attachRun(ctx, attachRunSchema.parse(await readJson<AttachRunForm>(request)), {
    idempotencyKey: request.headers.get("idempotency-key") ?? "",
  }),
);
