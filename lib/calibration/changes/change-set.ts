import { compareReadings } from "@/lib/calibration/changes/compare-readings";
import { mergeNotRead, mergeProblems } from "@/lib/calibration/changes/merge-notes";
import type { ChangeSet, RevisionContent, TextDifference } from "@/lib/calibration/changes/types";
import { uncoveredRanges } from "@/lib/calibration/changes/uncovered/uncovered-ranges";
import { changedRanges } from "@/lib/calibration/image/changed-ranges";

export interface ChangeSetOptions {
  /** Whose description both readings come from; "both" (each its own) where nothing is said. */
  readBy?: "both" | "a" | "b";
  /** The difference of the two descriptions' text, worked out elsewhere. */
  descriptionDifference?: TextDifference | null;
}

/**
 * The difference between two revisions: described values that changed, by falling effect, and changed bytes that none of them
 * explains. With one reading or none, bytes only. Raw numbers decide what changed. Bounded: 400,000 cells in full, 500 uncovered
 * ranges (the longest), totals always. Pure and deterministic.
 */
export function changeSetOf(
  a: RevisionContent,
  b: RevisionContent,
  options: ChangeSetOptions = {},
): ChangeSet {
  const ranges = changedRanges(a.image, b.image);
  const compared = a.reading && b.reading ? compareReadings(a.reading, b.reading) : null;
  const uncovered = uncoveredRanges(a, b, ranges, compared?.explained ?? []);
  const problems = mergeProblems(a.reading, b.reading);
  if (!compared && (a.reading || b.reading)) {
    problems.push(
      "Only one of the two images was read by a description, so values can't be compared; changed bytes are listed.",
    );
  }
  return {
    change_set: 1,
    readBy: compared ? (options.readBy ?? "both") : "none",
    identical: ranges.length === 0,
    changedBytes: ranges.reduce((sum, { length }) => sum + length, 0),
    changedRanges: ranges.length,
    characteristics: compared?.changes ?? [],
    uncovered: uncovered.listed,
    uncoveredRanges: uncovered.ranges,
    uncoveredBytes: uncovered.bytes,
    descriptionDifference: options.descriptionDifference ?? null,
    notRead: mergeNotRead(a.reading, b.reading),
    problems: [...problems, ...(compared?.problems ?? []), ...uncovered.problems],
  };
}
