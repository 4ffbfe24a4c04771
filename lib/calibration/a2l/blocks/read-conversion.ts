import type { BlockReader } from "@/lib/calibration/a2l/blocks/block-reader";
import type { Conversion } from "@/lib/calibration/a2l/types";

type Ranges = Extract<Conversion, { kind: "words" }>["ranges"];
type Coefficients = Extract<Conversion, { kind: "rational" }>["coefficients"];

/** A COMPU_METHOD as written: what it names may stand further down. */
export interface ConversionMethod {
  name: string;
  text: string;
  type: string;
  format: string;
  unit: string;
  coefficients: number[];
  linear: number[];
  formula: string | null;
  tableName: string | null;
  unitName: string | null;
  statusName: string | null;
}

/** A COMPU_TAB, COMPU_VTAB or COMPU_VTAB_RANGE. */
export interface ConversionTable {
  name: string;
  pairs: (readonly [number, number])[] | null;
  ranges: Ranges | null;
  fallback: string | null;
  numericFallback: number | null;
}

/** Reads a COMPU_METHOD. Faults stand in `reader.fault`. */
export function readConversionMethod(reader: BlockReader): ConversionMethod {
  const method: ConversionMethod = {
    name: reader.word("name"),
    text: reader.quoted(),
    type: reader.word("type"),
    format: reader.word("format"),
    unit: reader.quoted(),
    ...{ coefficients: [], linear: [], formula: null, tableName: null, unitName: null, statusName: null },
  };
  for (let keyword = reader.option(); keyword !== null; keyword = reader.option()) {
    if (keyword === "COEFFS") method.coefficients = reader.numbers(6);
    else if (keyword === "COEFFS_LINEAR") method.linear = reader.numbers(2);
    else if (keyword === "COMPU_TAB_REF") method.tableName = reader.word("table");
    else if (keyword === "REF_UNIT") method.unitName = reader.word("unit");
    else if (keyword === "STATUS_STRING_REF") method.statusName = reader.word("status table");
    else if (keyword === "/FORMULA") {
      method.formula = reader.word("formula");
      reader.passBlock();
    } else reader.pass(keyword, "COMPU_METHOD");
  }
  return method;
}

/** Whether as many entries stand there as are announced; a person is told when not. */
function checkCount(reader: BlockReader, name: string, announced: number, found: number): void {
  if (announced === found || reader.fault !== null) return;
  const message = `The table ${name} announces ${announced} entries and has ${found}; those that are there were read.`;
  reader.findings.note("table_count_differs", message, reader.begun);
}

/** The number of an entry that follows, null where the entries end. */
function nextEntry(reader: BlockReader): number | null {
  const [value] = reader.numbers(1);
  return value ?? null;
}

/** Reads a COMPU_TAB: pairs of raw and physical numbers. */
export function readNumberTable(reader: BlockReader): ConversionTable {
  const table = newTable(reader);
  reader.word("type");
  const announced = reader.whole("number of pairs");
  const pairs: (readonly [number, number])[] = [];
  for (let raw = nextEntry(reader); raw !== null; raw = nextEntry(reader))
    pairs.push([raw, reader.number("physical value")]);
  checkCount(reader, table.name, announced, pairs.length);
  return readFallbacks(reader, { ...table, pairs });
}

/** Reads a COMPU_VTAB: raw numbers with the text each means. */
export function readWordTable(reader: BlockReader): ConversionTable {
  const table = newTable(reader);
  reader.word("type");
  const announced = reader.whole("number of pairs");
  const ranges = [];
  for (let raw = nextEntry(reader); raw !== null; raw = nextEntry(reader))
    ranges.push({ from: raw, to: raw, text: reader.word("text") });
  checkCount(reader, table.name, announced, ranges.length);
  return readFallbacks(reader, { ...table, ranges });
}

/** Reads a COMPU_VTAB_RANGE: ranges of raw numbers, both ends inside, with the text each means. */
export function readRangeTable(reader: BlockReader): ConversionTable {
  const table = newTable(reader);
  const announced = reader.whole("number of ranges");
  const ranges = [];
  for (let from = nextEntry(reader); from !== null; from = nextEntry(reader))
    ranges.push({ from, to: reader.number("end of a range"), text: reader.word("text") });
  checkCount(reader, table.name, announced, ranges.length);
  return readFallbacks(reader, { ...table, ranges });
}

function newTable(reader: BlockReader): ConversionTable {
  const name = reader.word("name");
  reader.quoted();
  return { name, pairs: null, ranges: null, fallback: null, numericFallback: null };
}

function readFallbacks(reader: BlockReader, table: ConversionTable): ConversionTable {
  for (let keyword = reader.option(); keyword !== null; keyword = reader.option()) {
    if (keyword === "DEFAULT_VALUE") table.fallback = reader.word("default");
    else if (keyword === "DEFAULT_VALUE_NUMERIC") table.numericFallback = reader.number("default");
    else reader.pass(keyword, "a conversion table");
  }
  return table;
}

const isSix = (numbers: readonly number[]): numbers is Coefficients => numbers.length === 6;

/** What a method means once all tables and units of the module are known; "unknown" with the reason where it means nothing. */
export function resolveConversion(
  method: ConversionMethod,
  tables: ReadonlyMap<string, ConversionTable>,
  units: ReadonlyMap<string, string>,
): Conversion {
  const { name, text, type, format, coefficients, linear, formula, tableName, unitName, statusName } = method;
  const decimals = /\.(\d{1,2})/.exec(format);
  const ranges = statusName === null ? null : tables.get(statusName)?.ranges;
  const common = {
    ...{ name, text, unit: method.unit || (units.get(unitName ?? "") ?? "") },
    decimals: decimals ? Number(decimals[1]) : null,
    ...(ranges ? { status: ranges } : {}),
  };
  const unknown = (reason: string): Conversion => ({ ...common, kind: "unknown", reason });
  const table = tableName === null ? undefined : tables.get(tableName);
  if (statusName !== null && !ranges) return unknown(`its table of states ${statusName} is not there`);
  switch (type) {
    case "IDENTICAL":
      return { ...common, kind: "identical" };
    case "LINEAR":
      if (linear.length < 2) return unknown("COEFFS_LINEAR with two numbers is missing");
      return { ...common, kind: "linear", a: linear[0], b: linear[1] };
    case "RAT_FUNC":
      if (!isSix(coefficients)) return unknown("COEFFS with six numbers is missing");
      return { ...common, kind: "rational", coefficients };
    case "FORM":
      return formula === null ? unknown("FORMULA is missing") : { ...common, kind: "formula", formula };
    case "TAB_INTP":
    case "TAB_NOINTP":
      if (!table?.pairs) return unknown(`its table of numbers ${tableName ?? ""} is not there`);
      return {
        ...common,
        ...{ kind: "table", interpolated: type === "TAB_INTP" },
        ...{ pairs: table.pairs, fallback: table.numericFallback },
      };
    case "TAB_VERB":
      if (!table?.ranges) return unknown(`its table of words ${tableName ?? ""} is not there`);
      return { ...common, kind: "words", ranges: table.ranges, fallback: table.fallback };
    default:
      return unknown(`the type of conversion "${type.slice(0, 40)}" is not known`);
  }
}
