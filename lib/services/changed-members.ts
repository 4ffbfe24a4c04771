import { canonicalJson } from "@/lib/canonical-json";

/** Members of two records that differ, as they were and as they are: what a ledger entry keeps of a new version. */
export function changedMembers<T extends object>(before: T, after: T): { old: Partial<T>; new: Partial<T> } {
  const keys = [...new Set([...Object.keys(before), ...Object.keys(after)])] as (keyof T)[];
  const changed = keys.filter((key) => canonicalJson(before[key]) !== canonicalJson(after[key]));
  const pick = (record: T) => Object.fromEntries(changed.map((key) => [key, record[key]])) as Partial<T>;
  return { old: pick(before), new: pick(after) };
}
