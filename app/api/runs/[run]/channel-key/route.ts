import { readJson, requireUuid, route } from "@/lib/http/respond";
import { previewRun } from "@/lib/services/channel-keys/preview-run";
import { previewRunSchema } from "@/lib/services/channel-keys/schema";

/** The run's log read with a key that is being tried out; nothing is kept. */
export const POST = route<{ run: string }>(async ({ ctx, params, request }) => {
  const { key } = previewRunSchema.parse(await readJson(request));
  return await previewRun(ctx, { runId: requireUuid(params.run), key });
});
