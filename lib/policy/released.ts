import type { Actor } from "@/lib/policy/actor";

/** States in which a revision, with its runs and comparisons, is released to readers of a shared programme: it stands or stood. */
export const RELEASED_STATES: ReadonlySet<string> = new Set(["promoted", "superseded", "rolled_back"]);

/** Decisions that a reader of a shared programme may see: those after which a revision stands. */
export const RELEASING_KINDS: ReadonlySet<string> = new Set(["as_found", "promote", "roll_back"]);

/** Whether reader is the only role: such a person sees released things only. */
export function isReaderOnly({ roles }: Pick<Actor, "roles">): boolean {
  return roles.every((role) => role === "reader");
}
