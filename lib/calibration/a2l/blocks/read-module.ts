import type { BlockReader } from "@/lib/calibration/a2l/blocks/block-reader";
import {
  readAxisPoints,
  readCharacteristic,
  readMeasurement,
} from "@/lib/calibration/a2l/blocks/read-characteristic";
import {
  type ConversionMethod,
  type ConversionTable,
  readConversionMethod,
  readNumberTable,
  readRangeTable,
  readWordTable,
  resolveConversion,
} from "@/lib/calibration/a2l/blocks/read-conversion";
import { readRecordLayout } from "@/lib/calibration/a2l/blocks/read-layout";
import { type ModuleFacts, readModCommon, readModPar } from "@/lib/calibration/a2l/blocks/read-module-facts";
import { addListed, readFunction, readGroup, setsInCycles } from "@/lib/calibration/a2l/blocks/read-set";
import { ENTRIES_OF_A_THING, type Place } from "@/lib/calibration/a2l/findings";
import type {
  AxisPoints,
  Characteristic,
  DescriptionModule,
  Measurement,
  NamedSet,
  RecordLayout,
} from "@/lib/calibration/a2l/types";

/** Why a block of the standard is not read. */
const NOT_READ: ReadonlyMap<string, string> = new Map(
  Object.entries({
    BLOB: "blocks of bytes without a meaning are not read",
    INSTANCE: "instances of types are not read",
    TRANSFORMER: "values that a program works out are not read",
    TYPEDEF_AXIS: "types are not read",
    TYPEDEF_BLOB: "types are not read",
    TYPEDEF_CHARACTERISTIC: "types are not read",
    TYPEDEF_MEASUREMENT: "types are not read",
    TYPEDEF_STRUCTURE: "types are not read",
    VARIANT_CODING: "variants are not read; what has variants is read at its own address",
  }),
);

interface Draft {
  facts: ModuleFacts;
  characteristics: Map<string, Characteristic>;
  axisPoints: Map<string, AxisPoints>;
  layouts: Map<string, RecordLayout>;
  measurements: Map<string, Measurement>;
  functions: Map<string, NamedSet>;
  groups: Map<string, NamedSet>;
  methods: Map<string, ConversionMethod>;
  tables: Map<string, ConversionTable>;
  units: Map<string, { name: string; display: string }>;
}

/** Reads one named thing into its map; what is at fault is listed as not read, of equal names the first stays. */
function take<T extends { name: string }>(
  reader: BlockReader,
  keyword: string,
  into: Map<string, T>,
  read: (reader: BlockReader) => T,
): void {
  const place = reader.begun;
  reader.fault = null;
  const thing = read(reader);
  if (reader.fault !== null) reader.findings.skipped(keyword, thing.name, reader.fault, place.line);
  else if (into.has(thing.name)) {
    const message = `${keyword} ${thing.name} is described twice; the first one counts.`;
    reader.findings.note("duplicate_name", message, place);
  } else {
    reader.findings.keep(ENTRIES_OF_A_THING, place);
    into.set(thing.name, thing);
  }
}

function readUnit(reader: BlockReader): { name: string; display: string } {
  const name = reader.word("name");
  reader.quoted();
  const display = reader.word("display text");
  reader.word("type");
  for (let keyword = reader.option(); keyword !== null; keyword = reader.option())
    if (keyword === "REF_UNIT") reader.word("unit");
    else reader.pass(keyword, "UNIT");
  return { name, display };
}

/** Reads MOD_COMMON or MOD_PAR; what is at fault in it is a note. */
function takeFacts(
  reader: BlockReader,
  keyword: string,
  read: (reader: BlockReader, facts: ModuleFacts) => void,
  facts: ModuleFacts,
): void {
  const place = reader.begun;
  reader.fault = null;
  read(reader, facts);
  if (reader.fault !== null)
    reader.findings.note("block_at_fault", `${keyword} was read in part only: ${reader.fault}.`, place);
}

type ReadBlock = (reader: BlockReader, draft: Draft) => void;

/** What is read, by keyword. */
const READERS: ReadonlyMap<string, ReadBlock> = new Map(
  Object.entries<ReadBlock>({
    CHARACTERISTIC: (reader, draft) =>
      take(reader, "CHARACTERISTIC", draft.characteristics, readCharacteristic),
    AXIS_PTS: (reader, draft) => take(reader, "AXIS_PTS", draft.axisPoints, readAxisPoints),
    RECORD_LAYOUT: (reader, draft) => take(reader, "RECORD_LAYOUT", draft.layouts, readRecordLayout),
    MEASUREMENT: (reader, draft) => take(reader, "MEASUREMENT", draft.measurements, readMeasurement),
    FUNCTION: (reader, draft) => take(reader, "FUNCTION", draft.functions, readFunction),
    GROUP: (reader, draft) => take(reader, "GROUP", draft.groups, readGroup),
    COMPU_METHOD: (reader, draft) => take(reader, "COMPU_METHOD", draft.methods, readConversionMethod),
    COMPU_TAB: (reader, draft) => take(reader, "COMPU_TAB", draft.tables, readNumberTable),
    COMPU_VTAB: (reader, draft) => take(reader, "COMPU_VTAB", draft.tables, readWordTable),
    COMPU_VTAB_RANGE: (reader, draft) => take(reader, "COMPU_VTAB_RANGE", draft.tables, readRangeTable),
    UNIT: (reader, draft) => take(reader, "UNIT", draft.units, readUnit),
    MOD_COMMON: (reader, draft) => takeFacts(reader, "MOD_COMMON", readModCommon, draft.facts),
    MOD_PAR: (reader, draft) => takeFacts(reader, "MOD_PAR", readModPar, draft.facts),
    A2ML: (reader) => reader.passA2ml(),
    FRAME: (reader) => reader.passBlock(),
    IF_DATA: (reader) => reader.passBlock(),
    USER_RIGHTS: (reader) => reader.passBlock(),
  }),
);

/** Passes over a block that is not read, and lists it. */
function skip(reader: BlockReader, keyword: string): void {
  const { line } = reader.begun;
  const reason = NOT_READ.get(keyword);
  const name = reason === undefined || keyword === "VARIANT_CODING" ? "" : reader.word("name");
  reader.findings.skipped(keyword, name, reason ?? "this kind of block is not known", line);
  reader.passBlock();
}

/** Notes on what hangs together wrongly, once the whole module is known. */
function noteConnections(reader: BlockReader, draft: Draft, place: Place): void {
  const { findings } = reader;
  for (const [keyword, sets] of [
    ["FUNCTION", draft.functions],
    ["GROUP", draft.groups],
  ] as const) {
    for (const name of setsInCycles(sets))
      findings.note("sets_in_a_circle", `${keyword} ${name} contains itself over its sub-sets.`, place);
  }
  for (const name of draft.axisPoints.keys()) {
    const other = draft.characteristics.get(name);
    if (!other) continue;
    const message = `${name} is both a characteristic and a shared axis.`;
    findings.note("duplicate_name", message, { file: place.file, line: other.line });
  }
}

/** Reads a MODULE up to its end: blocks in any order, references resolved when all are known. */
export function readModule(reader: BlockReader): DescriptionModule {
  const place = reader.begun;
  const name = reader.word("name");
  reader.quoted();
  const draft: Draft = {
    facts: { byteOrder: null, alignments: {}, memorySegments: [], epkText: null, epkAddresses: [] },
    ...{ characteristics: new Map(), axisPoints: new Map(), layouts: new Map(), measurements: new Map() },
    ...{ functions: new Map(), groups: new Map(), methods: new Map(), tables: new Map(), units: new Map() },
  };
  for (let option = reader.option(); option !== null; option = reader.option()) {
    if (!option.startsWith("/")) {
      reader.pass(option, "MODULE");
      continue;
    }
    const keyword = option.slice(1);
    const read = READERS.get(keyword);
    if (read) read(reader, draft);
    else skip(reader, keyword);
  }
  const { facts, methods, tables } = draft;
  if (facts.byteOrder === null && draft.characteristics.size > 0) {
    const message = `The module ${name} states no byte order in MOD_COMMON; little-endian was taken.`;
    reader.findings.note("byte_order_missing", message, place);
  }
  addListed(draft.functions, reader.listedFunctions);
  reader.listedFunctions = [];
  noteConnections(reader, draft, place);
  const units = new Map(Array.from(draft.units.values(), ({ name: unit, display }) => [unit, display]));
  const { characteristics, axisPoints, layouts, measurements, functions, groups } = draft;
  return {
    name,
    byteOrder: facts.byteOrder ?? "little",
    alignments: facts.alignments,
    memorySegments: facts.memorySegments,
    epk: facts.epkText === null ? null : { text: facts.epkText, addresses: facts.epkAddresses },
    ...{ characteristics, axisPoints, layouts, measurements, functions, groups },
    conversions: new Map(
      Array.from(methods, ([key, method]) => [key, resolveConversion(method, tables, units)]),
    ),
  };
}
