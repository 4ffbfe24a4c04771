import type { z } from "zod";
import { InvalidInputError } from "@/lib/errors";
import { saveSetting } from "@/lib/services/calibration-settings/save-setting";
import { saveMarksSchema } from "@/lib/services/calibration-settings/schema";
import { authorise, type Ctx } from "@/lib/services/ctx";

/**
 * Marks functions and characteristics of a programme as emission- or safety-relevant. They count for every revision from now on.
 * @throws ForbiddenError; NotFoundError; InvalidInputError `marked_twice`; ConflictError when a newer version exists
 */
export async function saveRelevanceMarks(
  ctx: Ctx,
  input: z.input<typeof saveMarksSchema>,
): Promise<{ version: number }> {
  authorise(ctx, "relevance_marks.version");
  const { programmeId, basedOnVersion, marks } = saveMarksSchema.parse(input);
  const names = new Set<string>();
  for (const { set, name, relevance } of marks) {
    const mark = `${set} ${name} ${relevance}`;
    if (names.has(mark))
      throw new InvalidInputError("marked_twice", `${name} is marked twice. Leave one out.`);
    names.add(mark);
  }
  return await saveSetting(ctx, {
    kind: "relevance_marks",
    programmeId,
    basedOnVersion,
    content: marks,
    event: "relevance_marks.versioned",
  });
}
