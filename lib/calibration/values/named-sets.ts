import type { NamedSet } from "@/lib/calibration/a2l/types";

/**
 * By characteristic: the sets that name it, in the description's order, then the sets around those, nearest first. Cycles are
 * walked once.
 */
export function setsByMember(sets: ReadonlyMap<string, NamedSet>): Map<string, string[]> {
  const around = new Map<string, string[]>();
  for (const set of sets.values()) for (const sub of set.subSets) append(around, sub, set.name);
  const outward = new Map<string, string[]>();
  const members = new Map<string, Set<string>>();
  for (const set of sets.values()) {
    for (const member of set.characteristics) {
      const direct = members.get(member) ?? new Set();
      members.set(member, direct.add(set.name));
    }
  }
  const result = new Map<string, string[]>();
  for (const [member, direct] of members) {
    const all = new Set(direct);
    for (const name of direct) {
      let parents = outward.get(name);
      if (!parents) {
        parents = walk(name, around);
        outward.set(name, parents);
      }
      for (const parent of parents) all.add(parent);
    }
    result.set(member, [...all]);
  }
  return result;
}

function walk(start: string, around: ReadonlyMap<string, readonly string[]>): string[] {
  const seen = new Set([start]);
  for (const name of seen) for (const parent of around.get(name) ?? []) seen.add(parent);
  seen.delete(start);
  return [...seen];
}

function append(map: Map<string, string[]>, key: string, value: string): void {
  const list = map.get(key);
  if (list) list.push(value);
  else map.set(key, [value]);
}
