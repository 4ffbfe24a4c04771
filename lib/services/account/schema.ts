import { z } from "zod";
import { personName } from "@/lib/services/workspaces/schema";

const PASSPHRASE_MIN = 12;

export const renamePersonSchema = z.object({ name: personName });

export const passphraseSchema = z
  .object({
    /** The one in force; not needed within five minutes of signing in. */
    old: z.string().max(500).optional(),
    fresh: z
      .string()
      .min(PASSPHRASE_MIN, `At least ${PASSPHRASE_MIN} characters: four unrelated words do well.`)
      .max(500),
    again: z.string(),
  })
  .refine((input) => input.fresh === input.again, { path: ["again"], message: "The two are not the same." });
