import type { BlockReader } from "@/lib/calibration/a2l/blocks/block-reader";
import { readAxis } from "@/lib/calibration/a2l/blocks/read-axis";
import { readByteOrder } from "@/lib/calibration/a2l/blocks/read-layout";
import { maskNumber } from "@/lib/calibration/a2l/token-number";
import {
  AXES_OF,
  type AxisPoints,
  type ByteOrder,
  type Characteristic,
  type CharacteristicType,
  type Measurement,
} from "@/lib/calibration/a2l/types";

const MOST_DIMENSIONS = 5;
const NO_CONVERSION = "NO_COMPU_METHOD";

/** Options that characteristics and shared axes have in common. */
interface PlacedOptions {
  readonly name: string;
  displayIdentifier: string | null;
  extendedLimits: readonly [number, number] | null;
  byteOrder: ByteOrder | null;
  format: string | null;
  physUnit: string | null;
  readOnly: boolean;
}

/** Reads an option of both into `placed`; false where the keyword is another. */
function readPlacedOption(reader: BlockReader, keyword: string, placed: PlacedOptions): boolean {
  switch (keyword) {
    case "DISPLAY_IDENTIFIER":
      placed.displayIdentifier = reader.word("display identifier");
      return true;
    case "EXTENDED_LIMITS":
      placed.extendedLimits = [reader.limit("extended limit"), reader.limit("extended limit")];
      return true;
    case "BYTE_ORDER":
      placed.byteOrder = readByteOrder(reader, reader.begun);
      return true;
    case "FORMAT":
      placed.format = reader.word("format");
      return true;
    case "PHYS_UNIT":
      placed.physUnit = reader.word("unit");
      return true;
    case "READ_ONLY":
      placed.readOnly = true;
      return true;
    case "/FUNCTION_LIST":
      for (const name of reader.names()) reader.listedFunctions.push({ name, member: placed.name });
      return true;
    case "DEPOSIT":
      if (reader.word("deposit") === "DIFFERENCE")
        reader.fault ??= "its points are stored as differences (DEPOSIT DIFFERENCE), which is not read";
      return true;
    default:
      return false;
  }
}

const isType = (word: string): word is CharacteristicType => Object.hasOwn(AXES_OF, word);

function readDimensions(reader: BlockReader): number[] {
  const sizes = reader.numbers(MOST_DIMENSIONS);
  if (sizes.length === 0 || !sizes.every((size) => Number.isSafeInteger(size) && size > 0))
    reader.fault ??= `its MATRIX_DIM ${sizes.join(" ")} is no set of sizes`;
  return sizes;
}

function readType(reader: BlockReader): CharacteristicType {
  const word = reader.word("type");
  if (isType(word)) return word;
  reader.fault ??= `its type "${word}" is not known`;
  return "VALUE";
}

function readMask(reader: BlockReader): bigint | null {
  const written = reader.word("bit mask");
  const mask = maskNumber(written);
  if (mask === null) reader.fault ??= `its bit mask "${written}" is no whole number of up to 64 bits`;
  return mask;
}

/** An option that characteristics alone have; false where the keyword is another. */
function readOwnOption(reader: BlockReader, keyword: string, into: Mutable<Characteristic>): boolean {
  switch (keyword) {
    case "/AXIS_DESCR":
      into.axes = [...into.axes, readAxis(reader)];
      return true;
    case "MATRIX_DIM":
      into.matrixDim = readDimensions(reader);
      return true;
    case "NUMBER":
      into.matrixDim ??= [reader.whole("number of values")];
      return true;
    case "BIT_MASK":
      into.bitMask = readMask(reader);
      return true;
    case "DISCRETE":
      into.discrete = true;
      return true;
    case "/VIRTUAL_CHARACTERISTIC":
      into.derived = { kind: "virtual", formula: reader.word("formula"), inputs: reader.names() };
      return true;
    case "/DEPENDENT_CHARACTERISTIC":
      into.derived = { kind: "dependent", formula: reader.word("formula"), inputs: reader.names() };
      return true;
    default:
      return false;
  }
}

type Mutable<T> = { -readonly [K in keyof T]: T[K] };

/** The conversion, which stands behind the largest difference of a value to its neighbours. */
function readConversionName(reader: BlockReader): string | null {
  reader.number("largest difference");
  return reader.reference("conversion", NO_CONVERSION);
}

/** Reads a CHARACTERISTIC with its options in any order. Faults stand in `reader.fault`. */
export function readCharacteristic(reader: BlockReader): Characteristic {
  const place = reader.begun;
  // Members are read in the order in which the standard has the parameters; spreads would cost half of the time.
  const read: Mutable<Characteristic> = {
    name: reader.word("name"),
    text: reader.quoted(),
    type: readType(reader),
    address: reader.whole("address"),
    layout: reader.word("record layout"),
    conversion: readConversionName(reader),
    lowerLimit: reader.limit("lower limit"),
    upperLimit: reader.limit("upper limit"),
    displayIdentifier: null,
    extendedLimits: null,
    byteOrder: null,
    format: null,
    physUnit: null,
    readOnly: false,
    line: place.line,
    axes: [],
    matrixDim: null,
    bitMask: null,
    discrete: false,
    derived: null,
  };
  for (let keyword = reader.option(); keyword !== null; keyword = reader.option()) {
    if (!readPlacedOption(reader, keyword, read) && !readOwnOption(reader, keyword, read))
      reader.pass(keyword, "CHARACTERISTIC");
  }
  const { name, type, axes } = read;
  if (axes.length !== AXES_OF[type]) {
    const message = `${name} is a ${type}, which has ${AXES_OF[type]} axes, but ${axes.length} are described.`;
    reader.findings.note("axes_not_described", message, place);
  }
  return read;
}

/** Reads an AXIS_PTS, an axis that several characteristics share. */
export function readAxisPoints(reader: BlockReader): AxisPoints {
  const read: Mutable<AxisPoints> = {
    line: reader.begun.line,
    name: reader.word("name"),
    text: reader.quoted(),
    address: reader.whole("address"),
    inputQuantity: reader.reference("input quantity", "NO_INPUT_QUANTITY"),
    layout: reader.word("record layout"),
    conversion: readConversionName(reader),
    maxPoints: reader.whole("number of points"),
    lowerLimit: reader.limit("lower limit"),
    upperLimit: reader.limit("upper limit"),
    displayIdentifier: null,
    extendedLimits: null,
    byteOrder: null,
    format: null,
    physUnit: null,
    readOnly: false,
  };
  for (let keyword = reader.option(); keyword !== null; keyword = reader.option())
    if (!readPlacedOption(reader, keyword, read)) reader.pass(keyword, "AXIS_PTS");
  return read;
}

/** Reads of a MEASUREMENT what axes need: name, text, conversion and unit. */
export function readMeasurement(reader: BlockReader): Measurement {
  const name = reader.word("name");
  const text = reader.quoted();
  reader.word("data type");
  const conversion = reader.reference("conversion", NO_CONVERSION);
  let physUnit: string | null = null;
  // What is left of the parameters are numbers, which are no options and are passed over.
  for (let keyword = reader.option(); keyword !== null; keyword = reader.option()) {
    if (keyword === "PHYS_UNIT") physUnit = reader.word("unit");
    else if (!MEASUREMENT_OPTIONS.has(keyword)) reader.pass(keyword, "MEASUREMENT");
  }
  return { name, text, conversion, physUnit };
}

/** Options of a measurement whose parameters are passed over as they come. */
const MEASUREMENT_OPTIONS: ReadonlySet<string> = new Set([
  "BIT_MASK",
  "BYTE_ORDER",
  "DISCRETE",
  "DISPLAY_IDENTIFIER",
  "FORMAT",
  "MATRIX_DIM",
]);
