import { z } from "zod";
import { ROLES } from "@/lib/policy/actor";

/** An address in the one spelling that is stored: trimmed and in lower case. */
export const emailAddress = z
  .string()
  .trim()
  .toLowerCase()
  .max(254)
  .pipe(z.email("Write an e-mail address, e.g. name@example.org."));

const roles = z
  .array(z.enum(ROLES))
  .min(1, "Choose at least one role.")
  .transform((chosen) => ROLES.filter((role) => chosen.includes(role)));

/** Asked for when the person signed in more than five minutes ago. */
const passphrase = z.string().max(500).optional();

export const inviteSchema = z.object({ email: emailAddress, roles, passphrase });
export const changeRolesSchema = z.object({ userId: z.uuid(), roles, passphrase });
export const disableMemberSchema = z.object({ userId: z.uuid(), passphrase });
