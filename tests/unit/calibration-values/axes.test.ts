import { describe, expect, it } from "vitest";
import type { AxisDescription, Characteristic } from "@/lib/calibration/a2l/types";
import {
  axis,
  axisPoints,
  characteristic,
  component,
  layout,
  type MadeModule,
  readMade,
  readOne,
  reasonOf,
} from "@/tests/support/made-description";

const VALUES = layout([component(1, "FNC_VALUES", "UBYTE")]);
const curve = (one: Partial<AxisDescription>, more: Partial<Characteristic> = {}) =>
  characteristic({ type: "CURVE", axes: [axis(one)], ...more });

describe("fixed axes", () => {
  it("pass through the axis's own conversion", () => {
    // CM_T: raw = p + 50 → 1 … 3 are −49 … −47
    const made: MadeModule = {
      characteristics: [curve({ kind: "FIX_AXIS", fixedRaw: [1, 2, 3], conversion: "T" })],
      layouts: [VALUES],
      conversions: [
        { kind: "rational", name: "T", text: "", unit: "°C", decimals: 1, coefficients: [0, 1, 50, 0, 0, 1] },
      ],
    };
    expect(readOne(made, [7, 8, 9]).axes[0]).toMatchObject({
      unit: "°C",
      raw: [1, 2, 3],
      points: [-49, -48, -47],
    });
  });

  it.each([
    ["DIST_OP_X", 5, [10, 15, 20]],
    ["SHIFT_OP_X", 3, [10, 18, 26]],
  ])("with offset and %s in memory: offset + i·distance or offset + i·2^shift", (keyword, step, points) => {
    const made: MadeModule = {
      characteristics: [curve({ kind: "FIX_AXIS" })],
      layouts: [
        layout([
          component(1, "NO_AXIS_PTS_X", "UBYTE"),
          component(2, "OFFSET_X", "UBYTE"),
          component(3, keyword, "UBYTE"),
          component(4, "FNC_VALUES", "UBYTE"),
        ]),
      ],
    };
    expect(readOne(made, [3, 10, step, 1, 2, 3]).axes[0].points).toEqual(points);
  });

  it("without any points are not guessed", () => {
    const made = { characteristics: [curve({ kind: "FIX_AXIS", maxPoints: 3 })], layouts: [VALUES] };
    expect(reasonOf(made, [1, 2, 3])).toBe("nothing states the points of its fixed axis x.");
  });
});

describe("rescale axes", () => {
  const rescale = (
    pairs: number[],
    maxPoints: number,
    cells: number,
    used?: number,
  ): [MadeModule, number[]] => [
    {
      characteristics: [curve({ kind: "RES_AXIS", reference: "A", maxPoints })],
      axisPoints: [axisPoints({ address: 0x1000 + cells })],
      layouts: [
        VALUES,
        layout(
          [
            component(1, "NO_RESCALE_X", "UBYTE"),
            component(2, "AXIS_RESCALE_X", "UBYTE", { maxPairs: pairs.length / 2 }),
          ],
          { name: "LA" },
        ),
      ],
    },
    [...Array.from({ length: cells }, (_, k) => k), used ?? pairs.length / 2, ...pairs],
  ];

  it("the last virtual index is the last cell; points lie on straight lines between the pairs", () => {
    const read = readOne(...rescale([10, 0, 20, 2, 80, 4], 9, 5));
    expect(read.dims).toEqual([5]);
    expect(read.axes[0].points).toEqual([10, 15, 20, 50, 80]);
    expect(read.axes[0].raw).toEqual([10, 15, 20, 50, 80]);
  });

  it("a description that states the number of pairs does not limit the cells", () => {
    expect(readOne(...rescale([10, 0, 20, 2, 80, 4], 3, 5)).values).toEqual([0, 1, 2, 3, 4]);
  });

  it("the shared axis itself shows its pairs in use", () => {
    const [made, bytes] = rescale([10, 0, 20, 2, 80, 4, 255, 255], 9, 3, 2);
    const reading = readMade(made, bytes);
    expect(reading.characteristics.find(({ name }) => name === "A")).toMatchObject({
      type: "AXIS_PTS",
      dims: [2, 2],
      raw: [10, 0, 20, 2],
    });
    expect(reading.characteristics.find(({ name }) => name === "C")?.dims).toEqual([3]);
  });

  it("says where the pairs end and what is possible", () => {
    expect(reasonOf(...rescale([10, 0, 80, 40], 9, 9))).toBe(
      "the rescale pairs of A end at index 40, cells 0 to 8 are possible.",
    );
    expect(reasonOf(...rescale([10, 0, 80, 4], 9, 5, 7))).toBe(
      "its axis A can't be read: it states 7 rescale pairs, 2 are possible.",
    );
  });
});

describe("curve axes", () => {
  const onCurve = (values: number[]): [MadeModule, number[]] => [
    {
      characteristics: [
        curve({ kind: "CURVE_AXIS", reference: "R", maxPoints: 3 }),
        curve(
          {
            kind: "FIX_AXIS",
            fixedRaw: values.map((_, k) => 100 * (k + 1)),
            physUnit: "rpm",
            inputQuantity: "n",
          },
          { name: "R", address: 0x1003 },
        ),
      ],
      layouts: [VALUES],
    },
    [7, 8, 9, ...values],
  ];
  it("a cell lies where the curve gives its number", () => {
    const [read] = [readOne(...onCurve([0, 1, 3]))];
    expect(read.axes[0]).toMatchObject({ unit: "rpm", inputQuantity: "n", points: [100, 200, 250] });
  });
  it("null where the curve never gives it, or more than once", () => {
    expect(readOne(...onCurve([1, 2])).axes[0]).toMatchObject({
      points: [null, 100, 200],
      raw: ["none", 100, 200],
    });
    expect(readOne(...onCurve([0, 1, 0])).axes[0].points).toEqual([null, null, null]);
  });
  it("rest on themselves, on what is no curve or on nothing: a reason, no loop", () => {
    const on = (reference: string) => [curve({ kind: "CURVE_AXIS", reference, maxPoints: 3 })];
    expect(reasonOf({ characteristics: on("C"), layouts: [VALUES] }, [1, 2, 3])).toBe(
      "its axis C rests on itself.",
    );
    expect(reasonOf({ characteristics: on("N"), layouts: [VALUES] }, [1, 2, 3])).toBe(
      "its axis N is not in the description.",
    );
    const value = characteristic({ name: "V" });
    expect(reasonOf({ characteristics: [...on("V"), value], layouts: [VALUES] }, [1, 2, 3])).toBe(
      "its axis V is no curve.",
    );
    const ring = Array.from({ length: 40 }, (_, k) =>
      curve({ kind: "CURVE_AXIS", reference: `C${(k + 1) % 40}` }, { name: `C${k}` }),
    );
    const { notRead } = readMade({ characteristics: ring, layouts: [VALUES] }, Array(8).fill(1));
    expect(notRead).toHaveLength(40);
    expect(notRead[0].reason).toMatch(/chain of more than 8 curves/);
  });
});

it("an axis names its unit by its conversion, else by the measurement that moves along it", () => {
  const made: MadeModule = {
    characteristics: [curve({ kind: "FIX_AXIS", fixedRaw: [1], conversion: "I", inputQuantity: "n" })],
    layouts: [VALUES],
    conversions: [{ kind: "identical", name: "I", text: "", unit: "", decimals: 0 }],
    measurements: new Map([["n", { name: "n", text: "", conversion: null, physUnit: "1/min" }]]),
  };
  expect(readOne(made, [1]).axes[0]).toMatchObject({ unit: "1/min", inputQuantity: "n" });
});
