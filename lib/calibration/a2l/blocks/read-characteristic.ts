import type { BlockReader } from "@/lib/calibration/a2l/blocks/block-reader";
import { readAxis } from "@/lib/calibration/a2l/blocks/read-axis";
import { readByteOrder } from "@/lib/calibration/a2l/blocks/read-layout";
import { maskNumber } from "@/lib/calibration/a2l/token-number";
import type {
  AxisDescription,
  AxisPoints,
  ByteOrder,
  Characteristic,
  CharacteristicType,
  Measurement,
} from "@/lib/calibration/a2l/types";

/** Types with the number of axes that each must describe. */
const AXES_OF: Readonly<Record<CharacteristicType, number>> = {
  VALUE: 0,
  CURVE: 1,
  MAP: 2,
  CUBOID: 3,
  CUBE_4: 4,
  CUBE_5: 5,
  VAL_BLK: 0,
  ASCII: 0,
};
const MOST_DIMENSIONS = 5;
const NO_CONVERSION = "NO_COMPU_METHOD";
const NO_QUANTITY = "NO_INPUT_QUANTITY";

/** Options that characteristics and shared axes have in common. */
function newOptions() {
  return {
    displayIdentifier: null as string | null,
    extendedLimits: null as readonly [number, number] | null,
    byteOrder: null as ByteOrder | null,
    format: null as string | null,
    physUnit: null as string | null,
    readOnly: false,
  };
}

function readPlacedOption(
  reader: BlockReader,
  keyword: string,
  options: ReturnType<typeof newOptions>,
): boolean {
  switch (keyword) {
    case "DISPLAY_IDENTIFIER":
      options.displayIdentifier = reader.word("display identifier");
      return true;
    case "EXTENDED_LIMITS":
      options.extendedLimits = [reader.limit("extended limit"), reader.limit("extended limit")];
      return true;
    case "BYTE_ORDER":
      options.byteOrder = readByteOrder(reader, reader.begun);
      return true;
    case "FORMAT":
      options.format = reader.word("format");
      return true;
    case "PHYS_UNIT":
      options.physUnit = reader.word("unit");
      return true;
    case "READ_ONLY":
      options.readOnly = true;
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

/** Reads a CHARACTERISTIC with its options in any order. Faults stand in `reader.fault`. */
export function readCharacteristic(reader: BlockReader): Characteristic {
  const place = reader.begun;
  const name = reader.word("name");
  const text = reader.quoted();
  const typeWord = reader.word("type");
  const type = isType(typeWord) ? typeWord : "VALUE";
  if (type !== typeWord) reader.fault ??= `its type "${typeWord}" is not known`;
  const address = reader.whole("address");
  const layout = reader.word("record layout");
  reader.number("largest difference");
  const conversion = reader.reference("conversion", NO_CONVERSION);
  const limits = { lowerLimit: reader.limit("lower limit"), upperLimit: reader.limit("upper limit") };
  const options = newOptions();
  const axes: AxisDescription[] = [];
  let matrixDim: number[] | null = null;
  let bitMask: bigint | null = null;
  let discrete = false;
  let derived: Characteristic["derived"] = null;
  for (let keyword = reader.option(); keyword !== null; keyword = reader.option()) {
    if (readPlacedOption(reader, keyword, options)) continue;
    switch (keyword) {
      case "/AXIS_DESCR":
        axes.push(readAxis(reader));
        break;
      case "MATRIX_DIM":
        matrixDim = readDimensions(reader);
        break;
      case "NUMBER":
        matrixDim ??= [reader.whole("number of values")];
        break;
      case "BIT_MASK": {
        const written = reader.word("bit mask");
        bitMask = maskNumber(written);
        if (bitMask === null)
          reader.fault ??= `its bit mask "${written}" is no whole number of up to 64 bits`;
        break;
      }
      case "DISCRETE":
        discrete = true;
        break;
      case "/VIRTUAL_CHARACTERISTIC":
      case "/DEPENDENT_CHARACTERISTIC": {
        const kind = keyword === "/VIRTUAL_CHARACTERISTIC" ? "virtual" : "dependent";
        derived = { kind, formula: reader.word("formula"), inputs: reader.names() };
        break;
      }
      default:
        reader.pass(keyword, "CHARACTERISTIC");
    }
  }
  if (axes.length !== AXES_OF[type]) {
    const message = `${name} is a ${type}, which has ${AXES_OF[type]} axes, but ${axes.length} are described.`;
    reader.findings.note("axes_not_described", message, place);
  }
  return {
    ...{ name, text, type, address, layout, conversion, ...limits, ...options, line: place.line },
    ...{ axes, matrixDim, bitMask, discrete, derived },
  };
}

/** Reads an AXIS_PTS, an axis that several characteristics share. */
export function readAxisPoints(reader: BlockReader): AxisPoints {
  const { line } = reader.begun;
  const name = reader.word("name");
  const text = reader.quoted();
  const address = reader.whole("address");
  const inputQuantity = reader.reference("input quantity", NO_QUANTITY);
  const layout = reader.word("record layout");
  reader.number("largest difference");
  const conversion = reader.reference("conversion", NO_CONVERSION);
  const maxPoints = reader.whole("number of points");
  const limits = { lowerLimit: reader.limit("lower limit"), upperLimit: reader.limit("upper limit") };
  const options = newOptions();
  for (let keyword = reader.option(); keyword !== null; keyword = reader.option())
    if (!readPlacedOption(reader, keyword, options)) reader.pass(keyword, "AXIS_PTS");
  return {
    ...{ name, text, address, layout, conversion, ...limits, ...options, line },
    ...{ inputQuantity, maxPoints },
  };
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
