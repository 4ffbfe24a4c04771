import { z } from "zod";

/** Files of one description: the main one first, then those it includes. */
export const descriptionUploads = z.array(z.uuid()).max(50, "A description has at most 50 files.");

/** Gives a revision its description: another one while it is a draft, later only where there is none. */
export const addDescriptionSchema = z.strictObject({
  revisionId: z.uuid(),
  rowVersion: z.int(),
  uploadIds: descriptionUploads.min(1, "Choose the description's files."),
});
export type AddDescription = z.infer<typeof addDescriptionSchema>;
