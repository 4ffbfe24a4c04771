import type { z } from "zod";
import type { Ctx } from "@/lib/services/ctx";
import { stepWithReason } from "@/lib/services/revisions/schema";
import { stepRevision } from "@/lib/services/revisions/step";

/** draft or validating → withdrawn, by its calibrator, with a reason. */
export async function withdrawRevision(ctx: Ctx, input: z.input<typeof stepWithReason>): Promise<void> {
  const { revisionId, reason } = stepWithReason.parse(input);
  await stepRevision(ctx, {
    action: "revision.withdraw",
    revisionId,
    from: ["draft", "validating"],
    doing: "withdraw it",
    event: "revision.withdrawn",
    change: async () => ({ set: { state: "withdrawn" }, data: { reason } }),
  });
}
