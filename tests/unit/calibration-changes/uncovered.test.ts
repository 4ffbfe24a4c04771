import fc from "fast-check";
import { describe, expect, it, vi } from "vitest";
import { changeSetOf } from "@/lib/calibration/changes/change-set";
import type { ImageSegment } from "@/lib/calibration/image/types";
import { readImageByDescription } from "@/lib/calibration/values/read-image-by-description";
import {
  characteristic,
  component,
  describedBy,
  layout,
  type MadeModule,
} from "@/tests/support/made-description";

vi.setConfig({ testTimeout: 60_000 });

const at = (address: number, bytes: number[]): ImageSegment => ({ address, bytes: Uint8Array.from(bytes) });
const bare = (a: ImageSegment[], b: ImageSegment[]) =>
  changeSetOf({ image: { segments: a }, reading: null }, { image: { segments: b }, reading: null });

function described(made: MadeModule, a: ImageSegment[], b: ImageSegment[]) {
  const module = { layouts: [layout([component(1, "FNC_VALUES", "UBYTE")])], ...made };
  const side = (segments: ImageSegment[]) => ({
    image: { segments },
    reading: readImageByDescription(describedBy(module), { segments }),
  });
  return changeSetOf(side(a), side(b));
}
const row = (n: number, more: Record<number, number> = {}) =>
  Array.from({ length: n }, (_, k) => more[k] ?? k);

describe("without a description", () => {
  it("each range with the bytes around it, in hex", () => {
    const set = bare([at(0x100, row(32))], [at(0x100, row(32, { 12: 0xaa, 13: 0xbb }))]);
    expect(set).toMatchObject({
      readBy: "none",
      characteristics: [],
      changedBytes: 2,
      uncoveredBytes: 2,
      uncoveredRanges: 1,
    });
    expect(set.uncovered[0]).toMatchObject({
      address: 0x10c,
      length: 2,
      kind: "differs",
      segment: null,
      contextAddress: 0x104,
      before: "0405060708090A0B0C0D0E0F101112131415",
      after: "0405060708090A0BAABB0E0F101112131415",
    });
  });

  it("marks where an image has no byte", () => {
    const [first, second] = bare([at(0x10, [1, 2]), at(0x14, [9])], [at(0x10, [1, 3])]).uncovered;
    const none = (bytes: number) => "--".repeat(bytes);
    expect(first).toMatchObject({
      address: 0x11,
      contextAddress: 0x09,
      before: `${none(7)}0102${none(2)}09${none(5)}`,
      after: `${none(7)}0103${none(8)}`,
    });
    expect(second).toMatchObject({ kind: "only a", after: null });
  });

  it("shows the first 16 bytes of a long range and hashes all of it", () => {
    const [a, b, c] = [0, 1, 2].map((last) => [at(0, [...Array(99).fill(last === 0 ? 0 : 1), last])]);
    const set = bare(a, b);
    expect(set.uncovered[0].after).toBe("01".repeat(16));
    expect(set.uncovered[0].digest).not.toBe(bare(a, c).uncovered[0].digest);
    expect(set.uncovered[0].digest).toBe(bare(a, b).uncovered[0].digest);
  });

  it("lists the 500 longest by address and counts all", () => {
    const a = at(0, Array(4000).fill(0));
    const b = at(
      0,
      Array.from({ length: 4000 }, (_, k) => (k % 4 === 0 || k === 3997 ? 1 : 0)),
    );
    const set = bare([a], [b]);
    expect(set).toMatchObject({ uncoveredRanges: 1000, uncoveredBytes: 1001, changedRanges: 1000 });
    expect(set.uncovered).toHaveLength(500);
    expect(set.uncovered[499]).toMatchObject({ address: 3996, length: 2 });
  });

  it("says when only one image was read by a description", () => {
    const image = { segments: [at(0x1000, [1])] };
    const reading = readImageByDescription(describedBy({}), image);
    const set = changeSetOf({ image, reading }, { image, reading: null });
    expect(set).toMatchObject({ readBy: "none", identical: true });
    expect(set.problems[0]).toMatch(/^Only one of the two images was read/);
  });
});

describe("beside described values", () => {
  const memorySegments = [
    { name: "CODE", text: "", programType: "CODE", address: 0x1000, length: 4 },
    { name: "CAL", text: "", programType: "DATA", address: 0x1004, length: 100 },
  ];
  it("what no changed characteristic rests on, split at the borders of segments", () => {
    const made = { memorySegments, characteristics: [characteristic({ address: 0x1006 })] };
    const set = described(
      made,
      [at(0x1000, Array(10).fill(0))],
      [at(0x1000, [0, 0, 1, 1, 1, 1, 1, 1, 1, 0])],
    );
    expect(
      set.uncovered.map(({ address, length, segment, programType }) => [
        address,
        length,
        segment,
        programType,
      ]),
    ).toEqual([
      [0x1002, 2, "CODE", "CODE"],
      [0x1004, 2, "CAL", "DATA"],
      [0x1007, 2, "CAL", "DATA"],
    ]);
    expect(set).toMatchObject({ changedBytes: 7, changedRanges: 1, uncoveredBytes: 6, uncoveredRanges: 3 });
  });

  it("bits outside every mask and room behind a text are uncovered: nothing described explains them", () => {
    const made = {
      characteristics: [
        characteristic({ name: "BIT", bitMask: 1n }),
        characteristic({ name: "TEXT", type: "ASCII" as const, matrixDim: [4], address: 0x1001 }),
      ],
    };
    const bits = described(made, [at(0x1000, [0b01, 0x41, 0, 0, 0])], [at(0x1000, [0b11, 0x41, 0, 7, 0])]);
    expect(bits.characteristics).toEqual([]);
    expect(bits.uncovered.map(({ address }) => address)).toEqual([0x1000, 0x1003]);
    const own = described(made, [at(0x1000, [0b00, 0x41, 0, 0, 0])], [at(0x1000, [0b01, 0x41, 0, 0, 0])]);
    expect(own).toMatchObject({ uncovered: [], characteristics: [{ name: "BIT" }] });
  });

  it("a bit that nobody described is uncovered, even where a described bit of the same word changed", () => {
    const bit = (name: string, bitMask: bigint) => characteristic({ name, bitMask });
    const two = { characteristics: [bit("LOW", 1n), bit("HIGH", 0x80n)] };
    const from = [at(0x1000, [0])];
    const addresses = (byte: number, made: MadeModule = two) =>
      described(made, from, [at(0x1000, [byte])]).uncovered.map(({ address }) => address);
    expect(addresses(0x01)).toEqual([]);
    expect(addresses(0x81)).toEqual([]);
    expect(addresses(0x03)).toEqual([0x1000]);
    expect(addresses(0x91)).toEqual([0x1000]);
    // A value without a mask describes the whole byte.
    const whole = { characteristics: [bit("LOW", 1n), characteristic({ name: "WHOLE" })] };
    expect(addresses(0x03, whole)).toEqual([]);
  });

  it("bytes behind the start of what could not be read are told, not counted as covered", () => {
    const made = {
      characteristics: [
        characteristic({ name: "LOST", layout: "GONE", address: 0x1002 }),
        characteristic({ name: "KEPT", address: 0x1006 }),
      ],
    };
    const set = described(made, [at(0x1000, Array(9).fill(0))], [at(0x1000, [1, 0, 0, 1, 1, 0, 0, 1, 0])]);
    expect(set.uncoveredBytes).toBe(4);
    expect(set.problems).toEqual([
      "2 changed bytes from 0x1003 on may belong to LOST, which could not be read.",
    ]);
    expect(set.notRead).toEqual([{ name: "LOST", reason: "its layout GONE is not in the description." }]);
  });
});

it("every changed byte is accounted for once (property)", () => {
  const bytes = fc.array(fc.nat(1), { minLength: 24, maxLength: 24 });
  fc.assert(
    fc.property(
      bytes,
      bytes,
      fc.uniqueArray(fc.nat(23), { maxLength: 12 }),
      fc.integer({ min: 1, max: 23 }),
      (a, b, known, border) => {
        const made: MadeModule = {
          characteristics: known.map((k) => characteristic({ name: `C${k}`, address: 0x1000 + k })),
          memorySegments: [{ name: "S", text: "", programType: "DATA", address: 0x1000, length: border }],
        };
        const set = described(made, [at(0x1000, a)], [at(0x1000, b)]);
        const differing = a.flatMap((byte, k) => (byte === b[k] ? [] : [k]));
        const uncovered = set.uncovered.flatMap(({ address, length }) =>
          Array.from({ length }, (_, k) => address - 0x1000 + k),
        );
        expect(uncovered).toEqual(differing.filter((k) => !known.includes(k)));
        expect(set.characteristics.map(({ name }) => name).sort()).toEqual(
          differing
            .filter((k) => known.includes(k))
            .map((k) => `C${k}`)
            .sort(),
        );
        expect(set.changedBytes).toBe(differing.length);
        expect(set.uncoveredBytes).toBe(uncovered.length);
        for (const { address, length, segment } of set.uncovered) {
          expect(segment).toBe(address + length - 0x1000 <= border ? "S" : null);
        }
      },
    ),
    { numRuns: 200 },
  );
});
