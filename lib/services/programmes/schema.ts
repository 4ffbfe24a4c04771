import { z } from "zod";
import { vehicleSheetSchema } from "@/lib/services/vehicle-sheets/schema";

const name = z.string().trim().min(1, "Name the programme.").max(120, "At most 120 characters.");
const goal = z.string().trim().max(1000, "At most 1000 characters.");

export const newProgrammeSchema = z.object({ name, goal, sheet: vehicleSheetSchema });
export type NewProgrammeInput = z.input<typeof newProgrammeSchema>;

export const editProgrammeSchema = z.object({
  programmeId: z.uuid(),
  rowVersion: z.number().int(),
  name,
  goal,
});

export const archiveProgrammeSchema = z.object({ programmeId: z.uuid(), archived: z.boolean() });

export const shareProgrammeSchema = z.object({
  programmeId: z.uuid(),
  userId: z.uuid("Choose a reader."),
  expiresOn: z.iso.date("Write the day on which the share ends."),
});

export const endShareSchema = z.object({ programmeId: z.uuid(), userId: z.uuid() });
