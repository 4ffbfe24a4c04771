import { nameSome } from "@/lib/format/name-some";
import type { CalibrationEvidence, GateEvidence } from "@/lib/gates/evidence";
import type { GateResult, IntegrityGate } from "@/lib/gates/plan";
import { counted, gateResult, met, notMet, tooLittle, type Verdict } from "@/lib/gates/verdict";

/**
 * The stored image has the fingerprint that the revision states, and every declared checksum region holds. A region that can't be
 * checked is too little; without declared regions the fingerprint alone speaks, and the sentence says so.
 */
export function integrityGate(gate: IntegrityGate, { calibration }: GateEvidence): GateResult {
  return gateResult(
    gate,
    "Image matches its fingerprint and its checksum regions",
    calibration ? verdictOn(calibration.integrity) : unchecked(),
  );
}

const unchecked = () =>
  tooLittle("The image has not been checked yet.", "Open the revision's page; the check runs there.");

function verdictOn({ fingerprintHolds, regions }: CalibrationEvidence["integrity"]): Verdict {
  if (fingerprintHolds === false)
    return notMet(
      "The stored image does not have the fingerprint that the revision states.",
      "Do not load it. Upload the image anew as a new revision.",
    );
  if (fingerprintHolds === null || regions === null) return unchecked();
  const broken = regions.filter(({ state }) => state === "broken");
  if (broken.length > 0)
    return notMet(
      broken.map(({ sentence }) => sentence).join(" "),
      "Correct the checksum in a new revision, or the region's declaration if it is wrong.",
    );
  const open = regions.filter(({ state }) => state === "not_there");
  if (open.length > 0)
    return tooLittle(
      open.map(({ sentence }) => sentence).join(" "),
      "Correct the region's declaration, or upload the whole image.",
    );
  if (regions.length === 0)
    return met(
      "The fingerprint holds. No checksum region is declared for this programme, so nothing else was checked.",
    );
  return met(
    `The fingerprint holds, and so ${regions.length === 1 ? "does" : "do"} ${counted(regions.length, "checksum region")}: ${nameSome(regions.map(({ name }) => name))}.`,
  );
}
