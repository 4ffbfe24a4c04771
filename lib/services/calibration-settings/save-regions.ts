import type { z } from "zod";
import { selectComparableRevisions } from "@/db/queries/change-sets";
import { InvalidInputError } from "@/lib/errors";
import { enqueueJob } from "@/lib/jobs/enqueue";
import { saveSetting } from "@/lib/services/calibration-settings/save-setting";
import { saveRegionsSchema } from "@/lib/services/calibration-settings/schema";
import { authorise, type Ctx } from "@/lib/services/ctx";

/**
 * Declares the checksum regions of a programme's images; every image is checked anew.
 * @throws ForbiddenError; NotFoundError; InvalidInputError `named_twice`; ConflictError when a newer version exists
 */
export async function saveChecksumRegions(
  ctx: Ctx,
  input: z.input<typeof saveRegionsSchema>,
): Promise<{ version: number }> {
  authorise(ctx, "checksum_regions.version");
  const { programmeId, basedOnVersion, regions } = saveRegionsSchema.parse(input);
  if (new Set(regions.map(({ name }) => name)).size < regions.length)
    throw new InvalidInputError("named_twice", "Two regions have the same name. Give each one of its own.");
  return await saveSetting(ctx, {
    kind: "checksum_regions",
    programmeId,
    basedOnVersion,
    content: regions,
    event: "checksum_regions.versioned",
    follow: async (tx, { workspaceId }) => {
      const revisions = await selectComparableRevisions(tx, { workspaceId, programmeId });
      for (const { id: revisionId } of revisions)
        await enqueueJob(tx, { name: "read-image", data: { workspaceId, revisionId } });
    },
  });
}
