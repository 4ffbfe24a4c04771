/** Byte order of a number in memory; the word-swapped kinds exist since ASAP2 1.7. */
export type ByteOrder = "little" | "big" | "little_words_swapped" | "big_words_swapped";

export const DATA_TYPES = {
  UBYTE: 1,
  SBYTE: 1,
  UWORD: 2,
  SWORD: 2,
  ULONG: 4,
  SLONG: 4,
  A_UINT64: 8,
  A_INT64: 8,
  FLOAT16_IEEE: 2,
  FLOAT32_IEEE: 4,
  FLOAT64_IEEE: 8,
} as const;
/** A number's kind in memory, as ASAP2 writes it; the table above holds its size in bytes. */
export type DataType = keyof typeof DATA_TYPES;

/** Alignment in bytes by data type, from MOD_COMMON, overridden by a record layout. */
export type Alignments = Partial<Record<DataType, number>>;

/** One component of a record layout, at a position. */
export interface LayoutComponent {
  /** FNC_VALUES, AXIS_PTS_X, NO_AXIS_PTS_X, AXIS_RESCALE_X, NO_RESCALE_X, RESERVED, IDENTIFICATION, SRC_ADDR_X, RIP_ADDR_W, OFFSET_X … */
  keyword: string;
  position: number;
  dataType: DataType;
  /** FNC_VALUES: how cells follow each other; null = ROW_DIR. ALTERNATE_* mixes axis points and values. */
  indexMode: "ROW_DIR" | "COLUMN_DIR" | "ALTERNATE_CURVES" | "ALTERNATE_WITH_X" | "ALTERNATE_WITH_Y" | null;
  /** Axes: order of the points in memory. */
  indexOrder: "INDEX_INCR" | "INDEX_DECR" | null;
  /** AXIS_RESCALE_X: greatest number of pairs. */
  maxPairs: number | null;
}

export interface RecordLayout {
  name: string;
  /** By position. */
  components: LayoutComponent[];
  /** FIX_NO_AXIS_PTS_X … by axis letter (X, Y, Z, 4, 5). */
  fixedCounts: Partial<Record<AxisLetter, number>>;
  alignments: Alignments;
  /** STATIC_RECORD_LAYOUT: places do not move with the used number of points. */
  isStatic: boolean;
  /** STATIC_ADDRESS_OFFSETS: axes and function values begin where they would with the most points; inside them places do move. */
  keepsStarts: boolean;
}

/** Letters by which a record layout tells axes apart. */
export const AXIS_LETTERS = ["X", "Y", "Z", "4", "5"] as const;
export type AxisLetter = (typeof AXIS_LETTERS)[number];

/** How raw becomes physical. */
export type Conversion = {
  name: string;
  text: string;
  unit: string;
  decimals: number | null;
  /** Ranges of raw that are no number but a state (STATUS_STRING_REF), with its text. */
  status?: readonly { from: number; to: number; text: string }[];
} & (
  | { kind: "identical" }
  /** phys = a·raw + b */
  | { kind: "linear"; a: number; b: number }
  /** raw = (a·p² + b·p + c) / (d·p² + e·p + f), p physical */
  | { kind: "rational"; coefficients: readonly [number, number, number, number, number, number] }
  /** Pairs raw → physical; interpolated: between them; default: outside a table that is not interpolated. */
  | {
      kind: "table";
      interpolated: boolean;
      pairs: readonly (readonly [number, number])[];
      fallback: number | null;
    }
  /** Ranges of raw, both ends inside, with the text they mean. */
  | { kind: "words"; ranges: readonly { from: number; to: number; text: string }[]; fallback: string | null }
  /** A formula in X1; not evaluated by anything but the own parser. */
  | { kind: "formula"; formula: string }
  /** Named, but what it names is not there or is not understood. */
  | { kind: "unknown"; reason: string }
);

export type AxisKind = "STD_AXIS" | "COM_AXIS" | "FIX_AXIS" | "RES_AXIS" | "CURVE_AXIS";

export interface AxisDescription {
  kind: AxisKind;
  /** Name of the measurement that moves along this axis; null = NO_INPUT_QUANTITY. */
  inputQuantity: string | null;
  /** Name of the conversion; null = NO_COMPU_METHOD. */
  conversion: string | null;
  maxPoints: number;
  lowerLimit: number;
  upperLimit: number;
  /** COM_AXIS, RES_AXIS: an AXIS_PTS; CURVE_AXIS: a CURVE. */
  reference: string | null;
  /** FIX_AXIS: its raw points, worked out from PAR, PAR_DIST or PAR_LIST. */
  fixedRaw: readonly number[] | null;
  byteOrder: ByteOrder | null;
  physUnit: string | null;
  format: string | null;
  line: number;
}

/** What characteristics and shared axes have in common. */
interface Placed {
  name: string;
  /** LongIdentifier. */
  text: string;
  displayIdentifier: string | null;
  address: number;
  layout: string;
  conversion: string | null;
  lowerLimit: number;
  upperLimit: number;
  extendedLimits: readonly [number, number] | null;
  byteOrder: ByteOrder | null;
  format: string | null;
  physUnit: string | null;
  readOnly: boolean;
  /** Line of `/begin`, in the file it stands in. */
  line: number;
}

export type CharacteristicType =
  | "VALUE"
  | "CURVE"
  | "MAP"
  | "CUBOID"
  | "CUBE_4"
  | "CUBE_5"
  | "VAL_BLK"
  | "ASCII";

/** Axes that each type must describe. */
export const AXES_OF: Readonly<Record<CharacteristicType, number>> = {
  VALUE: 0,
  CURVE: 1,
  MAP: 2,
  CUBOID: 3,
  CUBE_4: 4,
  CUBE_5: 5,
  VAL_BLK: 0,
  ASCII: 0,
};

export interface Characteristic extends Placed {
  type: CharacteristicType;
  axes: readonly AxisDescription[];
  /** MATRIX_DIM or NUMBER; null = one value. Dimensions of 1 at the end are kept as written. */
  matrixDim: readonly number[] | null;
  /** A whole number up to 64 bits. */
  bitMask: bigint | null;
  discrete: boolean;
  /** VIRTUAL_CHARACTERISTIC has no memory; DEPENDENT_CHARACTERISTIC has. */
  derived: { kind: "virtual" | "dependent"; formula: string; inputs: readonly string[] } | null;
}

export interface AxisPoints extends Placed {
  inputQuantity: string | null;
  maxPoints: number;
}

export interface MemorySegment {
  name: string;
  text: string;
  /** CODE, DATA, OFFLINE_DATA, RESERVED … as written. */
  programType: string;
  address: number;
  length: number;
}

/** FUNCTION or GROUP: a named set of characteristics, with sub-sets by name. Cycles are possible in bad files. */
export interface NamedSet {
  name: string;
  text: string;
  characteristics: readonly string[];
  subSets: readonly string[];
  isRoot: boolean;
}

/** A measurement, as far as axes need it: input quantities have a unit. */
export interface Measurement {
  name: string;
  text: string;
  conversion: string | null;
  physUnit: string | null;
}

/** Something that a person should know; `line` counts from 1 in `file`. */
export interface DescriptionNote {
  code: string;
  message: string;
  file: string;
  line: number | null;
}

export interface DescriptionModule {
  name: string;
  byteOrder: ByteOrder;
  alignments: Alignments;
  memorySegments: readonly MemorySegment[];
  /** EPK: a text by which description and image are known to belong together, and where it lies in the image. */
  epk: { text: string; addresses: readonly number[] } | null;
  characteristics: ReadonlyMap<string, Characteristic>;
  axisPoints: ReadonlyMap<string, AxisPoints>;
  layouts: ReadonlyMap<string, RecordLayout>;
  conversions: ReadonlyMap<string, Conversion>;
  measurements: ReadonlyMap<string, Measurement>;
  functions: ReadonlyMap<string, NamedSet>;
  groups: ReadonlyMap<string, NamedSet>;
}

/** An ASAP2 description (ASAM MCD-2 MC 1.5 to 1.7), as far as values need it. */
export interface Description {
  /** As written, e.g. "1.71"; null where it is missing. */
  version: string | null;
  project: string;
  encoding: string;
  modules: readonly DescriptionModule[];
  /** Blocks that were skipped, by keyword and name, with why; not fatal. */
  notRead: readonly { keyword: string; name: string; reason: string; line: number }[];
  /** Names of included files that were not among the files given. */
  missingIncludes: readonly string[];
  notes: readonly DescriptionNote[];
}

/** One file of an upload: the main one comes first. */
export interface DescriptionFile {
  name: string;
  bytes: Uint8Array;
}

/** Codes with which a description is refused (FileRefusedError). */
export const DESCRIPTION_REFUSALS = [
  "empty_file",
  "not_text",
  "no_project",
  "no_module",
  "unbalanced_block",
  "string_not_closed",
  "comment_not_closed",
  "include_cycle",
  "unexpected_text",
  "too_large",
] as const;
