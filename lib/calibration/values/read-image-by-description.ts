import type { Description, DescriptionModule } from "@/lib/calibration/a2l/types";
import { ADDRESS_LIMIT, type CalibrationImage } from "@/lib/calibration/image/types";
import { checkEpk } from "@/lib/calibration/values/check-epk";
import { ConversionBook } from "@/lib/calibration/values/convert/conversion-book";
import { ImageMemory } from "@/lib/calibration/values/memory/image-memory";
import { setsByMember } from "@/lib/calibration/values/named-sets";
import { NotReadable } from "@/lib/calibration/values/not-readable";
import { readCharacteristic } from "@/lib/calibration/values/read-characteristic";
import {
  MOST_CELLS_OF_ALL,
  MOST_LETTERS_OF_ALL,
  type ReadingContext,
  spendLetters,
} from "@/lib/calibration/values/reading-context";
import { sharedAxis } from "@/lib/calibration/values/shared-axis";
import type { ImageReading, ReadCharacteristic } from "@/lib/calibration/values/types";
import { nameSome } from "@/lib/format/name-some";

/**
 * Reads every characteristic and shared axis of a description from an image, in raw and in physical values. What can't be read is
 * listed in `notRead` with its reason; nothing is guessed and nothing throws. At most 4 million cells and 50 million letters are read
 * altogether.
 */
export function readImageByDescription(
  description: Description,
  image: Pick<CalibrationImage, "segments">,
): ImageReading {
  const memory = new ImageMemory(image);
  const reading: ImageReading = {
    reading: 1,
    characteristics: [],
    notRead: [],
    memorySegments: [],
    epk: { state: "none", expected: null, found: null },
    problems: [],
  };
  const names = new Set<string>();
  let left: Pick<ReadingContext, "cellsLeft" | "lettersLeft"> = {
    cellsLeft: MOST_CELLS_OF_ALL,
    lettersLeft: MOST_LETTERS_OF_ALL,
  };
  for (const module of description.modules) {
    const [functions, groups] = [setsByMember(module.functions), setsByMember(module.groups)];
    const context: ReadingContext = {
      module,
      memory,
      book: new ConversionBook(module),
      sharedAxes: new Map(),
      functionsOf: functions.byMember,
      groupsOf: groups.byMember,
      fallingAxes: new Set(),
      ...left,
    };
    readModule(context, names, reading);
    left = { cellsLeft: context.cellsLeft, lettersLeft: context.lettersLeft };
    if (functions.isCut || groups.isCut) reading.problems.push(SETS_CUT);
    addSegments(reading, module);
    const { epk, problem } = checkEpk(module.epk, memory);
    if (reading.epk.state === "none" || epk.state === "mismatch") reading.epk = epk;
    if (problem !== null) reading.problems.push(problem);
    reading.problems.push(...context.book.problems());
    if (context.fallingAxes.size > 0) reading.problems.push(fallingAxesProblem([...context.fallingAxes]));
  }
  const byName = (a: { name: string }, b: { name: string }) =>
    a.name < b.name ? -1 : a.name > b.name ? 1 : 0;
  reading.characteristics.sort(byName);
  reading.notRead.sort(byName);
  return reading;
}

const SETS_CUT =
  "Functions or groups lie in one another so widely that some of the outer ones are not put to what they hold. A mark on such a one may not be seen to be touched.";

function readModule(context: ReadingContext, names: Set<string>, reading: ImageReading): void {
  const attempt = (name: string, address: number | null, read: () => ReadCharacteristic) => {
    try {
      if (names.has(name))
        throw new NotReadable("another module or block of the description has this name too");
      names.add(name);
      if (address !== null && !isAddress(address))
        throw new NotReadable(`its address ${address} is not possible`);
      const one = read();
      spendLetters(context, one);
      reading.characteristics.push(one);
    } catch (error) {
      if (!(error instanceof NotReadable)) throw error;
      const at = address !== null && isAddress(address) ? address : null;
      const sets = [context.functionsOf, context.groupsOf].flatMap((of) => of.get(name) ?? []);
      reading.notRead.push({
        ...{ name, reason: `${error.message}.`, address: at },
        ...(sets.length > 0 ? { sets } : {}),
      });
    }
  };
  for (const { name, address } of context.module.axisPoints.values()) {
    attempt(name, address, () => sharedAxis(context, name).read);
  }
  for (const wanted of context.module.characteristics.values()) {
    const address = wanted.derived?.kind === "virtual" ? null : wanted.address;
    attempt(wanted.name, address, () => readCharacteristic(context, wanted));
  }
}

/** Segments of one reading; each changed stretch is looked for among all that overlap at it. */
const MOST_SEGMENTS = 1000;

function addSegments(reading: ImageReading, module: DescriptionModule): void {
  const room = MOST_SEGMENTS - reading.memorySegments.length;
  for (const { name, programType, address, length } of module.memorySegments.slice(0, room)) {
    reading.memorySegments.push({ name, programType, address, length });
  }
  if (module.memorySegments.length <= room) return;
  const message = `The description names more than ${MOST_SEGMENTS} memory segments; bytes in the others are listed without one.`;
  if (!reading.problems.includes(message)) reading.problems.push(message);
}

const isAddress = (address: number) => Number.isInteger(address) && address >= 0 && address < ADDRESS_LIMIT;

const NAMES_SHOWN = 5;

function fallingAxesProblem(names: string[]): string {
  return `An axis of ${nameSome(names, NAMES_SHOWN)} is stored from its last point on (INDEX_DECR). The values on it were left in the order of addresses; the standard does not settle it for such records. Check one known cell.`;
}
