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

/** What was understood of a description. */
export interface DescriptionSummary {
  version: string | null;
  project: string;
  modules: { name: string; epk: string | null }[];
  /** Characteristics by type, e.g. MAP: 12; AXIS_PTS for shared axes. */
  counts: Record<string, number>;
  functions: number;
  groups: number;
  /** Names of functions, then of groups: what can be marked as relevant. The first 1,000. */
  setNames: string[];
  /** First 200 of what was skipped, and how many there are. */
  notRead: { keyword: string; name: string; reason: string; line: number }[];
  notReadCount: number;
  missingIncludes: string[];
  /** First 200. */
  notes: string[];
}
