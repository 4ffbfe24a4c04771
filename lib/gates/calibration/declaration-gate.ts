import { type TouchedMark, touchedMarks } from "@/lib/calibration/changes/relevance";
import type { ChangeSet } from "@/lib/calibration/changes/types";
import { nameSome } from "@/lib/format/name-some";
import { knownChanges, noDescription } from "@/lib/gates/calibration/known-changes";
import type { CalibrationEvidence, GateEvidence } from "@/lib/gates/evidence";
import type { DeclarationGate, GateResult } from "@/lib/gates/plan";
import { counted, figure, gateResult, met, notMet, tooLittle, type Verdict } from "@/lib/gates/verdict";

/**
 * The revision's own declaration against what changed from what stands to it. Not met: it says "no" while a marked function or
 * characteristic is touched. Too little: it says nothing, or "no" while nobody can tell what changed. With nothing marked in the
 * programme nothing can contradict it: met, and the sentence says that nothing is marked.
 */
export function declarationGate(gate: DeclarationGate, evidence: GateEvidence): GateResult {
  const known = knownChanges(evidence, "standing");
  return gateResult(
    gate,
    "Declaration on emission and safety agrees with the changes",
    "open" in known ? known.open : verdictOn(known.changes, known.calibration),
  );
}

function verdictOn(changes: ChangeSet, { marks, declaresTouch }: CalibrationEvidence): Verdict {
  if (declaresTouch === null)
    return tooLittle(
      "The revision does not say whether it touches emission- or safety-relevant functions.",
      "Answer it on the revision's page.",
    );
  if (marks.length === 0)
    return met(
      `The revision says ${declaresTouch ? "yes" : "no"}. Nobody has marked an emission- or safety-relevant function in this programme, so nothing contradicts it.`,
    );
  const touched = touchedMarks(changes, marks);
  if (touched.length > 0)
    return declaresTouch
      ? met(`The revision says yes. ${touchedText(touched)}`)
      : notMet(
          `The revision says no. ${touchedText(touched)}`,
          "Correct the declaration in a new revision, or leave these untouched.",
        );
  if (declaresTouch)
    return met(`The revision says yes; none of ${counted(marks.length, "mark")} is seen to be touched.`);
  if (changes.readBy === "none" && !changes.identical) return noDescription();
  if (changes.uncoveredBytes > 0)
    return tooLittle(
      `The revision says no, and none of ${counted(marks.length, "mark")} is touched; but ${figure(changes.uncoveredBytes, 0)} changed ${changes.uncoveredBytes === 1 ? "byte lies" : "bytes lie"} outside the description and may belong to one.`,
      "Describe these bytes, or make a new revision without them.",
    );
  return met(
    `The revision says no, and none of ${counted(marks.length, "mark")} of this programme is touched.`,
  );
}

function touchedText(touched: readonly TouchedMark[]): string {
  const texts = touched.map(({ mark, characteristics }) =>
    mark.set === "characteristic"
      ? `${mark.name} (${mark.relevance})`
      : `${mark.name} (${mark.relevance}) by ${nameSome(characteristics)}`,
  );
  return `It touches ${texts.slice(0, 3).join("; ")}${texts.length > 3 ? `; and ${texts.length - 3} more` : ""}.`;
}
