import type { ChangeSet } from "@/lib/calibration/changes/types";
import { formatAddress } from "@/lib/calibration/image/types";
import { nameSome } from "@/lib/format/name-some";
import { isNamed, knownChanges, noDescription } from "@/lib/gates/calibration/known-changes";
import type { GateEvidence } from "@/lib/gates/evidence";
import type { GateResult, TouchedGate } from "@/lib/gates/plan";
import { counted, figure, gateResult, met, notMet, type Verdict } from "@/lib/gates/verdict";

/**
 * Only what the plan allows changed against what stands. A characteristic that only one description knows counts as changed. Bytes
 * under a characteristic that could not be read count as outside the description. Without a description: too little.
 */
export function touchedGate(gate: TouchedGate, evidence: GateEvidence): GateResult {
  const title = gate.allowed
    ? `Only ${nameSome([...gate.allowed.functions, ...gate.allowed.characteristics])} changed${gate.uncovered ? "" : ", no byte outside the description"}`
    : "No byte changed outside the description";
  const known = knownChanges(evidence, "standing");
  return gateResult(gate, title, "open" in known ? known.open : verdictOn(gate, known.changes));
}

function verdictOn({ allowed, uncovered }: TouchedGate, changes: ChangeSet): Verdict {
  if (changes.identical) return met("The image holds the same bytes as what stands.");
  if (changes.readBy === "none") return noDescription();
  const names = allowed && new Set([...allowed.functions, ...allowed.characteristics]);
  const outside = names ? changes.characteristics.filter((change) => !isNamed(change, names)) : [];
  const beyond = [
    ...(outside.length > 0
      ? [
          `${counted(outside.length, "characteristic")} changed that the plan does not name: ${nameSome(outside.map(({ name }) => name))}.`,
        ]
      : []),
    ...(!uncovered && changes.uncoveredBytes > 0 ? [uncoveredText(changes)] : []),
  ];
  if (beyond.length > 0)
    return notMet(
      beyond.join(" "),
      outside.length > 0
        ? "Look at what changed there; make a new revision, or let a lead change the plan."
        : "Look at these bytes; describe them, or make a new revision without them.",
    );
  const n = changes.characteristics.length;
  const bytes =
    changes.uncoveredBytes > 0
      ? ` ${uncoveredText(changes)} The plan allows that.`
      : " No byte outside the description differs.";
  const problems =
    changes.problems.length > 0
      ? ` Read the ${changes.problems.length === 1 ? "problem" : `${changes.problems.length} problems`} named beside the change set.`
      : "";
  return met(
    `${counted(n, "characteristic")} changed${allowed ? `, ${n === 1 ? "which the plan names" : "all of which the plan names"}` : ""}.${bytes}${problems}`,
  );
}

function uncoveredText({ uncovered, uncoveredBytes, uncoveredRanges, notRead }: ChangeSet): string {
  const first = uncovered[0];
  const where = first
    ? `, the first at ${formatAddress(first.address)}${first.segment ? ` in ${first.segment}` : ""}`
    : "";
  const hidden = new Set(notRead.map(({ name }) => name)).size;
  const unread =
    hidden > 0
      ? ` ${counted(hidden, "characteristic")} could not be read; bytes under ${hidden === 1 ? "it" : "them"} count as outside.`
      : "";
  return `${figure(uncoveredBytes, 0)} ${uncoveredBytes === 1 ? "byte differs" : "bytes differ"} in ${counted(uncoveredRanges, "place")} outside the description${where}.${unread}`;
}
