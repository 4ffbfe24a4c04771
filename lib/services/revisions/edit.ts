import type { z } from "zod";
import { ConflictError } from "@/lib/errors";
import type { Ctx } from "@/lib/services/ctx";
import { editRevision } from "@/lib/services/revisions/schema";
import { stepRevision } from "@/lib/services/revisions/step";

/** Rewrites what a draft says of itself. @throws ForbiddenError | NotFoundError | ConflictError */
export async function editRevisionText(ctx: Ctx, input: z.input<typeof editRevision>): Promise<void> {
  const { revisionId, rowVersion, ...text } = editRevision.parse(input);
  await stepRevision(ctx, {
    action: "revision.edit",
    revisionId,
    from: ["draft"],
    doing: "edit it",
    event: "revision.updated",
    change: async (_tx, row) => {
      if (row.rowVersion !== rowVersion) {
        throw new ConflictError(
          "revision_moved",
          `R${row.number} was changed meanwhile. Reload the page; your text is still in the form.`,
        );
      }
      const { title, note, changeReason, intendedUse, touchesEmissionOrSafety } = row;
      return {
        set: text,
        data: { old: { title, note, changeReason, intendedUse, touchesEmissionOrSafety }, new: text },
      };
    },
  });
}
