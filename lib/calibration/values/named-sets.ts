import type { NamedSet } from "@/lib/calibration/a2l/types";

/** Sets that are put to characteristics altogether: a small description could otherwise multiply its own size without end. */
const MOST_LISTED = 4_000_000;

/**
 * By characteristic: the sets that name it, in the description's order, then the sets around those, nearest first. Cycles are
 * walked once. `isCut`: the sets nest so widely that outer ones were left out.
 */
export function setsByMember(sets: ReadonlyMap<string, NamedSet>): {
  byMember: Map<string, string[]>;
  isCut: boolean;
} {
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
  const byMember = new Map<string, string[]>();
  let left = MOST_LISTED;
  for (const [member, direct] of members) {
    const all = new Set(direct);
    for (const name of direct) {
      let parents = outward.get(name);
      if (!parents) {
        parents = walk(name, around, left);
        outward.set(name, parents);
        left -= parents.length;
      }
      left -= parents.length;
      if (left < 0) break;
      for (const parent of parents) all.add(parent);
    }
    byMember.set(member, [...all]);
  }
  return { byMember, isCut: left < 0 };
}

/** The sets around one, nearest first, `most` of them and a few more at most. */
function walk(start: string, around: ReadonlyMap<string, readonly string[]>, most: number): string[] {
  const seen = new Set([start]);
  for (const name of seen) {
    if (seen.size > most) break;
    for (const parent of around.get(name) ?? []) seen.add(parent);
  }
  seen.delete(start);
  return [...seen];
}

function append(map: Map<string, string[]>, key: string, value: string): void {
  const list = map.get(key);
  if (list) list.push(value);
  else map.set(key, [value]);
}
