import type { RevisionState } from "@/db/queries/revisions";
import { STATE_WORDS } from "@/lib/services/revisions/load";

/** What a revision is now, as the end of a sentence: "it stands", "it is turned down". */
export function stateSentence(state: RevisionState): string {
  return state === "promoted" ? "it stands" : `it is ${STATE_WORDS[state]}`;
}
