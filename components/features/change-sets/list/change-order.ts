import type { CharacteristicChange } from "@/lib/calibration/changes/types";

export type ListOrder = "function" | "effect";

export interface ChangeGroup {
  /** Function or group of the description; null: named by none, or not grouped. */
  name: string | null;
  changes: CharacteristicChange[];
}

const byEffect = (p: CharacteristicChange, q: CharacteristicChange) =>
  q.effect - p.effect || p.name.localeCompare(q.name, "en");

/** Where a change is listed: its first function, else its first group. */
const homeOf = (change: CharacteristicChange) => change.functions[0] ?? change.groups[0] ?? null;

/**
 * Changes as they are listed and walked through: the largest effect first, or grouped by function, the group with the
 * largest effect first and those without a function last.
 */
export function orderChanges(changes: readonly CharacteristicChange[], order: ListOrder): ChangeGroup[] {
  const sorted = [...changes].sort(byEffect);
  if (sorted.length === 0) return [];
  if (order === "effect") return [{ name: null, changes: sorted }];
  const groups = new Map<string | null, CharacteristicChange[]>();
  for (const change of sorted) {
    const home = homeOf(change);
    groups.set(home, [...(groups.get(home) ?? []), change]);
  }
  return [...groups]
    .map(([name, members]) => ({ name, changes: members }))
    .sort((p, q) => Number(p.name === null) - Number(q.name === null));
}
