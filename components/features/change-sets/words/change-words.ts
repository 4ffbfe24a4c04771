import type { HeatMark } from "@/components/charts/heat/heat-table";
import { counted, listed, numberText } from "@/components/ui/data/number-text";
import type { ChangeSet, CharacteristicChange, LimitState } from "@/lib/calibration/changes/types";
import { TYPE_WORDS } from "@/lib/calibration/values/type-words";

/** How a cell lies towards the description's limits; null inside them. */
export const LIMIT_MARKS: Record<LimitState, HeatMark | null> = {
  ok: null,
  extended: { glyph: "◇", words: "outside the usual limits, inside the extended ones" },
  below: { glyph: "▼", words: "below the limit" },
  above: { glyph: "▲", words: "above the limit" },
};

/** "3 maps, 1 curve and 2 values": the kinds in the order above. */
function kindsText(changes: readonly Pick<CharacteristicChange, "type">[]): string {
  const types = Object.keys(TYPE_WORDS) as CharacteristicChange["type"][];
  return listed(
    types.flatMap((type) => {
      const count = changes.filter((change) => change.type === type).length;
      return count === 0 ? [] : [counted(count, ...TYPE_WORDS[type])];
    }),
  );
}

/** What differs, in one sentence: "3 maps, 1 curve and 2 values differ from R2; 38 cells; 4 bytes outside the description." */
export function summarySentence(set: ChangeSet, againstNumber: number): string {
  const than = `R${againstNumber}`;
  if (set.identical) {
    const read = set.characteristics.length;
    const otherwise = read > 0 ? `; the descriptions tell ${counted(read, "characteristic")} otherwise` : "";
    return `The content is the same as ${than}: not one byte differs${otherwise}.`;
  }
  const bytes = counted(set.changedBytes, "byte");
  const places = counted(set.changedRanges, "place");
  if (set.readBy === "none")
    return `${bytes} in ${places} ${set.changedBytes === 1 ? "differs" : "differ"} from ${than}; no description says what they mean.`;
  const differing = set.characteristics.filter((change) => change.kind === "changed");
  const only = (kind: "added" | "removed") =>
    set.characteristics.filter((change) => change.kind === kind).length;
  // A text has no cells.
  const cells = differing.reduce((sum, { type, changed }) => sum + (type === "ASCII" ? 0 : changed), 0);
  const [added, removed] = [only("added"), only("removed")];
  const parts = [
    differing.length > 0
      ? `${kindsText(differing)} ${differing.length === 1 ? "differs" : "differ"} from ${than}${cells > 0 ? `; ${counted(cells, "cell")}` : ""}`
      : `No described value differs from ${than}`,
    ...(added > 0 ? [`${numberText(added)} only in this revision's description`] : []),
    ...(removed > 0 ? [`${numberText(removed)} only in the description of ${than}`] : []),
    set.uncoveredBytes > 0
      ? `${counted(set.uncoveredBytes, "byte")} outside the description`
      : "no byte outside the description",
  ];
  return `${parts.join("; ")}.`;
}

/** Largest fall and rise with unit and sign, the fall first: "−2.0 to +9.0 kPa"; null where nothing has a difference. */
export function spreadText(change: CharacteristicChange, digits: number): string | null {
  const { largestFall: fall, largestRise: rise, unit } = change;
  const ends = [fall, rise].filter((end): end is number => end !== null && end !== 0);
  if (ends.length === 0) return null;
  const texts = ends.map((end) => numberText(end, { decimals: digits, signed: true }));
  return `${texts.join(" to ")}${unit ? `\u202f${unit}` : ""}`;
}

/** Cells outside limits, counted by how: "2 above the limit". */
export function limitText(change: CharacteristicChange): string | null {
  const count = (state: LimitState) => change.changes.filter((cell) => cell.limit === state).length;
  const parts = (["below", "above", "extended"] as const).flatMap((state) => {
    const cells = count(state);
    return cells === 0 ? [] : [`${numberText(cells)} ${LIMIT_MARKS[state]?.words}`];
  });
  return parts.length === 0 ? null : listed(parts);
}

/** What else moved than values: shape and axes, in words; null when nothing did. */
export function structureText({
  kind,
  shapeChanged,
  axisChanged,
  before,
  after,
}: CharacteristicChange): string | null {
  if (kind !== "changed") return null;
  const shape = (dims: readonly number[]) =>
    dims.length === 0 ? "one value" : dims.map((n) => numberText(n)).join(" × ");
  if (shapeChanged && before && after)
    return `The shape changed from ${shape(before.dims)} to ${shape(after.dims)}.`;
  return axisChanged ? "Axis points moved: the values hold at other places." : null;
}
