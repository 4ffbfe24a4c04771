import type { ChangeSet } from "@/lib/calibration/changes/types";
import type { ImageReading } from "@/lib/calibration/values/types";

/** Problems of both readings; what only one of them has says which. */
export function mergeProblems(a: ImageReading | null, b: ImageReading | null): string[] {
  const [ofA, ofB] = [a?.problems ?? [], b?.problems ?? []];
  if (!a || !b) return [...ofA, ...ofB];
  const [inA, inB] = [new Set(ofA), new Set(ofB)];
  return [
    ...ofA.map((text) => (inB.has(text) ? text : `Before: ${text}`)),
    ...ofB.filter((text) => !inA.has(text)).map((text) => `After: ${text}`),
  ];
}

/** What could not be read in either image, once where both say the same, by name. */
export function mergeNotRead(a: ImageReading | null, b: ImageReading | null): ChangeSet["notRead"] {
  const merged = new Map<string, ChangeSet["notRead"][number]>();
  for (const { name, reason, sets = [] } of [...(a?.notRead ?? []), ...(b?.notRead ?? [])]) {
    const key = `${name}\n${reason}`;
    const ofBoth = [...new Set([...(merged.get(key)?.sets ?? []), ...sets])];
    merged.set(key, { name, reason, ...(ofBoth.length > 0 ? { sets: ofBoth } : {}) });
  }
  return [...merged.entries()].sort(([p], [q]) => (p < q ? -1 : p > q ? 1 : 0)).map(([, entry]) => entry);
}
