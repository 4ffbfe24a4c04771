import { describe, expect, it } from "vitest";
import { checkValues } from "@/lib/calibration/cdf/check-values";
import { readCdfx } from "@/lib/calibration/cdf/read-cdfx";
import type { CdfAxis, CdfInstance } from "@/lib/calibration/cdf/types";
import { madeAxis, madeCharacteristic, madeReading } from "../../support/made-reading";

const axisOf = (values: CdfAxis["values"]): CdfAxis => ({
  category: "STD_AXIS",
  reference: null,
  unit: "",
  values,
});
const instance = (name: string, over: Partial<CdfInstance> = {}): CdfInstance => ({
  ...{ name, text: "", category: "VALUE", unit: "", dims: [], values: [1], axes: [], functions: [] },
  ...over,
});
const file = (...instances: CdfInstance[]) => ({ instances, notes: [], problems: [] });
const boost = madeCharacteristic({
  name: "boost",
  type: "CURVE",
  unit: "kPa",
  decimals: 2,
  dims: [2],
  values: [100, 110],
  axes: [madeAxis([1000, 2000], { unit: "1/min" })],
});
const curve = (over: Partial<CdfInstance> = {}) =>
  instance("boost", { dims: [2], values: [100, 110], axes: [axisOf([1000, 2000])], unit: "kPa", ...over });
const against = (...instances: CdfInstance[]) => checkValues(madeReading(boost), file(...instances), 500);

// Expected counts by hand.
describe("an image held against a values file", () => {
  it("agrees in every cell and every point of an own axis, which are counted", () => {
    expect(against(curve())).toMatchObject({
      ...{ inFile: 1, compared: 1, equal: 1, values: 4 },
      differing: { count: 0, first: [] },
      otherUnit: { count: 0 },
    });
  });

  it("tells a cell in its unit and a point in that of its axis", () => {
    const { differing, equal } = against(curve({ values: [100, 111], axes: [axisOf([1000, 2100])] }));
    expect(equal).toBe(0);
    expect(differing).toEqual({
      count: 2,
      first: [
        ...[{ name: "boost", axis: null, index: [1], image: 110, file: 111, difference: 1 }].map((one) => ({
          ...one,
          unit: "kPa",
          decimals: 2,
        })),
        {
          name: "boost",
          axis: "x",
          index: [1],
          image: 2000,
          file: 2100,
          difference: 100,
          unit: "1/min",
          decimals: 0,
        },
      ],
    });
  });

  it("does not call equal what has no value, another unit or another number of points", () => {
    const empty = madeReading(madeCharacteristic({ name: "gap", values: [null] }));
    expect(checkValues(empty, file(instance("gap", { values: [null] })), 500).differing.count).toBe(1);
    expect(against(curve({ unit: "bar" })).otherUnit).toEqual({
      count: 1,
      first: [{ name: "boost", image: "kPa", file: "bar" }],
    });
    const points = against(curve({ axes: [axisOf([1000, 2000, 3000])] }));
    expect(points).toMatchObject({ compared: 1, equal: 0, values: 2, differing: { count: 0 } });
    expect(points.otherShape.first).toEqual([{ name: "boost", axis: "x", image: [2], file: [3] }]);
  });

  it("parts names that the description does not know from those that could not be read", () => {
    const reading = {
      ...madeReading(boost, madeCharacteristic({ name: "own" })),
      notRead: [{ name: "far", reason: "its bytes are not in the image.", address: 0 }],
    };
    expect(checkValues(reading, file(curve(), instance("far"), instance("strange")), 500)).toMatchObject({
      inFile: 3,
      notInImage: { count: 1, first: ["strange"] },
      notReadable: { count: 1, first: [{ name: "far", reason: "its bytes are not in the image." }] },
      notInFile: { count: 1, first: ["own"] },
    });
  });

  it("lists at most what was asked for and counts all", () => {
    const values = Array.from({ length: 9 }, (_, k) => k);
    const block = madeCharacteristic({ name: "b", type: "VAL_BLK", dims: [9], values });
    const other = instance("b", { dims: [9], values: values.map((value) => value + 1) });
    const { differing } = checkValues(madeReading(block), file(other), 4);
    expect([differing.count, differing.first.map(({ index }) => index)]).toEqual([9, [[0], [1], [2], [3]]]);
  });
});

describe("a values file made to be slow", () => {
  const read = (text: string) => readCdfx(new TextEncoder().encode(`<MSRSW>${text}</MSRSW>`));
  const values = (inner: string) =>
    `<SW-INSTANCE><SHORT-NAME>a</SHORT-NAME><SW-VALUES-PHYS>${inner}</SW-VALUES-PHYS></SW-INSTANCE>`;

  it("with hundreds of thousands of kinds of values, or a long row of digits, is read all the same", () => {
    const kinds = Array.from({ length: 300_000 }, (_, k) => `<x${k}/>`).join("");
    expect(read(values(kinds)).notes).toHaveLength(50);
    expect(read(values(`<V>${"1".repeat(900_000)}x</V>`)).problems).toHaveLength(1);
  }, 20_000);

  it("with a name longer than any is refused", () => {
    expect(() => read(`<SW-INSTANCE><SHORT-NAME>${"n".repeat(2000)}</SHORT-NAME></SW-INSTANCE>`)).toThrow(
      /longer than 1024 characters/,
    );
  });
});
