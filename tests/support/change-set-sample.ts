import type {
  CellChange,
  ChangeSet,
  ChangeSide,
  CharacteristicChange,
} from "@/lib/calibration/changes/types";
import type { Coverage } from "@/lib/calibration/coverage/types";
import type { PhysicalValue } from "@/lib/calibration/values/types";
import type { CalibrationEvidence, GateEvidence } from "@/lib/gates/evidence";

const LETTERS = ["1/min", "kPa", "°C"];

/** An invented side: axis points by axis, x fastest. */
export function side(values: PhysicalValue[], ...points: number[][]): ChangeSide {
  return {
    dims: points.length > 0 ? points.map((axis) => axis.length) : values.length === 1 ? [] : [values.length],
    axes: points.map((axis, k) => ({
      ...{ kind: "STD_AXIS", reference: null, inputQuantity: `quantity_${k}`, unit: LETTERS[k] },
      ...{ decimals: 0, points: axis, raw: axis },
    })),
    values,
    characters: null,
  };
}

function extremes(changes: readonly CellChange[]) {
  const deltas = changes.flatMap(({ before, after }) =>
    typeof before === "number" && typeof after === "number" ? [after - before] : [],
  );
  const [most, least] = [Math.max(0, ...deltas), Math.min(0, ...deltas)];
  return { largestRise: most > 0 ? most : null, largestFall: least < 0 ? least : null };
}

/** An invented change between two sides of one shape; the changed cells follow from their values. */
export function change(
  name: string,
  before: ChangeSide | null,
  after: ChangeSide | null,
  over: Partial<CharacteristicChange> = {},
): CharacteristicChange {
  const dims = after?.dims ?? [];
  const changes = (after?.values ?? []).flatMap((value, k) => {
    const old = before?.values[k] ?? null;
    const index = dims.map((n, axis) => Math.floor(k / dims.slice(0, axis).reduce((a, b) => a * b, 1)) % n);
    return before && value !== old ? [{ index, before: old, after: value, limit: "ok" as const }] : [];
  });
  return {
    ...{ name, text: "", type: (["VALUE", "CURVE", "MAP", "CUBOID"] as const)[after?.axes.length ?? 0] },
    ...{ address: 0x810000, unit: "°", decimals: 2, functions: [], groups: [], kind: "changed" },
    ...{ cells: after?.values.length ?? 0, changed: changes.length, axisChanged: false, shapeChanged: false },
    ...{ before, after, changes, ...extremes(changes), effect: 1 },
    digest: "",
    ...over,
  };
}

export function changeSet(characteristics: CharacteristicChange[], over: Partial<ChangeSet> = {}): ChangeSet {
  return {
    ...{
      change_set: 1,
      readBy: "both",
      identical: false,
      changedBytes: 8,
      changedRanges: 1,
      characteristics,
    },
    ...{ uncovered: [], uncoveredRanges: 0, uncoveredBytes: 0, descriptionDifference: null },
    ...{ notRead: [], problems: [] },
    ...over,
  };
}

/** Four changed bytes that nobody described. */
export const UNCOVERED: Partial<ChangeSet> = {
  uncovered: [
    {
      ...{ address: 0x816000, length: 4, kind: "differs", segment: "DATA_1", programType: "DATA" },
      ...{ before: null, after: null, contextAddress: 0x816000, digest: "" },
    },
  ],
  uncoveredRanges: 1,
  uncoveredBytes: 4,
};

export const IDENTICAL = changeSet([], { identical: true, changedBytes: 0, changedRanges: 0 });

export function coverage(over: Partial<Coverage> = {}): Coverage {
  return {
    ...{ coverage: 1, runs: ["r1", "r2"], maps: [], notTold: [], changedCells: 10, changedVisited: 8 },
    ...over,
  };
}

/** A candidate whose calibration is all known and in order. */
export function calibration(over: Partial<CalibrationEvidence> = {}): CalibrationEvidence {
  const fromStanding =
    over.fromStanding === undefined
      ? changeSet([change("ignition", side([1, 2], [1000, 2000]), side([1, 3], [1000, 2000]))])
      : over.fromStanding;
  return {
    ...{ fromStanding, fromParent: fromStanding, coverage: coverage(), coverageState: "ready" },
    ...{ integrity: { fingerprintHolds: true, regions: [] }, marks: [] },
    ...{ declaresTouch: false, intendedUse: "closed_course" },
    ...over,
  };
}

/** Evidence in which only the calibration is of interest. */
export function withCalibration(known: CalibrationEvidence | null): GateEvidence {
  return {
    ...{ result: null, runs: [], redlineRpm: 6500, engine: "spark ignition", aspiration: "turbo" },
    calibration: known,
  };
}
