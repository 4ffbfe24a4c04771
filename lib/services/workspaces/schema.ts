import { z } from "zod";

const name = z.string().trim().min(1, "Name the workspace.").max(120, "At most 120 characters.");
export const personName = z
  .string()
  .trim()
  .min(1, "Write your name: it is printed beside what you do.")
  .max(120);

/** `yourName` is asked for where the person has none yet. */
export const newWorkspaceSchema = z.object({ name, yourName: personName.optional() });
export const renameWorkspaceSchema = z.object({ name });
export const switchWorkspaceSchema = z.object({ workspaceId: z.uuid() });
