import type { BlockReader } from "@/lib/calibration/a2l/blocks/block-reader";
import type { NamedSet } from "@/lib/calibration/a2l/types";

/** Reads a FUNCTION. Faults stand in `reader.fault`. */
export const readFunction = (reader: BlockReader): NamedSet => readSet(reader, "FUNCTION");

/** Reads a GROUP. Faults stand in `reader.fault`. */
export const readGroup = (reader: BlockReader): NamedSet => readSet(reader, "GROUP");

/** A FUNCTION or GROUP: the characteristics it names, each once, and its sub-sets by name. */
function readSet(reader: BlockReader, keyword: "FUNCTION" | "GROUP"): NamedSet {
  const name = reader.word("name");
  const text = reader.quoted();
  const characteristics = new Set<string>();
  const subSets = new Set<string>();
  let isRoot = false;
  for (let option = reader.option(); option !== null; option = reader.option()) {
    if (option === "/DEF_CHARACTERISTIC" || option === "/REF_CHARACTERISTIC")
      for (const each of reader.names()) characteristics.add(each);
    else if (option === "/SUB_FUNCTION" || option === "/SUB_GROUP")
      for (const each of reader.names()) subSets.add(each);
    else if (option === "ROOT") isRoot = true;
    else reader.pass(option, keyword);
  }
  return { name, text, characteristics: [...characteristics], subSets: [...subSets], isRoot };
}

/** Adds members that name their function themselves (FUNCTION_LIST), each once; functions that are not there are left out. */
export function addListed(
  functions: Map<string, NamedSet>,
  listed: readonly { name: string; member: string }[],
): void {
  const added = new Map<string, Set<string>>();
  for (const { name, member } of listed) {
    const known = functions.get(name);
    if (!known) continue;
    const members = added.get(name) ?? new Set(known.characteristics);
    added.set(name, members.add(member));
  }
  for (const [name, members] of added) {
    const known = functions.get(name);
    if (known) functions.set(name, { ...known, characteristics: [...members] });
  }
}

/**
 * Names of sets that contain themselves, over others or straight, one for each way back that is found. Takes time in
 * proportion to sets and sub-sets, and no call nests.
 */
export function setsInCycles(sets: ReadonlyMap<string, NamedSet>): string[] {
  const cycles: string[] = [];
  const state = new Map<string, "open" | "done">();
  for (const root of sets.keys()) {
    if (state.has(root)) continue;
    const path = [{ name: root, next: 0 }];
    state.set(root, "open");
    while (path.length > 0) {
      const at = path[path.length - 1];
      const child = sets.get(at.name)?.subSets[at.next++];
      if (child === undefined) {
        state.set(at.name, "done");
        path.pop();
      } else if (state.get(child) === "open") cycles.push(child);
      else if (!state.has(child) && sets.has(child)) {
        state.set(child, "open");
        path.push({ name: child, next: 0 });
      }
    }
  }
  return cycles;
}
