import { createHash } from "node:crypto";
import { readFileSync } from "node:fs";
import { gunzipSync } from "node:zlib";
import { describe, expect, it } from "vitest";
import { readDescription } from "@/lib/calibration/a2l/read-description";
import type { Conversion, Description } from "@/lib/calibration/a2l/types";

// Counts of blocks, types, axes and conversions were taken by another program (tests/golden/README.md).
const GOLDEN = new URL("../../golden/descriptions/", import.meta.url);
interface Facts {
  sha256: string;
  modules: string[];
  module_blocks: Record<string, number>;
  characteristic_types: Record<string, number>;
  axis_attributes: Record<string, number>;
  compu_method_types: Record<string, number>;
}
const facts: Record<string, Facts> = JSON.parse(readFileSync(new URL("facts.json", GOLDEN), "utf8"));

function counted(words: Iterable<string>): Record<string, number> {
  const counts: Record<string, number> = {};
  for (const word of words) counts[word] = (counts[word] ?? 0) + 1;
  return counts;
}

/** Name of the standard for a conversion that was understood; of the others the sentence names it. */
const KIND_WORDS = {
  identical: "IDENTICAL",
  linear: "LINEAR",
  rational: "RAT_FUNC",
  formula: "FORM",
} as const;
function typeWord(conversion: Conversion): string {
  switch (conversion.kind) {
    case "table":
      return conversion.interpolated ? "TAB_INTP" : "TAB_NOINTP";
    case "words":
      return "TAB_VERB";
    case "unknown":
      return /"(.*)"/.exec(conversion.reason)?.[1] ?? conversion.reason;
    default:
      return KIND_WORDS[conversion.kind];
  }
}

function blocksOf(description: Description): Record<string, number> {
  const [module] = description.modules;
  return {
    ...counted(description.notRead.map(({ keyword }) => keyword)),
    CHARACTERISTIC: module.characteristics.size,
    AXIS_PTS: module.axisPoints.size,
    RECORD_LAYOUT: module.layouts.size,
    COMPU_METHOD: module.conversions.size,
    MEASUREMENT: module.measurements.size,
    FUNCTION: module.functions.size,
    GROUP: module.groups.size,
  };
}
/** Blocks that a Description does not count: parts of others, and tools' own data. */
const WITHIN = ["A2ML", "IF_DATA", "MOD_COMMON", "MOD_PAR", "COMPU_TAB", "COMPU_VTAB", "COMPU_VTAB_RANGE"];
const SILENT = [...WITHIN, "UNIT", "FRAME", "USER_RIGHTS"];

describe.each(Object.entries(facts))("%s", (name, expected) => {
  const bytes = new Uint8Array(gunzipSync(readFileSync(new URL(`${name}.gz`, GOLDEN))));
  const description = readDescription([{ name, bytes }]);
  const [module] = description.modules;

  it("is the file that was counted", () => {
    expect(createHash("sha256").update(bytes).digest("hex")).toBe(expected.sha256);
  });
  it("has the modules and, block by block, the numbers that the other program counted", () => {
    expect(description.modules.map((each) => each.name)).toEqual(expected.modules);
    const blocks = Object.entries(expected.module_blocks).filter(([keyword]) => !SILENT.includes(keyword));
    expect(blocksOf(description)).toEqual(Object.fromEntries(blocks));
  });
  it("has its types of characteristics, kinds of axes and types of conversions", () => {
    const characteristics = [...module.characteristics.values()];
    expect(counted(characteristics.map(({ type }) => type))).toEqual(expected.characteristic_types);
    const axes = characteristics.flatMap((each) => each.axes.map(({ kind }) => kind));
    expect(counted(axes)).toEqual(expected.axis_attributes);
    expect(counted(Array.from(module.conversions.values(), typeWord))).toEqual(expected.compu_method_types);
  });
  it("is UTF-8 1.71, in Intel byte order, with doubles aligned to four bytes", () => {
    expect([description.version, description.encoding, module.byteOrder]).toEqual([
      "1.71",
      "utf-8",
      "little",
    ]);
    expect(module.alignments.FLOAT64_IEEE).toBe(4);
    expect(description.missingIncludes).toEqual([]);
  });
});

describe("what stands in ASAP2_Demo_V171.a2l, read by eye", () => {
  const bytes = new Uint8Array(gunzipSync(readFileSync(new URL("ASAP2_Demo_V171.a2l.gz", GOLDEN))));
  const description = readDescription([{ name: "demo.a2l", bytes }]);
  const [module] = description.modules;
  const axisOf = (name: string) => module.characteristics.get(name)?.axes[0];

  it("is read without a note", () => {
    expect(description.notes).toEqual([]);
  });
  it("fixed axes are worked out from their rule", () => {
    expect(axisOf("ASAM.C.CURVE.FIX_AXIS.PAR")?.fixedRaw).toEqual([0, 4, 8, 12, 16, 20]);
    expect(axisOf("ASAM.C.CURVE.FIX_AXIS.PAR_DIST")?.fixedRaw).toEqual([1, 2, 3, 4, 5, 6]);
    expect(axisOf("ASAM.C.CURVE.FIX_AXIS.PAR_LIST")?.fixedRaw).toEqual([-1, 4, 6, 8, 9, 10]);
  });
  it("the code's memory segment is the first range of its image", () => {
    expect(module.memorySegments[0]).toEqual({
      ...{ name: "ECU_Code", text: "Memory segment for code part of the ECU", programType: "DATA" },
      ...{ address: 0x16000, length: 0x86c },
    });
  });
  it("virtual characteristics keep formula and inputs", () => {
    const virtual = [...module.characteristics.values()].filter(({ derived }) => derived?.kind === "virtual");
    expect(virtual.length).toBe(4);
    for (const { derived } of virtual) expect(derived?.formula).not.toBe("");
  });
  it("a layout keeps its components by position, with modes and orders", () => {
    const layout = module.layouts.get("RL.MAP.SWORD.SBYTE.SBYTE.INCR");
    expect(
      layout?.components.map(({ keyword, position, dataType }) => [keyword, position, dataType]),
    ).toEqual([
      ["NO_AXIS_PTS_X", 1, "UBYTE"],
      ["NO_AXIS_PTS_Y", 2, "UBYTE"],
      ["AXIS_PTS_X", 3, "SBYTE"],
      ["AXIS_PTS_Y", 4, "SBYTE"],
      ["FNC_VALUES", 5, "SWORD"],
    ]);
    expect(layout?.components[4].indexMode).toBe("ROW_DIR");
    expect(layout?.components[2].indexOrder).toBe("INDEX_INCR");
    expect(module.layouts.get("RL.AXIS_PTS.RES_AXIS")?.components[2].maxPairs).toBe(5);
  });
});
