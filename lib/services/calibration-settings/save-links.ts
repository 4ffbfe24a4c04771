import type { z } from "zod";
import { selectComparableRevisions } from "@/db/queries/change-sets";
import { InvalidInputError } from "@/lib/errors";
import { saveSetting } from "@/lib/services/calibration-settings/save-setting";
import { saveLinksSchema } from "@/lib/services/calibration-settings/schema";
import { refreshCoverageOf } from "@/lib/services/change-sets/refresh-coverage";
import { authorise, type Ctx } from "@/lib/services/ctx";

/**
 * Remembers which channel of the logs moves along which axis, for the whole programme; coverage is worked out anew.
 * @throws ForbiddenError; NotFoundError; InvalidInputError `linked_twice`; ConflictError when a newer version exists
 */
export async function saveAxisLinks(
  ctx: Ctx,
  input: z.input<typeof saveLinksSchema>,
): Promise<{ version: number }> {
  authorise(ctx, "axis_links.version");
  const { programmeId, basedOnVersion, links } = saveLinksSchema.parse(input);
  const linked = new Set(links.map(({ quantity }) => quantity));
  if (linked.size < links.length)
    throw new InvalidInputError("linked_twice", "One quantity is linked to two channels. Keep one of them.");
  return await saveSetting(ctx, {
    kind: "axis_links",
    programmeId,
    basedOnVersion,
    content: links,
    event: "axis_links.versioned",
    follow: async (tx, { workspaceId }) => {
      const revisions = await selectComparableRevisions(tx, { workspaceId, programmeId });
      for (const { id: revisionId } of revisions)
        await refreshCoverageOf(tx, { workspaceId }, { revisionId });
    },
  });
}
