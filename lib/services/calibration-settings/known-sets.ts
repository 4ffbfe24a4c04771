import { selectSummaries } from "@/db/queries/descriptions";
import type { Ctx } from "@/lib/services/ctx";

/** Descriptions that are looked through, the newest first. */
const MOST_DESCRIPTIONS = 5;

/** Names of functions and groups that a programme's descriptions know, in alphabetical order. Asks no policy: for a page that did. */
export async function knownSets({ db, workspaceId }: Ctx, programmeId: string): Promise<string[]> {
  const summaries = await selectSummaries(db, { workspaceId, programmeId, most: MOST_DESCRIPTIONS });
  return [...new Set(summaries.flatMap(({ setNames }) => setNames))].sort((a, b) => a.localeCompare(b, "en"));
}
