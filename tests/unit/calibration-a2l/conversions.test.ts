import { describe, expect, it } from "vitest";
import { readModuleOf } from "@/tests/support/description-text";

const method = (rest: string) => readModuleOf(`/begin COMPU_METHOD C "text" ${rest} /end COMPU_METHOD`);
const TABLES = `
  /begin COMPU_TAB T "" TAB_INTP 3 0 -40 0x10 0 32 1.5e2 DEFAULT_VALUE_NUMERIC -99.5 /end COMPU_TAB
  /begin COMPU_VTAB V "" TAB_VERB 2 0 "off" 1 "on" DEFAULT_VALUE "else" /end COMPU_VTAB
  /begin COMPU_VTAB_RANGE R "" 2 0 3 "low" 4 5.5 "high" /end COMPU_VTAB_RANGE`;
const withTables = (rest: string) =>
  readModuleOf(`/begin COMPU_METHOD C "" ${rest} /end COMPU_METHOD ${TABLES}`).module.conversions.get("C");

describe("conversions", () => {
  it.each([
    ['IDENTICAL "%3.0" "h"', { kind: "identical", unit: "h", decimals: 0 }],
    ['LINEAR "%6.2" "V" COEFFS_LINEAR 2 -4.5', { kind: "linear", a: 2, b: -4.5, decimals: 2 }],
    [
      'RAT_FUNC "%8.4f" "%" COEFFS 0 1 50 0 0 1',
      { kind: "rational", coefficients: [0, 1, 50, 0, 0, 1], decimals: 4 },
    ],
    [
      'FORM "%d" "" /begin FORMULA "X1+4" FORMULA_INV "X1-4" /end FORMULA',
      { kind: "formula", formula: "X1+4", decimals: null },
    ],
  ])("%s", (written, expected) => {
    const { module, notes } = method(written);
    expect(module.conversions.get("C")).toMatchObject({ name: "C", text: "text", ...expected });
    expect(notes).toEqual([]);
  });
  it("tables may stand behind the methods that name them", () => {
    const pairs = [
      [0, -40],
      [16, 0],
      [32, 150],
    ];
    expect(withTables('TAB_INTP "%1.0" "" COMPU_TAB_REF T')).toMatchObject({
      ...{ kind: "table", interpolated: true, pairs, fallback: -99.5 },
    });
    expect(withTables('TAB_NOINTP "%1.0" "" COMPU_TAB_REF T')).toMatchObject({ interpolated: false, pairs });
    expect(withTables('TAB_VERB "%1.0" "" COMPU_TAB_REF V')).toMatchObject({
      ...{ kind: "words", fallback: "else" },
      ranges: [
        { from: 0, to: 0, text: "off" },
        { from: 1, to: 1, text: "on" },
      ],
    });
    expect(withTables('TAB_VERB "%1.0" "" COMPU_TAB_REF R')).toMatchObject({
      fallback: null,
      ranges: [
        { from: 0, to: 3, text: "low" },
        { from: 4, to: 5.5, text: "high" },
      ],
    });
  });
  it("states beside numbers are kept", () => {
    expect(withTables('LINEAR "%1.0" "" COEFFS_LINEAR 1 0 STATUS_STRING_REF V')?.status).toEqual([
      { from: 0, to: 0, text: "off" },
      { from: 1, to: 1, text: "on" },
    ]);
  });
  it("a unit by name serves where none is written", () => {
    const unit = '/begin UNIT kmh "speed" "km/h" DERIVED UNIT_CONVERSION 3.6 0 /end UNIT';
    const { module } = readModuleOf(
      `/begin COMPU_METHOD C "" IDENTICAL "%1.0" "" REF_UNIT kmh /end COMPU_METHOD ${unit}`,
    );
    expect(module.conversions.get("C")?.unit).toBe("km/h");
  });
  it.each([
    ['LINEAR "%1.0" "" COEFFS_LINEAR 2', "COEFFS_LINEAR with two numbers is missing"],
    ['RAT_FUNC "%1.0" "" COEFFS 0 1 0 0 1', "COEFFS with six numbers is missing"],
    ['FORM "%1.0" ""', "FORMULA is missing"],
    ['TAB_INTP "%1.0" "" COMPU_TAB_REF V', "its table of numbers V is not there"],
    ['TAB_VERB "%1.0" "" COMPU_TAB_REF gone', "its table of words gone is not there"],
    ['CURVED "%1.0" ""', 'the type of conversion "CURVED" is not known'],
  ])("%s is unknown, with the reason", (written, reason) => {
    expect(withTables(written)).toMatchObject({ kind: "unknown", reason });
  });
  it("a table with another number of pairs than announced is read as it stands, and told", () => {
    const { notes } = readModuleOf(
      '/begin COMPU_TAB T "" TAB_INTP 9 0 1 2 3 /end COMPU_TAB /begin COMPU_VTAB V "" TAB_VERB 4294967295 0 "a" /end COMPU_VTAB',
    );
    expect(notes.map(({ message }) => message)).toEqual([
      "The table T announces 9 entries and has 2; those that are there were read.",
      "The table V announces 4294967295 entries and has 1; those that are there were read.",
    ]);
  });
});

describe("record layouts", () => {
  it("all kinds of components, by position, with fixed counts and alignments", () => {
    const { module, notes } = readModuleOf(`/begin RECORD_LAYOUT L
      FNC_VALUES 9 FLOAT16_IEEE COLUMN_DIR DIRECT AXIS_PTS_X 3 UWORD INDEX_DECR DIRECT NO_AXIS_PTS_X 2 UBYTE
      AXIS_RESCALE_Y 7 SBYTE 12 INDEX_INCR DIRECT NO_RESCALE_Y 6 UBYTE RESERVED 4 LONG IDENTIFICATION 1 A_UINT64
      SRC_ADDR_X 5 ULONG RIP_ADDR_W 8 ULONG OFFSET_X 10 SWORD SHIFT_OP_X 11 UBYTE DIST_OP_4 12 UBYTE
      FIX_NO_AXIS_PTS_Z 5 ALIGNMENT_WORD 1 STATIC_RECORD_LAYOUT /end RECORD_LAYOUT`);
    const layout = module.layouts.get("L");
    expect(layout?.components.map(({ keyword, position }) => `${position} ${keyword}`)).toEqual([
      ...[
        "1 IDENTIFICATION",
        "2 NO_AXIS_PTS_X",
        "3 AXIS_PTS_X",
        "4 RESERVED",
        "5 SRC_ADDR_X",
        "6 NO_RESCALE_Y",
      ],
      ...["7 AXIS_RESCALE_Y", "8 RIP_ADDR_W", "9 FNC_VALUES", "10 OFFSET_X", "11 SHIFT_OP_X", "12 DIST_OP_4"],
    ]);
    expect(layout?.components[2]).toMatchObject({
      dataType: "UWORD",
      indexOrder: "INDEX_DECR",
      indexMode: null,
    });
    expect(layout?.components[3].dataType).toBe("ULONG");
    expect(layout?.components[6].maxPairs).toBe(12);
    expect(layout?.components[8]).toMatchObject({ dataType: "FLOAT16_IEEE", indexMode: "COLUMN_DIR" });
    expect(layout?.fixedCounts).toEqual({ Z: 5 });
    expect(layout?.alignments).toEqual({ UWORD: 1, SWORD: 1 });
    expect(layout).toMatchObject({ isStatic: true, keepsStarts: false });
    const offsets = readModuleOf(
      "/begin RECORD_LAYOUT L FNC_VALUES 1 UBYTE ROW_DIR DIRECT STATIC_ADDRESS_OFFSETS /end RECORD_LAYOUT",
    );
    expect(offsets.module.layouts.get("L")).toMatchObject({ isStatic: false, keepsStarts: true });
    expect(notes).toEqual([]);
  });
  it.each([
    ["FNC_VALUES 1 UWORD ROW_DIR PLONG", "it reaches its values by a pointer (PLONG), which is not read"],
    ["FNC_VALUES 1 BITS ROW_DIR DIRECT", 'its data type "BITS" is not known'],
    ["FNC_VALUES 1 UWORD SIDEWAYS DIRECT", 'its index mode "SIDEWAYS" is not known'],
    ["ALIGNMENT_LONG 0", "its alignment of 0 bytes is not possible"],
  ])("%s is listed as not read", (written, reason) => {
    const { module, notRead } = readModuleOf(`/begin RECORD_LAYOUT L ${written} /end RECORD_LAYOUT`);
    expect(module.layouts.size).toBe(0);
    expect(notRead).toMatchObject([{ keyword: "RECORD_LAYOUT", name: "L", reason }]);
  });
});
