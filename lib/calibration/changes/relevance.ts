import type { ChangeSet, CharacteristicChange } from "@/lib/calibration/changes/types";

/** What a lead marks once per programme: a function (or group) or a single characteristic, by its name in the description. */
export interface RelevanceMark {
  set: "function" | "characteristic";
  name: string;
  relevance: "emission" | "safety";
  note: string;
}

/** A mark that a change set touches, with the changed characteristics that it stands for. */
export interface TouchedMark {
  mark: RelevanceMark;
  characteristics: string[];
}

/** Functions and groups that the description puts a characteristic into. */
function setsOf({ functions, groups }: CharacteristicChange): string[] {
  return [...functions, ...groups];
}

/**
 * The marks that a change set touches, in the order of the marks. A function's mark stands for every characteristic that the
 * reading lists under its name. One that only one description knows counts as touched: nobody can show that it did not change.
 * Bytes that no characteristic covers can't be told, see `uncoveredBytes` of the change set.
 */
export function touchedMarks(
  changeSet: Pick<ChangeSet, "identical" | "characteristics">,
  marks: readonly RelevanceMark[],
): TouchedMark[] {
  if (changeSet.identical) return [];
  return marks.flatMap((mark) => {
    const characteristics = changeSet.characteristics
      .filter((change) =>
        mark.set === "function" ? setsOf(change).includes(mark.name) : change.name === mark.name,
      )
      .map(({ name }) => name);
    return characteristics.length > 0 ? [{ mark, characteristics }] : [];
  });
}
