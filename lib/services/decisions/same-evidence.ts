import { ConflictError } from "@/lib/errors";
import { whatMoved } from "@/lib/services/comparisons/what-moved";
import type { GateDesk } from "@/lib/services/gates/status";

export const LOOK_AGAIN = "Nothing was decided by you. Open the page again and look once more.";

/** What the lead saw of the comparison: which one, what counted, and what the result shown was computed from. */
export interface SeenEvidence {
  comparisonId: string | null;
  inputSha256: string | null;
  shownInputSha256: string | null;
  calibrationSha256: string | null;
}

/**
 * The evidence must be what the lead saw. It may be stale, as long as it was stale in the same way before the lead.
 * @throws ConflictError `evidence_moved` naming what moved
 */
export function requireSameComparison(
  { comparison, calibration }: Pick<GateDesk, "comparison" | "calibration">,
  seen: SeenEvidence,
): void {
  if ((calibration?.seenSha256 ?? null) !== seen.calibrationSha256)
    throw new ConflictError(
      "evidence_moved",
      `What is known of the changed values has moved since you opened this page: the change set, its coverage, a check of the image or the marks. ${LOOK_AGAIN}`,
    );
  if ((comparison?.comparison.id ?? null) !== seen.comparisonId)
    throw new ConflictError("evidence_moved", `The comparison is another one than you saw. ${LOOK_AGAIN}`);
  if (!comparison) return;
  const { current, shown } = comparison;
  if (current.inputSha256 !== seen.inputSha256) {
    const moved = shown ? whatMoved(shown.input, current.input, current.runs) : [];
    throw new ConflictError(
      "evidence_moved",
      `The evidence has changed since you opened this page: ${moved.join(" ") || "runs, their facts or the vehicle sheet."} ${LOOK_AGAIN}`,
      { moved },
    );
  }
  if ((shown?.inputSha256 ?? null) !== seen.shownInputSha256)
    throw new ConflictError(
      "evidence_moved",
      `The comparison shows another result than you saw: it was computed anew. ${LOOK_AGAIN}`,
    );
}
