import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { readDescription } from "@/lib/calibration/a2l/read-description";
import { scanToken } from "@/lib/calibration/a2l/scan-token";
import { maskNumber, tokenNumber } from "@/lib/calibration/a2l/token-number";
import { asBytes, descriptionRefusal, inModule, readModuleOf } from "@/tests/support/description-text";

const name = fc.stringMatching(/^[A-Za-z_][A-Za-z0-9_.[\]]{0,20}$/);
const number = fc.oneof(fc.integer(), fc.double({ noNaN: true, noDefaultInfinity: true }));
const gap = fc.constantFrom(" ", "\n", "\t\r\n", " /* a */ ", " // b\n", "/**/ ");
const tokenOf = (text: string) => {
  const state = { bytes: asBytes(text), at: 0, start: 0, end: 0, escaped: false };
  scanToken(state);
  return tokenNumber(state, () => text);
};

describe("what a writer wrote is read back", () => {
  it("texts of any characters, quotes doubled or escaped", () => {
    const text = fc.string({ unit: "grapheme", maxLength: 40 }).filter((each) => !each.includes("\\"));
    fc.assert(
      fc.property(text, fc.constantFrom('""', '\\"'), (written, quote) => {
        const quoted = `"${written.replaceAll('"', quote)}"`;
        const { module } = readModuleOf(
          `/begin CHARACTERISTIC a ${quoted} VALUE 0 L 0 C 0 1 PHYS_UNIT ${quoted} /end CHARACTERISTIC`,
        );
        const read = module.characteristics.get("a");
        expect([read?.text, read?.physUnit]).toEqual([written, written]);
      }),
      { numRuns: 300, seed: 21 },
    );
  });
  it("characteristics with their options in any order and anything blank between", () => {
    const options = fc.shuffledSubarray([
      'FORMAT "%5.2"',
      "READ_ONLY",
      'PHYS_UNIT "V"',
      "EXTENDED_LIMITS -7 7",
      "DISPLAY_IDENTIFIER other",
      "BIT_MASK 0xF0",
      "MATRIX_DIM 2 3",
      "/begin IF_DATA X 1 /begin Y /end Y /end IF_DATA",
      'SYMBOL_LINK "READ_ONLY" 0',
    ]);
    fc.assert(
      fc.property(
        name,
        fc.nat(2 ** 32 - 1),
        number,
        number,
        options,
        gap,
        (key, address, low, high, set, blank) => {
          const words = `/begin CHARACTERISTIC ${key} "t" VAL_BLK 0x${address.toString(16)} L 0 C ${low} ${high}`;
          const parts = [
            ...words.split(" "),
            ...set.flatMap((each) => each.split(" ")),
            "/end",
            "CHARACTERISTIC",
          ];
          const { module, notes, notRead } = readModuleOf(parts.join(blank));
          expect([notes, notRead]).toEqual([[], []]);
          expect(module.characteristics.get(key)).toMatchObject({
            ...{ name: key, address, readOnly: set.includes("READ_ONLY") },
            ...{ lowerLimit: low + 0, upperLimit: high + 0 },
            format: set.includes('FORMAT "%5.2"') ? "%5.2" : null,
            physUnit: set.includes('PHYS_UNIT "V"') ? "V" : null,
            bitMask: set.includes("BIT_MASK 0xF0") ? 0xf0n : null,
            matrixDim: set.includes("MATRIX_DIM 2 3") ? [2, 3] : null,
          });
        },
      ),
      { numRuns: 300, seed: 22 },
    );
  });
  it("numbers: as JavaScript itself reads the same text", () => {
    fc.assert(
      fc.property(number, (value) => {
        expect(tokenOf(String(value))).toBe(Number(String(value)) + 0);
        expect(tokenOf(value.toExponential())).toBe(Number(value.toExponential()) + 0);
      }),
      { numRuns: 1000, seed: 23 },
    );
    fc.assert(
      fc.property(fc.stringMatching(/^-?\d{1,17}\.\d{0,17}$/), (text) => {
        expect(tokenOf(text)).toBe(Number(text) + 0);
      }),
      { numRuns: 1000, seed: 24 },
    );
    fc.assert(
      fc.property(fc.stringMatching(/^0[xX][\da-fA-F]{1,17}$/), (text) => {
        expect(tokenOf(text)).toBe(Number(text));
      }),
      { numRuns: 1000, seed: 25 },
    );
    for (const text of [
      "",
      "-",
      "0x",
      "0xg",
      "1e",
      "1.5.2",
      "1,5",
      "0b1",
      "1_0",
      "e5",
      ".",
      "1e999",
      "Infinity",
    ])
      expect(tokenOf(text), text).toBeNaN();
    expect(
      [
        "0x8000000000000000",
        "18446744073709551615",
        "0",
        "0x1ffffffffffffffff",
        "18446744073709551616",
        "-1",
      ].map(maskNumber),
    ).toEqual([2n ** 63n, 2n ** 64n - 1n, 0n, null, null, null]);
  });
});

describe("whatever the bytes are", () => {
  it("the answer is a description or a listed refusal", () => {
    const piece = fc.constantFrom(
      ...[
        "/begin",
        "/end",
        "/include",
        "PROJECT",
        "MODULE",
        "CHARACTERISTIC",
        "A2ML",
        "GROUP",
        "AXIS_DESCR",
        "COMPU_TAB",
      ],
      ...[
        '"',
        '""',
        "/*",
        "*/",
        "//",
        "\n",
        "a",
        "main.a2l",
        "1",
        "0x",
        "\\",
        "MATRIX_DIM",
        "RECORD_LAYOUT",
        "IF_DATA",
      ],
    );
    const text = fc.array(piece, { maxLength: 60 }).map((pieces) => pieces.join(" "));
    fc.assert(
      fc.property(fc.oneof(text, text.map(inModule)), (written) => {
        descriptionRefusal(() => readDescription([{ name: "main.a2l", bytes: asBytes(written) }]));
      }),
      { numRuns: 3000, seed: 26 },
    );
  });
});
