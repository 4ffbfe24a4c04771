import { describe, expect, it } from "vitest";
import { asBytes, inModule, readModuleOf, readTexts } from "@/tests/support/description-text";

// What the standard's constructs mean is from memory of ASAM MCD-2 MC 1.5 to 1.7, as far as no real file of tests/golden shows it.
const value = (name: string, options = "") =>
  `/begin CHARACTERISTIC ${name} "text" VALUE 0x810000 L 0 NO_COMPU_METHOD 0 255 ${options} /end CHARACTERISTIC\n`;

describe("files of an upload", () => {
  const part = (name: string, more = "") => `${value(name)}${more}`;
  it("includes nest, quoted or not, in small and capital letters, by base name, with the other file's lines", () => {
    const description = readTexts({
      "main.a2l": inModule(
        `/include "parts\\one.a2l"\n/INCLUDE two.A2L ${value("last")}\n/include deeper/one.a2l`,
      ),
      "one.a2l": `\n${part("first", '/include "sub/three.aml"')}`,
      "Two.a2l": part("second"),
      "somewhere/three.aml": `/* comment */\n\n${part("third")}`,
    });
    const [module] = description.modules;
    expect([...module.characteristics.keys()]).toEqual(["first", "third", "second", "last"]);
    expect(module.characteristics.get("third")?.line).toBe(3);
    expect(module.characteristics.get("first")?.line).toBe(2);
    expect(description.missingIncludes).toEqual([]);
    // The second inclusion of one.a2l brings its names again.
    expect(description.notes.map(({ code, file, line }) => [code, file, line])).toEqual([
      ["duplicate_name", "one.a2l", 2],
      ["duplicate_name", "somewhere/three.aml", 3],
    ]);
  });
  it("are found by a path of any length, and a missing one is told by a short one", () => {
    const deep = `${"deliveries/of/the/supplier/".repeat(4)}axes`;
    const description = readTexts({
      "main.a2l": inModule(`/include "${deep}.a2l" /include ${"x".repeat(2000)}.a2l`),
      "axes.a2l": part("far"),
    });
    expect([...description.modules[0].characteristics.keys()]).toEqual(["far"]);
    expect(description.missingIncludes[0]).toMatch(/^x{300}…$/);
  });
  it("missing ones are listed once and the rest is read", () => {
    const description = readTexts({
      "main.a2l": inModule(`/include "gone/far.a2l" ${value("here")} /include near.a2l /include near.a2l`),
    });
    expect(description.missingIncludes).toEqual(["gone/far.a2l", "near.a2l"]);
    expect(description.modules[0].characteristics.size).toBe(1);
  });
  it("an included file has its own encoding, and a block may begin in one file and end in another", () => {
    const description = readTexts({
      "main.a2l": inModule(`/begin CHARACTERISTIC a "é" /include half.a2l /end CHARACTERISTIC`),
      "half.a2l": new Uint8Array([
        ...asBytes('VALUE 1 L 0 NO_COMPU_METHOD 0 9 PHYS_UNIT "'),
        0xb0,
        0x43,
        0x22,
      ]),
    });
    const read = description.modules[0].characteristics.get("a");
    expect([read?.text, read?.physUnit]).toEqual(["é", "°C"]);
  });
});

describe("encodings and line ends", () => {
  const text = inModule(value("a", 'PHYS_UNIT "°C"'));
  const latin = new Uint8Array(Array.from(text, (letter) => letter.charCodeAt(0)));
  const wide = (bigEndian: boolean) => {
    const view = new DataView(new ArrayBuffer(2 * text.length + 2));
    view.setUint16(0, 0xfeff, !bigEndian);
    for (let i = 0; i < text.length; i++) view.setUint16(2 * i + 2, text.charCodeAt(i), !bigEndian);
    return new Uint8Array(view.buffer);
  };
  it.each([
    ["utf-8", asBytes(text)],
    ["utf-8", asBytes(`\ufeff${text}`)],
    ["windows-1252", latin],
    ["utf-16le", wide(false)],
    ["utf-16be", wide(true)],
  ])("%s", (encoding, bytes) => {
    const description = readTexts({ "main.a2l": bytes });
    expect(description.encoding).toBe(encoding);
    expect(description.modules[0].characteristics.get("a")?.physUnit).toBe("°C");
  });
  it("CRLF and a DOS end mark are read, with the same line numbers", () => {
    const description = readTexts({ "main.a2l": `${text.replaceAll("\n", "\r\n")}\u001a` });
    expect(description.modules[0].characteristics.get("a")?.line).toBe(4);
  });
});

describe("texts, comments and tool data", () => {
  it("quotes doubled and escaped, comments between and behind words, none inside of texts", () => {
    const { module } = readModuleOf(`
      /begin CHARACTERISTIC/* c */a.b[0] // to the end "of the line
        "say ""no"" or \\"yes\\", C:\\dir\\\\ // not /* a comment */ /end" VALUE
        0x10/* address */L 0 NO_COMPU_METHOD 0/**/255/***/
        DISPLAY_IDENTIFIER x//y
      /end CHARACTERISTIC`);
    const read = module.characteristics.get("a.b[0]");
    expect(read?.text).toBe('say "no" or "yes", C:\\dir\\ // not /* a comment */ /end');
    expect([read?.address, read?.layout, read?.upperLimit, read?.displayIdentifier]).toEqual([
      16,
      "L",
      255,
      "x",
    ]);
  });
  it.each([
    ["one line", '/begin IF_DATA X 1 2 "a" /end IF_DATA'],
    ["many on a line", "/begin IF_DATA A /end IF_DATA /begin IF_DATA B 0x1 /end IF_DATA"],
    ["nested", "/begin IF_DATA X /begin CHARACTERISTIC b /begin Y /end Y /end CHARACTERISTIC /end IF_DATA"],
    [
      "with ends in texts and comments",
      '/begin IF_DATA X "/end IF_DATA" /* /end IF_DATA */ // /end IF_DATA\n /end IF_DATA',
    ],
    ["empty", "/begin IF_DATA /end IF_DATA"],
  ])("IF_DATA %s is passed over", (_, data) => {
    const { module, notes, notRead } = readModuleOf(`${data}${value("a", data)}${data}`);
    expect([...module.characteristics.keys()]).toEqual(["a"]);
    expect([notes, notRead]).toEqual([[], []]);
  });
  it("A2ML is passed over by its own rules: a lone quote and an end in a comment are no matter", () => {
    const { module, notRead } = readModuleOf(
      `/begin A2ML block "IF_DATA" taggedunion { "/end A2ML" }; /* don't /end A2ML " */ 5" ; /include "x.aml"\n /end A2ML ${value("a")}`,
    );
    expect(module.characteristics.size).toBe(1);
    expect(notRead).toEqual([]);
  });
});

describe("characteristics", () => {
  it("options stand in any order, others than needed are passed over with their parameters", () => {
    const { module, notes } = readModuleOf(
      value(
        "a",
        `SYMBOL_LINK "FORMAT" 8 READ_ONLY MAX_REFRESH 3 100 FORMAT "%8.4" CALIBRATION_ACCESS CALIBRATION
         /begin ANNOTATION ANNOTATION_LABEL "x" /begin ANNOTATION_TEXT "NUMBER 4" /end ANNOTATION_TEXT /end ANNOTATION
         EXTENDED_LIMITS -1.5e1 0x1FF BIT_MASK 0xFFFFFFFFFFFFFFFF BYTE_ORDER MSB_FIRST PHYS_UNIT "Nm" DISCRETE
         /begin DEPENDENT_CHARACTERISTIC "X1*2" b c /end DEPENDENT_CHARACTERISTIC DISPLAY_IDENTIFIER d`,
      ),
    );
    expect(notes).toEqual([]);
    expect(module.characteristics.get("a")).toMatchObject({
      ...{ type: "VALUE", address: 0x810000, layout: "L", conversion: null, lowerLimit: 0, upperLimit: 255 },
      ...{ extendedLimits: [-15, 511], bitMask: 0xffffffffffffffffn, byteOrder: "big", physUnit: "Nm" },
      ...{ format: "%8.4", readOnly: true, discrete: true, displayIdentifier: "d" },
      derived: { kind: "dependent", formula: "X1*2", inputs: ["b", "c"] },
    });
  });
  it.each([
    ["MATRIX_DIM 3 4 1", [3, 4, 1]],
    ['MATRIX_DIM 5 FORMAT "%1.0"', [5]],
    ["NUMBER 7", [7]],
    ["MATRIX_DIM 4000000000 4000000000", [4e9, 4e9]],
  ])("%s", (written, sizes) => {
    expect(readModuleOf(value("a", written)).module.characteristics.get("a")?.matrixDim).toEqual(sizes);
  });
  it("an unknown keyword and an unknown block are told once, and what stands around them is read", () => {
    const options =
      'NEW_THING 3 "x" PHYS_UNIT "V" /begin NEW_BLOCK /begin DEEP 1 /end DEEP /end NEW_BLOCK READ_ONLY';
    const { module, notes } = readModuleOf(value("a", options) + value("b", options));
    expect(module.characteristics.get("b")).toMatchObject({ physUnit: "V", readOnly: true });
    expect(notes.map(({ message }) => message)).toEqual([
      "The keyword NEW_THING in CHARACTERISTIC is not known and was passed over.",
      "The block NEW_BLOCK in CHARACTERISTIC is not known and was passed over.",
    ]);
  });
  it.each([
    ["VALUE 0x1 L 0", "its conversion is missing"],
    ["CURVES 0x1 L 0 NO_COMPU_METHOD 0 1", 'its type "CURVES" is not known'],
    ["VALUE 1.5 L 0 NO_COMPU_METHOD 0 1", "its address 1.5 is no whole number from 0 on"],
    ["VALUE abc L 0 NO_COMPU_METHOD 0 1", 'its address "abc" is no number'],
    ["VALUE 1 L 0 NO_COMPU_METHOD 0 1 BIT_MASK 0x1FFFFFFFFFFFFFFFF", "its bit mask"],
    ["VALUE 1 L 0 NO_COMPU_METHOD 0 1 MATRIX_DIM 0 3", "its MATRIX_DIM 0 3 is no set of sizes"],
    [
      "CURVE 1 L 0 NO_COMPU_METHOD 0 1 /begin AXIS_DESCR FIX_AXIS q c 9 0 1 FIX_AXIS_PAR 0 1 1000000000 /end AXIS_DESCR",
      "its fixed axis of 1000000000 points is not possible",
    ],
    [
      "CURVE 1 L 0 NO_COMPU_METHOD 0 1 /begin AXIS_DESCR COM_AXIS q c 9 0 1 /end AXIS_DESCR",
      "its COM_AXIS does not name what it rests on",
    ],
  ])("%s is listed as not read, and the next one is read", (written, reason) => {
    const { module, notRead } = readModuleOf(
      `/begin CHARACTERISTIC a "" ${written} /end CHARACTERISTIC\n${value("b")}`,
    );
    expect([...module.characteristics.keys()]).toEqual(["b"]);
    expect(notRead).toEqual([
      { keyword: "CHARACTERISTIC", name: "a", reason: expect.stringContaining(reason), line: 4 },
    ]);
  });
  it("of equal names the first counts; names differ in capital letters", () => {
    const { module, notes } = readModuleOf(`${value("a")}${value("A")}${value("a", "READ_ONLY")}`);
    expect([...module.characteristics.keys()]).toEqual(["a", "A"]);
    expect(module.characteristics.get("a")?.readOnly).toBe(false);
    expect(notes).toMatchObject([{ code: "duplicate_name", file: "main.a2l", line: 6 }]);
  });
});

describe("modules", () => {
  it("EPK with its addresses, byte order, alignments and segments", () => {
    const { module, notes } = readModuleOf(`
      /begin MOD_PAR "p" VERSION "EPK" ADDR_EPK 0x8000 ADDR_EPK 0x9000 EPK "UNIT-4711" SYSTEM_CONSTANT "EPK" "1"
        /begin MEMORY_SEGMENT Data "d" DATA FLASH INTERN 0x8000 0x100 -1 -1 -1 -1 -1 /begin IF_DATA X /end IF_DATA /end MEMORY_SEGMENT
      /end MOD_PAR
      /begin MOD_COMMON "c" DATA_SIZE 32 BYTE_ORDER MSB_FIRST ALIGNMENT_LONG 2 ALIGNMENT_INT64 8 /end MOD_COMMON`);
    expect(module.epk).toEqual({ text: "UNIT-4711", addresses: [0x8000, 0x9000] });
    expect(module.byteOrder).toBe("big");
    expect(module.alignments).toEqual({ ULONG: 2, SLONG: 2, A_UINT64: 8, A_INT64: 8 });
    expect(module.memorySegments).toEqual([
      { name: "Data", text: "d", programType: "DATA", address: 0x8000, length: 0x100 },
    ]);
    expect(notes).toEqual([]);
  });
  it.each([
    ["MSB_LAST", "little", 0],
    ["MSB_FIRST_MSW_LAST", "big_words_swapped", 0],
    ["MSB_LAST_MSW_FIRST", "little_words_swapped", 0],
    ["LITTLE_ENDIAN", "little", 1],
    ["BIG_ENDIAN", "big", 1],
  ])("byte order %s", (word, order, notes) => {
    const description = readModuleOf(`/begin MOD_COMMON "" BYTE_ORDER ${word} /end MOD_COMMON`);
    expect(description.module.byteOrder).toBe(order);
    expect(description.notes.length).toBe(notes);
  });
  it("several modules keep their own things; a version may be missing", () => {
    const module = (name: string) => `/begin MODULE ${name} "" ${value("a")} /end MODULE`;
    const description = readTexts({
      "main.a2l": `/begin PROJECT P "" /begin HEADER "h" VERSION "1" /end HEADER ${module("one")} ${module("two")} /end PROJECT`,
    });
    expect(description.version).toBeNull();
    expect(description.modules.map(({ name, characteristics }) => [name, characteristics.size])).toEqual([
      ["one", 1],
      ["two", 1],
    ]);
    // No MOD_COMMON: the order that was taken is told.
    expect(description.notes.map(({ code }) => code)).toEqual(["byte_order_missing", "byte_order_missing"]);
  });
  // ASAM's releases of the standard: 1.5 (5.1), 1.6 (6.0, 6.1) and 1.7 (7.0, 7.1), from memory.
  it.each(["1 50", "1 51", "1 60", "1 61", "1 70", "1 71"])(
    "version %s is read, and nothing noted",
    (written) => {
      const description = readTexts({
        "main.a2l": inModule(value("a")).replace("ASAP2_VERSION 1 61", `ASAP2_VERSION ${written}`),
      });
      expect([description.version, description.notes]).toEqual([written.replace(" ", "."), []]);
      expect([...description.modules[0].characteristics.keys()]).toEqual(["a"]);
    },
  );
  it("a characteristic may name its functions itself", () => {
    const list = "/begin FUNCTION_LIST F gone /end FUNCTION_LIST";
    const { module, notes } = readModuleOf(
      `${value("a", list)}${value("b", list)} /begin FUNCTION F "" /begin DEF_CHARACTERISTIC c a /end DEF_CHARACTERISTIC /end FUNCTION`,
    );
    expect(module.functions.get("F")?.characteristics).toEqual(["c", "a", "b"]);
    expect(notes).toEqual([]);
  });
  it("functions and groups, with circles told and not followed", () => {
    const { module, notes } = readModuleOf(`
      /begin FUNCTION F "f" /begin DEF_CHARACTERISTIC a b /end DEF_CHARACTERISTIC
        /begin REF_CHARACTERISTIC b c /end REF_CHARACTERISTIC /begin SUB_FUNCTION F /end SUB_FUNCTION
        /begin IN_MEASUREMENT m /end IN_MEASUREMENT FUNCTION_VERSION "1" /end FUNCTION
      /begin GROUP G "g" ROOT /begin SUB_GROUP H K /end SUB_GROUP /end GROUP
      /begin GROUP H "" /begin SUB_GROUP K G /end SUB_GROUP /begin REF_CHARACTERISTIC a /end REF_CHARACTERISTIC /end GROUP`);
    expect(module.functions.get("F")?.characteristics).toEqual(["a", "b", "c"]);
    expect(module.groups.get("G")).toMatchObject({ isRoot: true, subSets: ["H", "K"], characteristics: [] });
    expect(notes.map(({ message }) => message)).toEqual([
      "FUNCTION F contains itself over its sub-sets.",
      "GROUP G contains itself over its sub-sets.",
    ]);
  });
});
