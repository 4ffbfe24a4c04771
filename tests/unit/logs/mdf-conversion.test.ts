import { describe, expect, it } from "vitest";
import { compileFormula } from "@/lib/format/compile-formula";
import { readLog } from "@/lib/logs/read-log";
import type { ChannelKey, LogTable } from "@/lib/logs/types";
import { codesOf, columnOf } from "@/tests/support/golden-log";
import { type WrittenConversion, writeMdf } from "@/tests/support/mdf-writer";

/** A file with one channel of the raw values, as whole numbers (u16) or as floats (f64). */
function convertedTable(
  conversion: WrittenConversion,
  raw: number[],
  whole = true,
  key?: ChannelKey,
): LogTable {
  const time = { name: "t", type: 2, sync: 1, dataType: 4, byteOffset: 0, bitCount: 64 };
  const x = { name: "x", dataType: whole ? 0 : 4, byteOffset: 8, bitCount: whole ? 16 : 64, conversion };
  const stream = new Uint8Array(16 * raw.length);
  const view = new DataView(stream.buffer);
  raw.forEach((value, i) => {
    view.setFloat64(16 * i, i, true);
    if (whole) view.setUint16(16 * i + 8, value, true);
    else view.setFloat64(16 * i + 8, value, true);
  });
  const groups = [{ channels: [time, x], dataBytes: 16, cycles: raw.length }];
  return readLog(writeMdf([{ groups, stream }]), { key });
}
const converted = (...args: Parameters<typeof convertedTable>) =>
  Array.from(columnOf(convertedTable(...args), "x").values);
const NONE = Number.NaN;

describe("conversions, each against its closed form", () => {
  it("0: as it is", () => expect(converted({ type: 0 }, [1, 2, 3])).toEqual([1, 2, 3]));
  it("1: p0 + p1 x", () =>
    expect(converted({ type: 1, values: [-40, 0.5] }, [0, 80, 100])).toEqual([-40, 0, 10]));
  it("2: (p1 x² + p2 x + p3) / (p4 x² + p5 x + p6), and nothing where that divides by zero", () => {
    expect(converted({ type: 2, values: [1, 2, 3, 0, 0, 2] }, [0, 1, 3])).toEqual([1.5, 3, 9]);
    expect(converted({ type: 2, values: [0, 0, 60, 0, 1, -2] }, [1, 2, 5])).toEqual([-60, NONE, 20]);
  });
  it("3: a formula", () => {
    expect(converted({ type: 3, refs: ["2 * (X - 1) / 4 + abs(-X1)"] }, [1, 3, 5])).toEqual([1, 4, 7]);
  });
  it("4: linear between keys, the end's value beyond them", () => {
    const values = [10, 100, 20, 200, 40, 0];
    expect(converted({ type: 4, values }, [5, 10, 15, 30, 40, 50])).toEqual([100, 100, 150, 100, 0, 0]);
  });
  it("5: the nearer key's value, the lower one's in the middle", () => {
    expect(converted({ type: 5, values: [10, 1, 20, 2] }, [0, 10, 15, 16, 20, 99])).toEqual([
      1, 1, 1, 2, 2, 2,
    ]);
  });
  it("6: whole numbers belong to both ends of a range, others not to the upper one", () => {
    const values = [0, 9, 1, 10, 19, 2, -1];
    expect(converted({ type: 6, values }, [0, 9, 10, 19, 20])).toEqual([1, 1, 2, 2, -1]);
    expect(converted({ type: 6, values }, [0, 8.9, 9, 18.5, 19], false)).toEqual([1, 1, -1, 2, -1]);
  });
  it("7: words only: the numbers stay, as a free channel with a problem entry; a key may name them", () => {
    const conversion = { type: 7, values: [0, 1], refs: ["off", "on", "between"] };
    const table = convertedTable(conversion, [0, 1, 5]);
    expect(columnOf(table, "x")).toMatchObject({ channel: null, values: new Float64Array([0, 1, 5]) });
    expect(codesOf(table)).toContain("words_kept_as_numbers");
    const key = { columns: { x: { channel: "gear", unit: "1" } } };
    expect(columnOf(convertedTable(conversion, [0, 1, 5], true, key), "x").channel).toBe("gear");
  });
  it("8: ranges of words inside numbers count as missing, the rest goes through the conversion by default", () => {
    const refs = ["error", { type: 1, values: [0, 0.1] }];
    const table = convertedTable({ type: 8, values: [65000, 65535], refs }, [10, 65535, 20, 64999]);
    expect(Array.from(columnOf(table, "x").values)).toEqual([1, NONE, 2, 6499.900000000001]);
    expect(codesOf(table)).toContain("words_count_as_missing");
  });
  it.each([9, 10, 11, 42])(
    "%i is not read: the channel is left out by name, the rest of the file is read",
    (type) => {
      const table = convertedTable({ type, values: [1, 2], refs: [] }, [1, 2, 3]);
      expect(table.leftOut).toEqual(["x"]);
      expect(codesOf(table)).toContain("channel_left_out");
    },
  );
  it("a formula that is not understood leaves its channel out", () => {
    const table = convertedTable({ type: 3, refs: ["X ^ 2"] }, [1, 2, 3]);
    expect(table.leftOut).toEqual(["x"]);
    expect(table.problems[0].message).toContain('the formula "X ^ 2"');
  });
});

describe("formulas", () => {
  it.each([
    ["x", 3, 3],
    ["-x*2", 3, -6],
    ["1 - 2 - 3", 0, -4],
    ["8/4/2", 0, 1],
    ["2+3*4", 0, 14],
    ["pow(X,2)+sqrt(16)", 3, 13],
    ["1.5e2*X", 2, 300],
    [".5*X", 2, 1],
    ["cos(0)+sin(0)+tan(0)+exp(0)", 0, 2],
    ["-(X-5)", 3, 2],
  ])("%s at %d is %d", (text, x, want) => {
    expect(compileFormula(text)?.(x)).toBeCloseTo(want, 12);
  });
  it.each([
    "",
    "X+",
    "(X",
    "X)",
    "X X",
    "y",
    "log(X)",
    "X^2",
    "pow(X)",
    "abs",
    "constructor(1)",
    "X;1",
    "1..2",
    `${"(".repeat(200)}X`,
    Array(200).fill("X").join("+"),
  ])("%j is not understood", (text) => {
    expect(compileFormula(text)).toBeNull();
  });
});
