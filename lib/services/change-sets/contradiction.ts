import { type RelevanceMark, touchedMarks } from "@/lib/calibration/changes/relevance";
import type { ChangeSet } from "@/lib/calibration/changes/types";

/** Marked functions and characteristics that a change set touches, in words; null where none is. */
function touchedInWords(changes: ChangeSet, marks: readonly RelevanceMark[]): string | null {
  const touched = touchedMarks(changes, marks);
  if (touched.length === 0) return null;
  return touched
    .map(({ mark, characteristics }) => {
      const what = mark.set === "function" ? ` (${characteristics.length} changed)` : "";
      return `${mark.name}${what}, ${mark.relevance}-relevant`;
    })
    .join("; ");
}

/** The revision's own declaration says no, but something marked is touched: a sentence; null where it says nothing wrong. */
export function contradictionOf(
  changes: ChangeSet,
  marks: readonly RelevanceMark[],
  { number, touchesEmissionOrSafety }: { number: number; touchesEmissionOrSafety: boolean | null },
): string | null {
  const touched = touchesEmissionOrSafety === false ? touchedInWords(changes, marks) : null;
  if (touched === null) return null;
  return `R${number} is declared to touch nothing emission- or safety-relevant, but it changes ${touched}.`;
}
