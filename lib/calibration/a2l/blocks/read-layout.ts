import type { BlockReader } from "@/lib/calibration/a2l/blocks/block-reader";
import type { Place } from "@/lib/calibration/a2l/findings";
import {
  type Alignments,
  AXIS_LETTERS,
  type AxisLetter,
  type ByteOrder,
  DATA_TYPES,
  type DataType,
  type LayoutComponent,
  type RecordLayout,
} from "@/lib/calibration/a2l/types";

const ALIGNED: Readonly<Record<string, readonly DataType[]>> = {
  ALIGNMENT_BYTE: ["UBYTE", "SBYTE"],
  ALIGNMENT_WORD: ["UWORD", "SWORD"],
  ALIGNMENT_LONG: ["ULONG", "SLONG"],
  ALIGNMENT_INT64: ["A_UINT64", "A_INT64"],
  ALIGNMENT_FLOAT16_IEEE: ["FLOAT16_IEEE"],
  ALIGNMENT_FLOAT32_IEEE: ["FLOAT32_IEEE"],
  ALIGNMENT_FLOAT64_IEEE: ["FLOAT64_IEEE"],
};
const RESERVED_SIZES: Readonly<Record<string, DataType>> = { BYTE: "UBYTE", WORD: "UWORD", LONG: "ULONG" };
const INDEX_MODES = [
  "ROW_DIR",
  "COLUMN_DIR",
  "ALTERNATE_CURVES",
  "ALTERNATE_WITH_X",
  "ALTERNATE_WITH_Y",
] as const;
const INDEX_ORDERS = ["INDEX_INCR", "INDEX_DECR"] as const;
/** Components of one layout: five axes of all kinds have fewer. Each record of the layout walks over all of them. */
const MOST_COMPONENTS = 256;
/** Components of a position and a data type only. */
const PLAIN =
  /^(IDENTIFICATION|(NO_AXIS_PTS|NO_RESCALE|SRC_ADDR|OFFSET|SHIFT_OP|DIST_OP)_[XYZ45]|RIP_ADDR_[WXYZ45])$/;
const AXIS_POINTS = /^AXIS_(PTS|RESCALE)_[XYZ45]$/;

/** One of the words of a list; null, and a fault, for any other. */
function wordOf<T extends string>(reader: BlockReader, what: string, words: readonly T[]): T | null {
  const word = reader.word(what);
  const known = words.find((each) => each === word);
  if (known === undefined) reader.fault ??= `its ${what} "${word}" is not known`;
  return known ?? null;
}

const isDataType = (word: string): word is DataType => Object.hasOwn(DATA_TYPES, word);

function dataType(reader: BlockReader): DataType {
  const word = reader.word("data type");
  if (isDataType(word)) return word;
  reader.fault ??= `its data type "${word}" is not known`;
  return "UBYTE";
}

/** Reads an ALIGNMENT keyword's value into `alignments`; false where the keyword is another. */
export function readAlignment(reader: BlockReader, keyword: string, alignments: Alignments): boolean {
  if (!Object.hasOwn(ALIGNED, keyword)) return false;
  const bytes = reader.whole("alignment");
  if (!(bytes >= 1 && bytes <= 64)) reader.fault ??= `its alignment of ${bytes} bytes is not possible`;
  else for (const type of ALIGNED[keyword]) alignments[type] = bytes;
  return true;
}

/** Byte order by its word. The two old words are taken in their usual meaning, with a note. */
export function readByteOrder(reader: BlockReader, place: Place): ByteOrder | null {
  const word = reader.word("byte order");
  switch (word) {
    case "MSB_LAST":
      return "little";
    case "MSB_FIRST":
      return "big";
    case "MSB_FIRST_MSW_LAST":
      return "big_words_swapped";
    case "MSB_LAST_MSW_FIRST":
      return "little_words_swapped";
    case "LITTLE_ENDIAN":
    case "BIG_ENDIAN":
      reader.findings.noteOnce(
        "byte_order_old_word",
        word,
        `The byte order ${word} is an old word whose meaning was swapped in early versions of the standard; it was taken as it is used today. Compare one known value.`,
        place,
      );
      return word === "BIG_ENDIAN" ? "big" : "little";
    default:
      reader.fault ??= `its byte order "${word}" is not known`;
      return null;
  }
}

/** Values and axis points behind a pointer are not read: the layout is then refused as a whole. */
function requireDirect(reader: BlockReader): void {
  const word = reader.word("address type");
  if (word !== "DIRECT") reader.fault ??= `it reaches its values by a pointer (${word}), which is not read`;
}

function readComponent(reader: BlockReader, keyword: string): LayoutComponent | null {
  const empty = { indexMode: null, indexOrder: null, maxPairs: null };
  if (keyword === "FNC_VALUES") {
    const place = { position: reader.whole("position"), dataType: dataType(reader) };
    const indexMode = wordOf(reader, "index mode", INDEX_MODES);
    requireDirect(reader);
    return { ...empty, keyword, ...place, indexMode };
  }
  if (AXIS_POINTS.test(keyword)) {
    const place = { position: reader.whole("position"), dataType: dataType(reader) };
    const maxPairs = keyword.startsWith("AXIS_RESCALE") ? reader.whole("number of pairs") : null;
    const indexOrder = wordOf(reader, "index order", INDEX_ORDERS);
    requireDirect(reader);
    return { ...empty, keyword, ...place, maxPairs, indexOrder };
  }
  if (keyword === "RESERVED") {
    const position = reader.whole("position");
    const size = reader.word("size");
    if (Object.hasOwn(RESERVED_SIZES, size))
      return { ...empty, keyword, position, dataType: RESERVED_SIZES[size] };
    if (isDataType(size)) return { ...empty, keyword, position, dataType: size };
    reader.fault ??= `its reserved size "${size}" is not known`;
    return null;
  }
  if (!PLAIN.test(keyword)) return null;
  return { ...empty, keyword, position: reader.whole("position"), dataType: dataType(reader) };
}

/** Reads a RECORD_LAYOUT: its components by position, fixed counts and alignments. Faults stand in `reader.fault`. */
export function readRecordLayout(reader: BlockReader): RecordLayout {
  const name = reader.word("name");
  const layout = { name, components: [] as LayoutComponent[], alignments: {} as Alignments };
  const fixedCounts: Partial<Record<AxisLetter, number>> = {};
  let isStatic = false;
  let keepsStarts = false;
  for (let keyword = reader.option(); keyword !== null; keyword = reader.option()) {
    const letter = AXIS_LETTERS.find((each) => keyword === `FIX_NO_AXIS_PTS_${each}`);
    if (letter) fixedCounts[letter] = reader.whole("fixed number of points");
    else if (keyword === "STATIC_RECORD_LAYOUT") isStatic = true;
    else if (keyword === "STATIC_ADDRESS_OFFSETS") keepsStarts = true;
    else if (!readAlignment(reader, keyword, layout.alignments)) {
      const component = readComponent(reader, keyword);
      if (component) {
        if (layout.components.length < MOST_COMPONENTS) layout.components.push(component);
        else reader.fault ??= `it has more than ${MOST_COMPONENTS} components`;
        reader.findings.keep(4, reader.begun);
      } else reader.pass(keyword, "RECORD_LAYOUT");
    }
  }
  layout.components.sort((a, b) => a.position - b.position);
  return { ...layout, fixedCounts, isStatic, keepsStarts };
}
