import { type ByteOrder, DATA_TYPES, type DescriptionModule } from "@/lib/calibration/a2l/types";
import type { ConversionBook } from "@/lib/calibration/values/convert/conversion-book";
import type { Series } from "@/lib/calibration/values/memory/cell-places";
import type { ImageMemory } from "@/lib/calibration/values/memory/image-memory";
import { type Raw, readNumber } from "@/lib/calibration/values/memory/read-number";
import { NotReadable } from "@/lib/calibration/values/not-readable";
import type { PhysicalValue, ReadCharacteristic } from "@/lib/calibration/values/types";

/** A shared axis as read, with what those that rest on it need to know. */
export interface SharedAxis {
  read: ReadCharacteristic;
  raw: Raw[];
  /** RES_AXIS: pairs of axis value and virtual index, in order. */
  pairs: { value: Raw; index: number }[] | null;
  /** Greatest virtual index that its data type can hold, for pairs. */
  fullScale: number;
  /** Stored from the last point to the first. */
  falls: boolean;
}

/** What reading one module carries along. */
export interface ReadingContext {
  module: DescriptionModule;
  memory: ImageMemory;
  book: ConversionBook;
  sharedAxes: Map<string, SharedAxis | NotReadable>;
  functionsOf: ReadonlyMap<string, string[]>;
  groupsOf: ReadonlyMap<string, string[]>;
  /** Names whose values keep the order of addresses on an axis that is stored from the last point on. */
  fallingAxes: Set<string>;
  /** Cells that may still be read: overlapping records must not multiply an image. */
  cellsLeft: number;
  /** Letters that may still be put to what is read: names, words and units are said again and again. */
  lettersLeft: number;
}

/** Cells read of one image at most, all characteristics together. */
export const MOST_CELLS_OF_ALL = 4_000_000;

/** Takes cells from what may still be read. Throws NotReadable when nothing is left. */
export function spendCells(context: ReadingContext, cells: number): void {
  if (cells > context.cellsLeft) {
    throw new NotReadable(`the description asks for more than ${MOST_CELLS_OF_ALL} cells altogether`);
  }
  context.cellsLeft -= cells;
}

/** Letters of all texts that a reading holds at most: it is kept as one JSON text. */
export const MOST_LETTERS_OF_ALL = 50_000_000;

/** Takes the letters of what was read from what may still be kept. Throws NotReadable when nothing is left. */
export function spendLetters(context: ReadingContext, read: ReadCharacteristic): void {
  const { name, text, unit, characters, formula, functions, groups, axes, values } = read;
  let letters = 0;
  const add = (said: PhysicalValue) => {
    if (typeof said === "string") letters += said.length;
  };
  for (const said of [name, text, unit, characters, formula]) add(said);
  for (const list of [functions, groups, values]) list.forEach(add);
  for (const axis of axes) {
    for (const said of [axis.unit, axis.inputQuantity, axis.reference]) add(said);
    axis.points.forEach(add);
  }
  if (letters > context.lettersLeft) {
    throw new NotReadable(
      `with it the texts of the description would be longer than ${MOST_LETTERS_OF_ALL} letters altogether`,
    );
  }
  context.lettersLeft -= letters;
}

/** Reads equally spaced numbers, in the order of the series. Throws NotReadable where bytes are missing. */
export function readSeries(context: ReadingContext, series: Series, order: ByteOrder): Raw[] {
  spendCells(context, series.count);
  const { view, offset } = wholeSeries(context.memory, series);
  return Array.from({ length: series.count }, (_, k) =>
    readNumber(view, offset + k * series.stride, series.type, order),
  );
}

function wholeSeries(memory: ImageMemory, { type, address, stride, count }: Series) {
  const span = Math.abs(stride) * (count - 1);
  const low = stride < 0 ? address - span : address;
  const { view, offset } = memory.at(low, span + DATA_TYPES[type]);
  return { view, offset: offset + (address - low) };
}
