import type { Queryable } from "@/db/client";
import type { ChangeSetRow } from "@/db/queries/change-sets";
import {
  type CoverageRow,
  selectCoverage,
  selectCoverageState,
  selectNewestCoverage,
} from "@/db/queries/coverages";
import type { FoundColumn } from "@/db/schema/change-sets";
import { type CoverageInput, coverageInput } from "@/lib/services/change-sets/coverage-input";
import type { RevisionChangesView } from "@/lib/services/change-sets/schema";

type Ready = Pick<
  ChangeSetRow,
  "id" | "workspaceId" | "programmeId" | "revisionBId" | "inputSha256" | "result"
>;

type CoverageState = RevisionChangesView["coverage"]["state"];

/** How the coverage of a change set stands, and what it rests on. */
export interface CoverageNow {
  shown: RevisionChangesView["coverage"];
  resultSha256: string | null;
  /** Columns of the logs that were read last; [] until any was. */
  columns: FoundColumn[];
  input: CoverageInput;
}

/** Reads how the coverage of a finished change set stands at this moment; asks no policy. */
export async function coverageNow(db: Queryable, changeSet: Ready): Promise<CoverageNow> {
  const { workspaceId, id: changeSetId, result } = changeSet;
  const input = await coverageInput(db, changeSet);
  const now = await selectCoverage(db, { workspaceId, changeSetId, inputSha256: input.inputSha256 });
  const newest = now?.result ? now : await selectNewestCoverage(db, { workspaceId, changeSetId });
  const state = stateOf(result?.readBy === "none", input, now);
  const hasNone = state === "no_runs" || state === "no_description";
  return {
    shown: {
      state,
      failure: now?.failure ?? null,
      result: hasNone ? null : (newest?.result ?? null),
      moved: !hasNone && newest !== null && newest !== now,
    },
    resultSha256: hasNone ? null : (newest?.resultSha256 ?? null),
    columns: newest?.columns ?? [],
    input,
  };
}

/** How far the coverage of a finished change set is at this moment, without reading what came out; asks no policy. */
export async function coverageStateNow(
  db: Queryable,
  changeSet: Omit<Ready, "result"> & { readBy: string | null },
): Promise<CoverageState> {
  const { workspaceId, id: changeSetId, readBy } = changeSet;
  const input = await coverageInput(db, changeSet);
  const now = await selectCoverageState(db, { workspaceId, changeSetId, inputSha256: input.inputSha256 });
  return stateOf(readBy === "none", input, now);
}

function stateOf(
  isUndescribed: boolean,
  { runs }: CoverageInput,
  now: Pick<CoverageRow, "state"> | null,
): CoverageState {
  if (isUndescribed) return "no_description";
  if (runs.length === 0) return "no_runs";
  return now?.state ?? "not_asked";
}
