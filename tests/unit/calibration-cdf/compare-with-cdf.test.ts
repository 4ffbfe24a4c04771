import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { cdfOfReading } from "@/lib/calibration/cdf/cdf-instances";
import { compareWithCdf } from "@/lib/calibration/cdf/compare-with-cdf";
import { readCdfx } from "@/lib/calibration/cdf/read-cdfx";
import type { CdfInstance } from "@/lib/calibration/cdf/types";
import { writeCdfx } from "@/lib/calibration/cdf/write-cdfx";
import { madeAxis, madeCharacteristic, madeReading } from "../../support/made-reading";

const map = madeCharacteristic({
  name: "m",
  type: "MAP",
  dims: [2, 2],
  values: [1, 2, 3, 4],
  axes: [madeAxis([800, 900]), madeAxis([1, 2], { kind: "COM_AXIS", reference: "load" })],
});
const fileOf = (...instances: CdfInstance[]) => ({ instances, notes: [], problems: [] });
const [asWritten] = cdfOfReading(madeReading(map)).instances;
const found = (over: Partial<CdfInstance>) =>
  compareWithCdf(madeReading(map), fileOf({ ...asWritten, ...over }));

describe("an image against a values file", () => {
  it("what was written from it does not differ, whatever its numbers (property)", () => {
    const number = fc.double({ noNaN: true, noDefaultInfinity: true });
    fc.assert(
      fc.property(
        fc.array(number, { minLength: 4, maxLength: 4 }),
        fc.option(fc.constantFrom(0.1, 1e-9)),
        (values, rawStep) => {
          const reading = madeReading({ ...map, values, rawStep });
          const text = [...writeCdfx("t", cdfOfReading(reading).instances)].join("");
          const result = compareWithCdf(reading, readCdfx(new TextEncoder().encode(text)));
          expect(result).toMatchObject({
            compared: 1,
            equal: 1,
            differenceCount: 0,
            onlyInFile: [],
            onlyInImage: [],
          });
        },
      ),
      { numRuns: 100, seed: 61 },
    );
  });
  it("half a raw step of 0.1 is the same raw value, more is listed with its place", () => {
    expect(found({ values: [1.05, 1.95, 3, 4] })).toMatchObject({ equal: 1, differences: [] });
    expect(found({ values: [1, 2, 3.06, 4] })).toMatchObject({
      compared: 1,
      equal: 0,
      differenceCount: 1,
      differences: [
        { name: "m", axis: null, index: [0, 1], image: 3, file: 3.06, difference: expect.closeTo(0.06, 9) },
      ],
    });
  });
  it("without a raw step a millionth is the same", () => {
    const float = madeReading(madeCharacteristic({ name: "f", values: [1000], rawStep: null }));
    const against = (value: number) =>
      compareWithCdf(float, fileOf({ ...asWritten, name: "f", dims: [], values: [value], axes: [] }))
        .differenceCount;
    expect([1000.0009, 1000.0011, 999.9989].map(against)).toEqual([0, 1, 1]);
  });
  it("points of an own axis are compared, those of a shared one under its own name", () => {
    const [own, shared] = asWritten.axes;
    const result = found({ axes: [{ ...own, values: [800, 901] }, shared] });
    expect(result.differences).toMatchObject([
      { name: "m", axis: "x", index: [1], image: 900, file: 901, difference: 1 },
    ]);
  });
  it("texts and words must be the same; a missing number differs from any", () => {
    const reading = madeReading(
      madeCharacteristic({ name: "w", values: ["on"], rawStep: null }),
      madeCharacteristic({ name: "a", type: "ASCII", dims: [4], values: [], characters: "AB" }),
    );
    const one = (name: string, value: CdfInstance["values"][number]) => ({
      ...asWritten,
      name,
      dims: [],
      values: [value],
      axes: [],
    });
    expect(compareWithCdf(reading, fileOf(one("w", "on"), one("a", "AB"))).equal).toBe(2);
    const result = compareWithCdf(reading, fileOf(one("w", null), one("a", " AB")));
    expect(result.differences.map((d) => [d.name, d.image, d.file, d.difference])).toEqual([
      ["w", "on", null, null],
      ["a", "AB", " AB", null],
    ]);
  });
  it("other shapes and names that only one has are listed, not compared", () => {
    const result = compareWithCdf(
      madeReading(map, madeCharacteristic({ name: "only here" })),
      fileOf({ ...asWritten, dims: [4] }, { ...asWritten, name: "only there" }),
    );
    expect(result).toMatchObject({
      compared: 0,
      otherShape: [{ name: "m", axis: null, image: [2, 2], file: [4] }],
      onlyInFile: ["only there"],
      onlyInImage: ["only here"],
    });
    expect(found({ dims: [2, 2, 1] }).compared).toBe(1);
  });
});
