import { describe, expect, it } from "vitest";
import type { LayoutComponent, RecordLayout } from "@/lib/calibration/a2l/types";
import {
  axis,
  axisPoints,
  characteristic,
  component,
  layout,
  type MadeModule,
  readOne,
  reasonOf,
  words,
} from "@/tests/support/made-description";

const X = component(2, "AXIS_PTS_X", "UBYTE");
const COUNT_X = component(1, "NO_AXIS_PTS_X", "UBYTE");

function curve(components: LayoutComponent[], more: Partial<RecordLayout> = {}, maxPoints = 4): MadeModule {
  return {
    characteristics: [characteristic({ type: "CURVE", axes: [axis({ maxPoints })] })],
    layouts: [layout(components, more)],
  };
}
function map(components: LayoutComponent[], more: Partial<RecordLayout> = {}, most = [2, 3]): MadeModule {
  return {
    characteristics: [characteristic({ type: "MAP", axes: most.map((maxPoints) => axis({ maxPoints })) })],
    layouts: [layout(components, more)],
  };
}

// Expected places by hand from the layout; 0xEE is room between.
describe("places of a record", () => {
  it("a position that is not 1 and reserved bytes in front", () => {
    const made = curve([component(2, "RESERVED", "UBYTE"), component(5, "FNC_VALUES", "UBYTE")], {}, 3);
    made.characteristics = [
      characteristic({
        type: "CURVE",
        axes: [axis({ kind: "FIX_AXIS", fixedRaw: [1, 2, 3], maxPoints: 3 })],
      }),
    ];
    const read = readOne(made, [0xee, 7, 8, 9]);
    expect(read.values).toEqual([7, 8, 9]);
    expect(read.bytes).toEqual([{ address: 0x1001, length: 3 }]);
  });

  it("aligns each further component to its type, the layout's alignment before the module's", () => {
    const components = [COUNT_X, X, component(3, "FNC_VALUES", "ULONG")];
    const natural = [3, 1, 2, 3, 10, 0, 0, 0, 20, 0, 0, 0, 30, 0, 0, 0];
    expect(readOne(curve(components), natural).values).toEqual([10, 20, 30]);
    const even = [2, 1, 2, 0xee, 10, 0, 0, 0, 20, 0, 0, 0];
    expect(readOne({ ...curve(components), alignments: { ULONG: 2 } }, even).values).toEqual([10, 20]);
    const packed = [2, 1, 2, 10, 0, 0, 0, 20, 0, 0, 0];
    const own = { ...curve(components, { alignments: { ULONG: 1 } }), alignments: { ULONG: 8 } };
    expect(readOne(own, packed).values).toEqual([10, 20]);
  });

  it("begins at the address as it is, though that is not aligned", () => {
    const made: MadeModule = {
      characteristics: [characteristic({ address: 0x1001 })],
      layouts: [layout([component(1, "FNC_VALUES", "UWORD")])],
    };
    expect(readOne(made, [0, 0x34, 0x12]).values).toEqual([0x1234]);
  });

  it("moves with the number in use, unless the layout is static", () => {
    const components = [COUNT_X, X, component(3, "FNC_VALUES", "UBYTE")];
    expect(readOne(curve(components), [2, 5, 6, 50, 60])).toMatchObject({ dims: [2], values: [50, 60] });
    const fixed = readOne(curve(components, { isStatic: true }), [2, 5, 6, 0xee, 0xee, 50, 60, 0xee, 0xee]);
    expect(fixed).toMatchObject({ dims: [2], values: [50, 60] });
    expect(fixed.axes[0].points).toEqual([5, 6]);
  });

  it("keeps the rows of a static map apart by the most points", () => {
    const made = map(
      [
        COUNT_X,
        component(2, "NO_AXIS_PTS_Y", "UBYTE"),
        component(3, "AXIS_PTS_X", "UBYTE"),
        component(4, "AXIS_PTS_Y", "UBYTE"),
        component(5, "FNC_VALUES", "UBYTE"),
      ],
      { isStatic: true },
      [3, 2],
    );
    const read = readOne(made, [2, 2, 1, 2, 0xee, 7, 8, 11, 12, 0xee, 13, 14, 0xee]);
    expect(read.values).toEqual([11, 12, 13, 14]);
    expect(read.axes.map(({ points }) => points)).toEqual([
      [1, 2],
      [7, 8],
    ]);
  });

  it("keeps the starts and closes the rows where only offsets are static (from memory of ASAP2 1.7)", () => {
    const components = [
      ...[COUNT_X, component(2, "NO_AXIS_PTS_Y", "UBYTE"), component(3, "FNC_VALUES", "UBYTE")],
      ...[component(4, "AXIS_PTS_X", "UBYTE"), component(5, "AXIS_PTS_Y", "UBYTE")],
    ];
    const bytes = [2, 2, 11, 12, 13, 14, 0xee, 0xee, 1, 2, 0xee, 7, 8];
    const read = readOne(map(components, { keepsStarts: true }, [3, 2]), bytes);
    expect(read.values).toEqual([11, 12, 13, 14]);
    expect(read.axes.map(({ points }) => points)).toEqual([
      [1, 2],
      [7, 8],
    ]);
    const both = [2, 2, 11, 12, 0xee, 13, 14, 0xee, 1, 2, 0xee, 7, 8];
    const whole = map(components, { keepsStarts: true, isStatic: true }, [3, 2]);
    expect(readOne(whole, both)).toMatchObject({ values: [11, 12, 13, 14], dims: [2, 2] });
  });

  it("keeps where the values of a curve begin where offsets are static, and where its last part does", () => {
    const components = [COUNT_X, X, component(3, "FNC_VALUES", "UBYTE")];
    const read = readOne(curve(components, { keepsStarts: true }), [2, 5, 6, 0xee, 0xee, 50, 60]);
    expect(read).toMatchObject({ dims: [2], values: [50, 60] });
    const turned = [component(1, "FNC_VALUES", "UBYTE"), component(2, "AXIS_PTS_X", "UBYTE")];
    const fixed = curve(turned, { keepsStarts: true, fixedCounts: { X: 2 } });
    const after = readOne(fixed, [50, 60, 0xee, 0xee, 5, 6]);
    expect([after.values, after.axes[0].points]).toEqual([
      [50, 60],
      [5, 6],
    ]);
  });

  it("skips addresses, identification and the like by their size", () => {
    const made = curve(
      [
        component(1, "SRC_ADDR_X", "ULONG"),
        component(2, "IDENTIFICATION", "UBYTE"),
        component(3, "RIP_ADDR_W", "UWORD"),
        component(4, "NO_AXIS_PTS_X", "UWORD"),
        component(5, "AXIS_PTS_X", "UBYTE"),
        component(6, "FNC_VALUES", "UBYTE"),
      ],
      {},
    );
    expect(readOne(made, [1, 2, 3, 4, 9, 0xee, 0, 0, 2, 0, 5, 6, 50, 60])).toMatchObject({
      values: [50, 60],
    });
  });

  it("takes the layout's fixed number of points", () => {
    const made = curve([X, component(3, "FNC_VALUES", "UBYTE")], { fixedCounts: { X: 3 } }, 8);
    expect(readOne(made, [1, 2, 3, 10, 20, 30])).toMatchObject({ dims: [3], values: [10, 20, 30] });
  });

  it("a number of points in front of a fixed axis is passed over", () => {
    const made = curve([component(1, "NO_AXIS_PTS_X", "UWORD"), component(2, "FNC_VALUES", "UWORD")]);
    made.characteristics = [
      characteristic({ type: "CURVE", axes: [axis({ kind: "FIX_AXIS", fixedRaw: [0, 4, 8] })] }),
    ];
    expect(readOne(made, words(3, 70, 80, 90)).values).toEqual([70, 80, 90]);
  });
});

describe("order of cells", () => {
  // The same 2 × 3 array 1 2 / 3 4 / 5 6 in either order (ASAP2: rows with x fastest, columns with y fastest).
  it.each([
    ["ROW_DIR", [1, 2, 3, 4, 5, 6]],
    ["COLUMN_DIR", [1, 3, 5, 2, 4, 6]],
  ] as const)("a map in %s", (indexMode, cells) => {
    const made = map([
      X,
      component(3, "AXIS_PTS_Y", "UBYTE"),
      component(4, "FNC_VALUES", "UBYTE", { indexMode }),
    ]);
    expect(readOne(made, [10, 20, 7, 8, 9, ...cells]).values).toEqual([1, 2, 3, 4, 5, 6]);
  });

  it("a five-dimensional table runs x, y, z, 4, 5", () => {
    const made: MadeModule = {
      characteristics: [
        characteristic({
          type: "CUBE_5",
          axes: [2, 1, 2, 1, 2].map((n) =>
            axis({ kind: "FIX_AXIS", fixedRaw: Array.from({ length: n }, (_, k) => k) }),
          ),
        }),
      ],
      layouts: [layout([component(1, "FNC_VALUES", "UBYTE", { indexMode: "COLUMN_DIR" })])],
    };
    const read = readOne(made, [1, 2, 3, 4, 5, 6, 7, 8]);
    expect(read.dims).toEqual([2, 1, 2, 1, 2]);
    expect(read.values).toEqual([1, 2, 3, 4, 5, 6, 7, 8]);
  });

  it("a curve stored from its last point on is turned, values and all", () => {
    const made = curve(
      [
        COUNT_X,
        component(2, "AXIS_PTS_X", "SBYTE", { indexOrder: "INDEX_DECR" }),
        component(3, "FNC_VALUES", "UBYTE"),
      ],
      {},
    );
    const read = readOne(made, [3, 30, 20, 10, 3, 2, 1]);
    expect(read.axes[0].points).toEqual([10, 20, 30]);
    expect(read.values).toEqual([1, 2, 3]);
  });

  it("points and values alternate along x: x0 f0 x1 f1, and in a map a column behind each x", () => {
    const fnc = component(2, "FNC_VALUES", "UWORD", { indexMode: "ALTERNATE_WITH_X" });
    const points = component(1, "AXIS_PTS_X", "UWORD");
    expect(readOne(curve([points, fnc], {}, 3), words(1, 10, 2, 20, 3, 30))).toMatchObject({
      values: [10, 20, 30],
      axes: [{ points: [1, 2, 3] }],
    });
    const made = map([component(3, "AXIS_PTS_Y", "UWORD"), points, fnc]);
    const read = readOne(made, words(7, 8, 9, 1, 11, 12, 13, 2, 21, 22, 23));
    expect(read.values).toEqual([11, 21, 12, 22, 13, 23]);
    expect(read.axes.map((one) => one.points)).toEqual([
      [1, 2],
      [7, 8, 9],
    ]);
  });

  it("points and values alternate along y: a row behind each y", () => {
    const made = map([
      X,
      component(3, "AXIS_PTS_Y", "UBYTE"),
      component(4, "FNC_VALUES", "UBYTE", { indexMode: "ALTERNATE_WITH_Y" }),
    ]);
    const read = readOne(made, [1, 2, 7, 11, 12, 8, 21, 22, 9, 31, 32]);
    expect(read.values).toEqual([11, 12, 21, 22, 31, 32]);
    expect(read.axes[1].points).toEqual([7, 8, 9]);
  });

  it("does not guess how several curves alternate", () => {
    const made = curve([X, component(3, "FNC_VALUES", "UBYTE", { indexMode: "ALTERNATE_CURVES" })]);
    expect(reasonOf(made, Array(40).fill(1))).toMatch(/ALTERNATE_CURVES/);
  });
});

describe("blocks and texts", () => {
  const block = (matrixDim: number[] | null, type: "VAL_BLK" | "ASCII" = "VAL_BLK"): MadeModule => ({
    characteristics: [characteristic({ type, matrixDim })],
    layouts: [layout([component(1, "FNC_VALUES", "UBYTE")])],
  });
  it("drops ones at the end of the dimensions", () => {
    expect(readOne(block([3, 2, 1]), [1, 2, 3, 4, 5, 6])).toMatchObject({
      dims: [3, 2],
      values: [1, 2, 3, 4, 5, 6],
    });
    expect(readOne(block([1]), [9])).toMatchObject({ dims: [1], values: [9] });
  });
  it("a text ends at the first NUL and rests on the bytes up to there", () => {
    const read = readOne(block([6], "ASCII"), [0x41, 0x62, 0, 0x7a, 0xff, 0]);
    expect(read).toMatchObject({
      characters: "Ab",
      values: [],
      raw: [],
      bytes: [{ address: 0x1000, length: 3 }],
    });
    expect(readOne(block([3], "ASCII"), [0x32, 0xc2, 0xb0]).characters).toBe("2°");
    expect(readOne(block([2], "ASCII"), [0x32, 0xb0]).characters).toBe("2°");
  });
  it("needs to be told how long it is", () => {
    expect(reasonOf(block(null, "ASCII"), [1])).toBe("its type is ASCII and it states no number of cells.");
  });
});

describe("shared axes", () => {
  const shared = (bytes: number[], more = {}): [MadeModule, number[]] => [
    {
      characteristics: [
        characteristic({
          type: "CURVE",
          axes: [axis({ kind: "COM_AXIS", reference: "A", maxPoints: 15, conversion: "TENTH" })],
        }),
      ],
      axisPoints: [axisPoints({ address: 0x1010, maxPoints: 15, inputQuantity: "n", ...more })],
      layouts: [layout([component(1, "FNC_VALUES", "UBYTE")]), layout([COUNT_X, X], { name: "LA" })],
      conversions: [{ kind: "linear", name: "TENTH", text: "", unit: "bar", decimals: 1, a: 0.5, b: 1 }],
    },
    bytes,
  ];
  it("the number stored with the shared axis counts, and the curve's own conversion", () => {
    const read = readOne(...shared([1, 2, 3, 4, 5, ...Array(11).fill(0xee), 5, 10, 20, 30, 40, 50]));
    expect(read).toMatchObject({ dims: [5], values: [1, 2, 3, 4, 5] });
    expect(read.axes[0]).toMatchObject({
      unit: "bar",
      decimals: 1,
      inputQuantity: "n",
      points: [6, 11, 16, 21, 26],
    });
  });
  it("says why a curve on an axis out of bounds is not read", () => {
    const reason = "its axis A can't be read: it states 40 points for axis x, at most 15 are possible.";
    expect(reasonOf(...shared([...Array(16).fill(0), 40]))).toBe(reason);
  });
});
