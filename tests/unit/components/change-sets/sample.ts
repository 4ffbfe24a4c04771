import type {
  CellChange,
  ChangeSet,
  ChangeSide,
  CharacteristicChange,
} from "@/lib/calibration/changes/types";
import type { PhysicalValue, ReadAxis } from "@/lib/calibration/values/types";
import type { RevisionChangesView } from "@/lib/services/change-sets/schema";

/** An axis of numbers. */
export const axis = (points: number[], parts: Partial<ReadAxis> = {}): ReadAxis => ({
  kind: "STD_AXIS",
  reference: null,
  inputQuantity: "n_engine",
  unit: "1/min",
  decimals: 0,
  points,
  raw: points,
  ...parts,
});

export const side = (dims: number[], axes: ReadAxis[], values: PhysicalValue[]): ChangeSide => ({
  dims,
  axes,
  values,
  characters: null,
});

const digestOf = (name: string) =>
  [...name]
    .map((letter) => letter.charCodeAt(0).toString(16))
    .join("")
    .padEnd(64, "0")
    .slice(0, 64);

/** A changed characteristic; what is not given follows from its two sides, cell by cell. */
export function change(
  name: string,
  before: ChangeSide | null,
  after: ChangeSide | null,
  parts: Partial<CharacteristicChange> = {},
): CharacteristicChange {
  const shape = after ?? before;
  const dims = shape?.dims ?? [];
  const cells = dims.reduce((product, n) => product * n, 1);
  const index = (cell: number) => {
    let rest = cell;
    return dims.map((n) => {
      const at = rest % n;
      rest = (rest - at) / n;
      return at;
    });
  };
  const changes: CellChange[] = Array.from({ length: cells }, (_, cell) => cell)
    .filter((cell) => before && after && before.values[cell] !== after.values[cell])
    .map((cell) => ({
      index: index(cell),
      before: before?.values[cell] ?? null,
      after: after?.values[cell] ?? null,
      limit: "ok" as const,
    }));
  const steps = changes.flatMap((cell) =>
    typeof cell.before === "number" && typeof cell.after === "number" ? [cell.after - cell.before] : [],
  );
  return {
    name,
    text: `Text of ${name}`,
    type: dims.length === 0 ? "VALUE" : dims.length === 1 ? "CURVE" : "MAP",
    address: 0x810100,
    unit: "kPa",
    decimals: 1,
    functions: ["Boost"],
    groups: [],
    kind: before && after ? "changed" : after ? "added" : "removed",
    cells,
    changed: changes.length,
    axisChanged: false,
    shapeChanged: false,
    before,
    after,
    changes,
    largestRise: steps.length > 0 ? Math.max(0, ...steps) : null,
    largestFall: steps.length > 0 ? Math.min(0, ...steps) : null,
    effect: 0.1,
    digest: digestOf(name),
    ...parts,
  };
}

const speed = axis([1000, 2000, 3000]);
const pedal = axis([50, 100], { inputQuantity: "pedal", unit: "%" });

export const MAP = change(
  "Boost.Target",
  side([3, 2], [speed, pedal], [100, 110, 120, 130, 140, 150]),
  side([3, 2], [speed, pedal], [100, 110, 118, 130, 149, 150]),
  { effect: 0.3 },
);
export const CURVE = change(
  "Fuel.Lambda",
  side([3], [speed], [0.9, 0.85, 0.8]),
  side([3], [speed], [0.9, 0.87, 0.8]),
  { functions: ["Fuel"], unit: "1", decimals: 2, effect: 0.2 },
);
export const VALUE = change("Limit_Speed", side([], [], [6400]), side([], [], [6500]), {
  functions: [],
  unit: "1/min",
  decimals: 0,
  effect: 0.01,
});

export const changeSet = (parts: Partial<ChangeSet> = {}): ChangeSet => ({
  change_set: 1,
  readBy: "both",
  identical: false,
  changedBytes: 10,
  changedRanges: 4,
  characteristics: [VALUE, CURVE, MAP],
  uncovered: [],
  uncoveredRanges: 0,
  uncoveredBytes: 0,
  descriptionDifference: null,
  notRead: [],
  problems: [],
  ...parts,
});

export const BYTES: ChangeSet["uncovered"][number] = {
  address: 0x816000,
  length: 4,
  kind: "differs",
  segment: "ECU_Code",
  programType: "CODE",
  before: "0001aabbccdd0203",
  after: "0001aabbccde0203",
  contextAddress: 0x815ffe,
  digest: "f".repeat(64),
};

const NUMBERED = { title: "boost ramp" };

export const view = (parts: Partial<RevisionChangesView> = {}): RevisionChangesView => ({
  revision: {
    id: "11111111-1111-4111-8111-111111111111",
    number: 3,
    programmeId: "33333333-3333-4333-8333-333333333333",
    ...NUMBERED,
  },
  against: {
    id: "22222222-2222-4222-8222-222222222222",
    number: 2,
    title: "as read",
    stands: true,
    isParent: true,
  },
  choices: [],
  state: "ready",
  failure: null,
  changeSetId: "44444444-4444-4444-8444-444444444444",
  changes: changeSet(),
  checksumBytes: 0,
  coverage: { state: "no_runs", failure: null, result: null, moved: false },
  lookedAt: [],
  marks: [],
  contradiction: null,
  descriptions: { before: null, after: null },
  fingerprintHolds: true,
  integrity: [],
  epk: null,
  inputQuantities: [],
  ...parts,
});
