import type { BlockReader } from "@/lib/calibration/a2l/blocks/block-reader";
import { readByteOrder } from "@/lib/calibration/a2l/blocks/read-layout";
import type { AxisDescription, AxisKind, ByteOrder } from "@/lib/calibration/a2l/types";

const KINDS: readonly AxisKind[] = ["STD_AXIS", "COM_AXIS", "FIX_AXIS", "RES_AXIS", "CURVE_AXIS"];
/** No axis has more points than an unsigned 16-bit count can say. */
const MOST_POINTS = 65_535;

/** Points of a fixed axis from its rule: offset + i · step. */
function fixedPoints(reader: BlockReader, isShift: boolean): number[] | null {
  const offset = reader.number("offset");
  const step = isShift ? 2 ** reader.number("shift") : reader.number("distance");
  const count = reader.whole("number of points");
  if (!(count >= 1 && count <= MOST_POINTS))
    reader.fault ??= `its fixed axis of ${count} points is not possible`;
  if (!Number.isFinite(offset + MOST_POINTS * step))
    reader.fault ??= "the steps of its fixed axis are not possible";
  if (reader.fault !== null) return null;
  reader.findings.keep(count, reader.begun);
  return Array.from({ length: count }, (_, i) => offset + i * step);
}

/** Numbers of a FIX_AXIS_PAR_LIST block, up to its end. */
function listedPoints(reader: BlockReader): number[] {
  const points = reader.numbers(MOST_POINTS);
  const left = reader.names();
  if (left.length > 0)
    reader.fault ??= `"${left[0].slice(0, 40)}" in the list of its fixed axis is no number`;
  return points;
}

/** Reads an AXIS_DESCR with its options in any order. Faults stand in `reader.fault`. */
export function readAxis(reader: BlockReader): AxisDescription {
  const { begun } = reader;
  const kindWord = reader.word("kind of axis");
  const kind = KINDS.find((each) => each === kindWord) ?? "STD_AXIS";
  if (kind !== kindWord) reader.fault ??= `its kind of axis "${kindWord}" is not known`;
  const inputQuantity = reader.reference("input quantity", "NO_INPUT_QUANTITY");
  const conversion = reader.reference("axis conversion", "NO_COMPU_METHOD");
  const maxPoints = reader.whole("number of axis points");
  const lowerLimit = reader.limit("lower limit");
  const upperLimit = reader.limit("upper limit");
  let reference: string | null = null;
  let fixedRaw: number[] | null = null;
  let byteOrder: ByteOrder | null = null;
  let physUnit: string | null = null;
  let format: string | null = null;
  for (let keyword = reader.option(); keyword !== null; keyword = reader.option()) {
    switch (keyword) {
      case "AXIS_PTS_REF":
      case "CURVE_AXIS_REF":
        reference = reader.word("axis reference");
        break;
      case "FIX_AXIS_PAR":
      case "FIX_AXIS_PAR_DIST":
        fixedRaw = fixedPoints(reader, keyword === "FIX_AXIS_PAR");
        break;
      case "/FIX_AXIS_PAR_LIST":
        fixedRaw = listedPoints(reader);
        break;
      case "BYTE_ORDER":
        byteOrder = readByteOrder(reader, begun);
        break;
      case "PHYS_UNIT":
        physUnit = reader.word("unit");
        break;
      case "FORMAT":
        format = reader.word("format");
        break;
      case "EXTENDED_LIMITS":
        reader.limit("extended limit");
        reader.limit("extended limit");
        break;
      case "DEPOSIT":
        if (reader.word("deposit") === "DIFFERENCE")
          reader.fault ??= "its axis is stored as differences (DEPOSIT DIFFERENCE), which is not read";
        break;
      case "READ_ONLY":
        break;
      default:
        reader.pass(keyword, "AXIS_DESCR");
    }
  }
  if (reference === null && (kind === "COM_AXIS" || kind === "RES_AXIS" || kind === "CURVE_AXIS"))
    reader.fault ??= `its ${kind} does not name what it rests on`;
  reader.findings.keep(4, begun);
  return {
    kind,
    inputQuantity,
    conversion,
    maxPoints,
    lowerLimit,
    upperLimit,
    reference,
    fixedRaw,
    byteOrder,
    physUnit,
    format,
    line: begun.line,
  };
}
