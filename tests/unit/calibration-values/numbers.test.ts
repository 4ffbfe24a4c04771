import { describe, expect, it } from "vitest";
import type { ByteOrder, DataType } from "@/lib/calibration/a2l/types";
import { characteristic, component, layout, readOne, reasonOf } from "@/tests/support/made-description";

const value = (type: DataType, bytes: number[], more: { byteOrder?: ByteOrder; bitMask?: bigint } = {}) =>
  readOne(
    { characteristics: [characteristic(more)], layouts: [layout([component(1, "FNC_VALUES", type)])] },
    bytes,
  );
const big = (hex: string) => (hex.match(/../g) ?? []).map((byte) => Number.parseInt(byte, 16));

describe("numbers of every type and byte order", () => {
  // IEEE 754-2008 binary16, the example values of its published descriptions: 1, next above 1, −2, greatest, least normal,
  // greatest subnormal, least subnormal, 1/3.
  it.each([
    ["3C00", 1],
    ["3C01", 1.0009765625],
    ["C000", -2],
    ["7BFF", 65504],
    ["0400", 2 ** -14],
    ["03FF", 2 ** -14 - 2 ** -24],
    ["0001", 2 ** -24],
    ["3555", 0.333251953125],
  ])("binary16 %s is %d", (hex, expected) => {
    const read = value("FLOAT16_IEEE", big(hex), { byteOrder: "big" });
    expect(read.values).toEqual([expected]);
    expect(read.rawStep).toBeNull();
  });

  // IEEE 754 binary32 and binary64, published examples: π, 1, the next above 1, the greatest.
  it.each([
    ["FLOAT32_IEEE", "40490FDB", Math.fround(Math.PI)],
    ["FLOAT32_IEEE", "7F7FFFFF", 3.4028234663852886e38],
    ["FLOAT64_IEEE", "3FF0000000000001", 1.0000000000000002],
    ["FLOAT64_IEEE", "400921FB54442D18", Math.PI],
    ["FLOAT64_IEEE", "7FEFFFFFFFFFFFFF", Number.MAX_VALUE],
  ] as const)("%s %s", (type, hex, expected) => {
    expect(value(type, big(hex), { byteOrder: "big" }).values).toEqual([expected]);
    expect(value(type, big(hex).reverse()).values).toEqual([expected]);
  });

  it("keeps not-a-number, infinities and the negative zero apart in raw, without a value for the first two", () => {
    const read = (hex: string) => value("FLOAT32_IEEE", big(hex), { byteOrder: "big" });
    expect(read("7FC00000")).toMatchObject({ raw: ["NaN"], values: [null] });
    expect(read("FF800000")).toMatchObject({ raw: ["-Infinity"], values: [null] });
    expect(read("80000000").raw).toEqual(["-0"]);
    expect(Object.is(read("80000000").values[0], 0)).toBe(true);
  });

  it("64-bit whole numbers are exact: two's complement, text beyond 2^53", () => {
    // Closed form: all ones are −1 or 2^64 − 1; 2^53 + 1 has no double.
    expect(value("A_INT64", big("FFFFFFFFFFFFFFFF")).raw).toEqual([-1]);
    expect(value("A_UINT64", big("FFFFFFFFFFFFFFFF")).raw).toEqual(["18446744073709551615"]);
    expect(value("A_INT64", big("0020000000000001"), { byteOrder: "big" }).raw).toEqual(["9007199254740993"]);
    expect(value("A_INT64", big("8000000000000000"), { byteOrder: "big" }).raw).toEqual([
      "-9223372036854775808",
    ]);
  });

  it.each([
    ["UBYTE", [0xfe], 254],
    ["SBYTE", [0xfe], -2],
    ["UWORD", [0xfe, 0xff], 65534],
    ["SWORD", [0xfe, 0xff], -2],
    ["ULONG", [0xfe, 0xff, 0xff, 0xff], 4294967294],
    ["SLONG", [0xfe, 0xff, 0xff, 0xff], -2],
  ] as const)("%s by two's complement", (type, bytes, expected) => {
    expect(value(type, [...bytes]).values).toEqual([expected]);
  });

  // 0x11223344: little 44 33 22 11, big 11 22 33 44; words swapped: the words in the other order, bytes in a word as before.
  it.each([
    ["little", [0x44, 0x33, 0x22, 0x11]],
    ["big", [0x11, 0x22, 0x33, 0x44]],
    ["little_words_swapped", [0x22, 0x11, 0x44, 0x33]],
    ["big_words_swapped", [0x33, 0x44, 0x11, 0x22]],
  ] as const)("ULONG in byte order %s", (byteOrder, bytes) => {
    expect(value("ULONG", [...bytes], { byteOrder }).raw).toEqual([0x11223344]);
  });

  it("swaps the four words of 64 bits and leaves 16 bits and less alone", () => {
    const bytes = big("7788556633441122");
    expect(value("A_UINT64", bytes, { byteOrder: "big_words_swapped" }).raw).toEqual([
      BigInt("0x1122334455667788").toString(),
    ]);
    expect(value("UWORD", [0x12, 0x34], { byteOrder: "big_words_swapped" }).raw).toEqual([0x1234]);
    expect(value("UBYTE", [0x12], { byteOrder: "little_words_swapped" }).raw).toEqual([0x12]);
  });
});

describe("bit masks", () => {
  // Closed form: (raw & mask) >> trailing zeros.
  it.each([
    ["UWORD", [0x7f, 0x01], 0x0ff0n, 23],
    ["UBYTE", [0b1010_0000], 0b1110_0000n, 5],
    ["ULONG", [0, 0, 0, 0x80], 0x80000000n, 1],
    ["ULONG", [0xff, 0xff, 0xff, 0xff], 0xfffffff0n, 0x0fffffff],
    ["SWORD", [0x00, 0x80], 0xf000n, 8],
    ["A_UINT64", [0, 0, 0, 0, 0, 0, 0, 0xf0], 0xf000000000000000n, 15],
  ] as const)("%s with a mask", (type, bytes, bitMask, expected) => {
    expect(value(type, [...bytes], { bitMask }).raw).toEqual([expected]);
  });

  it("a mask over the whole width leaves the sign alone", () => {
    expect(value("SWORD", [0xff, 0xff], { bitMask: 0xffffn }).raw).toEqual([-1]);
    expect(value("SBYTE", [0xff], { bitMask: 0xffffffffn }).raw).toEqual([-1]);
  });

  it("refuses a mask that leaves nothing, and one over a floating-point number", () => {
    const made = (type: DataType, bitMask: bigint) => ({
      characteristics: [characteristic({ bitMask })],
      layouts: [layout([component(1, "FNC_VALUES", type)])],
    });
    expect(reasonOf(made("UBYTE", 0x100n), [1])).toBe("its bit mask leaves no bit of the number.");
    expect(reasonOf(made("FLOAT32_IEEE", 0xffn), [0, 0, 0, 0])).toMatch(/floating-point/);
  });
});
