import { effectOf } from "@/lib/calibration/changes/effect";
import { limitStateOf } from "@/lib/calibration/changes/limit-state";
import type { Pair } from "@/lib/calibration/changes/pair";
import type { CellChange, ChangeSide, CharacteristicChange } from "@/lib/calibration/changes/types";
import { cellCount, cellIndex } from "@/lib/calibration/values/cells";
import type { ReadCharacteristic } from "@/lib/calibration/values/types";
import { digestOf } from "@/lib/canonical-json";

/** What a page draws of one side. */
export function sideOf({ dims, axes, values, characters }: ReadCharacteristic): ChangeSide {
  return { dims, axes, values, characters };
}

/** The change of one characteristic without its sides and cells, or null where raw numbers, text, shape and axes are alike. */
export function summarise(pair: Pair): CharacteristicChange | null {
  const { before, after } = pair;
  const shown = after ?? before;
  if (!shown) return null;
  const shapeChanged =
    before !== null && after !== null && (before.type !== after.type || !sameList(before.dims, after.dims));
  const axisChanged = before !== null && after !== null && !shapeChanged && !sameAxes(before, after);
  const differing = shapeChanged ? [] : changedCells(pair);
  const textChanged = before?.characters !== after?.characters && shown.type === "ASCII";
  const whole = !before || !after || shapeChanged;
  if (!whole && !axisChanged && differing.length === 0 && !textChanged) return null;
  const cells = shown.type === "ASCII" ? 1 : cellCount(shown.dims);
  const deltas = differing.flatMap((cell) => {
    const [from, to] = [before?.values[cell], after?.values[cell]];
    const comparable = typeof from === "number" && typeof to === "number" && before?.unit === after?.unit;
    return comparable && Number.isFinite(to - from) ? [to - from] : [];
  });
  const most = deltas.reduce((a, b) => Math.max(a, b), 0);
  const least = deltas.reduce((a, b) => Math.min(a, b), 0);
  return {
    name: shown.name,
    text: shown.text,
    type: shown.type,
    address: shown.address,
    unit: shown.unit,
    decimals: shown.decimals,
    functions: ofBoth(after?.functions, before?.functions),
    groups: ofBoth(after?.groups, before?.groups),
    kind: before === null ? "added" : after === null ? "removed" : "changed",
    cells,
    changed: whole ? cells : textChanged ? 1 : differing.length,
    axisChanged,
    shapeChanged,
    before: null,
    after: null,
    changes: [],
    largestRise: most > 0 ? most : null,
    largestFall: least < 0 ? least : null,
    effect: effectOf(pair, {
      whole: whole || textChanged,
      axisChanged,
      differing,
      largest: Math.max(most, -least),
    }),
    digest: digestOf({ name: shown.name, before: content(before), after: content(after) }),
  };
}

/** What the description after says, then what only the one before said: nothing leaves a function unseen by being described anew. */
const ofBoth = (after: readonly string[] = [], before: readonly string[] = []) => [
  ...new Set([...after, ...before]),
];

/** Every cell whose raw number differs, with its limit state after; nothing where the shapes are not alike. */
export function cellChanges(pair: Pair): CellChange[] {
  const { before, after } = pair;
  if (!before || !after || before.type !== after.type || !sameList(before.dims, after.dims)) return [];
  return changedCells(pair).map((cell) => ({
    index: cellIndex(cell, after.dims),
    before: before.values[cell],
    after: after.values[cell],
    limit: limitStateOf(after.values[cell], after.limits),
  }));
}

/** Numbers of the cells (x fastest) whose raw number differs. */
function changedCells({ before, after }: Pair): number[] {
  const cells: number[] = [];
  if (before && after) {
    for (let k = 0; k < after.raw.length; k++) if (before.raw[k] !== after.raw[k]) cells.push(k);
  }
  return cells;
}

/** The same points of the same quantities; the raw points decide where both are stored the same way. */
function sameAxes(before: ReadCharacteristic, after: ReadCharacteristic): boolean {
  return before.axes.every((axis, k) => {
    const other = after.axes[k];
    return (
      axis.inputQuantity === other.inputQuantity &&
      axis.unit === other.unit &&
      sameList(axis.raw, other.raw) &&
      sameList(axis.points, other.points)
    );
  });
}

function sameList(a: readonly unknown[], b: readonly unknown[]): boolean {
  return a.length === b.length && a.every((value, k) => value === b[k]);
}

/** What a mark "looked at" holds for: raw numbers as well as values. */
function content(side: ReadCharacteristic | null) {
  return side && { ...sideOf(side), raw: side.raw, unit: side.unit };
}
