import type { ChangeSet, CharacteristicChange } from "@/lib/calibration/changes/types";
import type { CalibrationEvidence, GateEvidence } from "@/lib/gates/evidence";
import { tooLittle, type Verdict } from "@/lib/gates/verdict";

/** True where a characteristic, or a function or group that the description puts it into, is among the names. */
export function isNamed(change: CharacteristicChange, names: ReadonlySet<string>): boolean {
  return [change.name, ...change.functions, ...change.groups].some((name) => names.has(name));
}

type Known = { changes: ChangeSet; calibration: CalibrationEvidence } | { open: Verdict };

/** The change set that a gate asks about, or why there is none yet. */
export function knownChanges({ calibration }: GateEvidence, against: "parent" | "standing"): Known {
  if (!calibration)
    return {
      open: tooLittle(
        "There is nothing to hold the image against: no revision stands.",
        "Adopt what the car came with, so that it stands.",
      ),
    };
  const changes = against === "parent" ? calibration.fromParent : calibration.fromStanding;
  if (changes) return { changes, calibration };
  const other = against === "parent" ? "its parent" : "what stands";
  return {
    open: tooLittle(
      `The change set against ${other} is not computed yet.`,
      "Open the revision's page; it is computed there.",
    ),
  };
}

/** Why tables can't be told where neither revision has a description. */
export function noDescription(): Verdict {
  return tooLittle(
    "Neither revision has a description, so nobody can tell what the changed bytes are.",
    "Add the description (A2L) to the revision.",
  );
}
