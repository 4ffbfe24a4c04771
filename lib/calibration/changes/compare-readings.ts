import { cellChanges, sideOf, summarise } from "@/lib/calibration/changes/compare-characteristic";
import type { Pair } from "@/lib/calibration/changes/pair";
import type { CharacteristicChange } from "@/lib/calibration/changes/types";
import { createMaskedWords } from "@/lib/calibration/changes/uncovered/masked-words";
import type { ByteRange, ImageReading, ReadCharacteristic } from "@/lib/calibration/values/types";
import { nameSome } from "@/lib/format/name-some";

/** Cells of changed characteristics that are listed in full, all together. */
const MOST_CELLS = 400_000;
const NAMES_SHOWN = 5;

export interface Compared {
  /** By falling effect, then by name. */
  changes: CharacteristicChange[];
  /** Bytes whose change the described changes account for. */
  explained: ByteRange[];
  problems: string[];
}

/** Compares two readings characteristic by characteristic, by name. O(cells). */
export function compareReadings(a: ImageReading, b: ImageReading): Compared {
  const before = new Map(a.characteristics.map((one) => [one.name, one]));
  const after = new Map(b.characteristics.map((one) => [one.name, one]));
  // What could not be read on one side is neither new nor gone.
  const unreadA = new Set(a.notRead.map(({ name }) => name));
  const unreadB = new Set(b.notRead.map(({ name }) => name));
  const moved: string[] = [];
  const otherMeaning: string[] = [];
  const oneSided: string[] = [];
  const explained: ByteRange[] = [];
  const found: { pair: Pair; change: CharacteristicChange }[] = [];
  const maskedWords = createMaskedWords();
  const explain = (one: ReadCharacteristic | null) => explained.push(...(one?.bytes ?? []));

  for (const name of new Set([...before.keys(), ...after.keys()])) {
    const pair: Pair = { before: before.get(name) ?? null, after: after.get(name) ?? null };
    if ((!pair.before && unreadA.has(name)) || (!pair.after && unreadB.has(name))) {
      oneSided.push(name);
      continue;
    }
    const change = summarise(pair);
    const isMoved = pair.before && pair.after && pair.before.address !== pair.after.address;
    if ((change || isMoved) && !maskedWords.take(pair)) {
      explain(pair.before);
      explain(pair.after);
    }
    if (change) found.push({ pair, change });
    else if (isMoved) moved.push(name);
    else if (!sameMeaning(pair)) otherMeaning.push(name);
  }
  found.sort((p, q) => q.change.effect - p.change.effect || (p.change.name < q.change.name ? -1 : 1));
  return {
    changes: withCells(found),
    explained: [...explained, ...maskedWords.explained()],
    problems: [
      ...sentence(
        oneSided,
        "could be read in one of the two images only, so what changed in it is not known",
      ),
      ...sentence(moved, "lies at another address with the same content, which is no change"),
      ...sentence(
        otherMeaning,
        "has the same raw numbers in both images, but the two descriptions give them another meaning",
      ),
      ...sentence(
        found
          .filter(({ change }) => change.before === null && change.after === null)
          .map(({ change }) => change.name),
        `changed and is not shown cell by cell: more than ${MOST_CELLS} cells changed altogether`,
      ),
    ],
  };
}

/** Adds sides and cells from the largest effect on, as far as the bound reaches. */
function withCells(found: readonly { pair: Pair; change: CharacteristicChange }[]): CharacteristicChange[] {
  let left = MOST_CELLS;
  return found.map(({ pair, change }) => {
    const size = Math.max(1, pair.before?.values.length ?? 0, pair.after?.values.length ?? 0);
    if (size > left) return change;
    left -= size;
    change.before = pair.before && sideOf(pair.before);
    change.after = pair.after && sideOf(pair.after);
    change.changes = cellChanges(pair);
    return change;
  });
}

function sameMeaning({ before, after }: Pair): boolean {
  if (!before || !after) return true;
  return (
    before.unit === after.unit &&
    before.values.length === after.values.length &&
    before.values.every((value, k) => value === after.values[k])
  );
}

function sentence(names: readonly string[], what: string): string[] {
  if (names.length === 0) return [];
  return [`${nameSome(names, NAMES_SHOWN)}${names.length > 1 ? ": each" : ""} ${what}.`];
}
