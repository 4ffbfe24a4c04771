import fc from "fast-check";
import { describe, expect, it, vi } from "vitest";
import {
  type CharacteristicType,
  DATA_TYPES,
  type DataType,
  type NamedSet,
} from "@/lib/calibration/a2l/types";
import { readImageByDescription } from "@/lib/calibration/values/read-image-by-description";
import {
  axis,
  axisPoints,
  characteristic,
  component,
  describedBy,
  layout,
  type MadeModule,
  readMade,
  reasonOf,
  segments,
} from "@/tests/support/made-description";

vi.setConfig({ testTimeout: 60_000 });

const WORD = layout([component(1, "FNC_VALUES", "UWORD")]);
const one = (more: Parameters<typeof characteristic>[0], made: MadeModule = {}): MadeModule => ({
  characteristics: [characteristic(more)],
  layouts: [WORD],
  ...made,
});

describe("what can't be read says why", () => {
  it("bytes that the image does not have, wholly or in part", () => {
    expect(reasonOf(one({ address: 0x2000 }), [1, 2, 3])).toBe(
      "its bytes 0x2000 to 0x2001 are not in the image, which has none there.",
    );
    expect(reasonOf(one({ address: 0xfff }), [1, 2, 3])).toBe(
      "its bytes 0xFFF to 0x1000 are not in the image, which has none before 0x1000.",
    );
    expect(reasonOf(one({ address: 0x1002 }), [1, 2, 3])).toBe(
      "its bytes 0x1002 to 0x1003 are only partly in the image, which has none from 0x1003 on.",
    );
  });

  it("layouts, axes and components that are missing", () => {
    expect(reasonOf(one({ layout: "GONE" }), [1, 2])).toBe("its layout GONE is not in the description.");
    expect(reasonOf(one({ type: "MAP", axes: [axis()] }), [1, 2])).toBe(
      "it is a MAP with 1 axis descriptions, 2 are needed.",
    );
    expect(reasonOf(one({ type: "CURVE", axes: [axis({ maxPoints: 1 })] }), [1, 2])).toBe(
      "its layout has no points for axis x.",
    );
    const empty = layout([component(1, "RESERVED", "UBYTE")]);
    expect(reasonOf(one({}, { layouts: [empty] }), [1, 2])).toBe("its layout L has no function values.");
    const com = axis({ kind: "COM_AXIS", reference: "A" });
    expect(reasonOf(one({ type: "CURVE", axes: [com] }), [1, 2])).toBe(
      "its axis A can't be read: the description does not hold it.",
    );
  });

  it.each([
    [40, "it states 40 points for axis x, at most 16 are possible."],
    [0, "it states 0 points for axis x, at least 1 is needed."],
  ])("%d points stored", (stored, reason) => {
    const made = one(
      { type: "CURVE", axes: [axis({ maxPoints: 16 })] },
      {
        layouts: [
          layout([
            component(1, "NO_AXIS_PTS_X", "UBYTE"),
            component(2, "AXIS_PTS_X", "UBYTE"),
            component(3, "FNC_VALUES", "UBYTE"),
          ]),
        ],
      },
    );
    expect(reasonOf(made, [stored, ...Array(100).fill(1)])).toBe(reason);
  });

  it("a number of points behind what it tells the size of", () => {
    const late = layout([
      component(1, "AXIS_PTS_X", "UBYTE"),
      component(2, "FNC_VALUES", "UBYTE"),
      component(3, "NO_AXIS_PTS_X", "UBYTE"),
    ]);
    expect(reasonOf(one({ type: "CURVE", axes: [axis()] }, { layouts: [late] }), Array(30).fill(2))).toMatch(
      /behind/,
    );
  });

  it("names that two blocks share are read once", () => {
    const made = one({ name: "A" }, { axisPoints: [axisPoints({ layout: "L" })] });
    expect(readMade(made, [1, 2]).notRead).toHaveLength(2);
  });
});

describe("several modules", () => {
  it("each is read by its own byte order and layouts; a name that an earlier one has is not read again", () => {
    const made = one({ name: "A" }, { byteOrder: "big" });
    const second = one(
      { name: "B" },
      { characteristics: ["A", "B"].map((name) => characteristic({ name })) },
    );
    const modules = [made, second].flatMap((each) => describedBy(each).modules);
    const reading = readImageByDescription({ ...describedBy(made), modules }, { segments: segments([1, 2]) });
    expect(reading.characteristics.map(({ name, values }) => [name, values])).toEqual([
      ["A", [0x0102]],
      ["B", [0x0201]],
    ]);
    expect(reading.notRead.map(({ name }) => name)).toEqual(["A"]);
  });
});

describe("bounds", () => {
  it("huge counts are refused before anything is allocated", () => {
    const before = process.memoryUsage().arrayBuffers;
    const block = (matrixDim: number[]) => one({ type: "VAL_BLK", matrixDim });
    expect(reasonOf(block([4e9, 4e9, 4e9]), [1, 2])).toMatch(/cells, at most 1048576 are read\.$/);
    expect(reasonOf(block([Number.NaN]), [1, 2])).toMatch(/NaN cells/);
    expect(reasonOf(block([-3]), [1, 2])).toBe("it states -3 cells, at least 1 is needed.");
    const cube = axis({ kind: "FIX_AXIS", fixedRaw: Array(1000).fill(0) });
    expect(reasonOf(one({ type: "CUBOID", axes: [cube, cube, cube] }), [1, 2])).toMatch(/1000000000 cells/);
    expect(process.memoryUsage().arrayBuffers - before).toBeLessThan(1e6);
  });

  it("overlapping records do not multiply an image", () => {
    const made: MadeModule = {
      characteristics: Array.from({ length: 6 }, (_, k) =>
        characteristic({ name: `C${k}`, type: "VAL_BLK", matrixDim: [1_000_000], layout: "B" }),
      ),
      layouts: [layout([component(1, "FNC_VALUES", "UBYTE")], { name: "B" })],
    };
    const image = { segments: [{ address: 0x1000, bytes: new Uint8Array(1_000_000) }] };
    const reading = readImageByDescription(describedBy(made), image);
    expect(reading.characteristics).toHaveLength(4);
    expect(reading.notRead[0].reason).toMatch(/more than 4000000 cells altogether/);
  });

  it("functions and groups may run in circles", () => {
    const set = (name: string, subSets: string[], characteristics: string[] = []): NamedSet => ({
      ...{ name, text: "", subSets, characteristics, isRoot: false },
    });
    const made = one(
      {},
      {
        functions: [set("F", ["G"], ["C"]), set("G", ["F", "G"])],
        groups: [set("H", ["H"], ["C"]), set("I", ["H"])],
      },
    );
    expect(readMade(made, [1, 2]).characteristics[0]).toMatchObject({
      functions: ["F", "G"],
      groups: ["H", "I"],
    });
  });
});

describe("EPK", () => {
  const bytes = [...Buffer.from("ab12cd")];
  const epk = (text: string, ...addresses: number[]) => readMade({ epk: { text, addresses } }, bytes);
  it("match, mismatch, none", () => {
    expect(epk("12c", 0x1002).epk).toEqual({ state: "match", expected: "12c", found: "12c" });
    const other = epk("12x", 0x1002);
    expect(other.epk).toEqual({ state: "mismatch", expected: "12x", found: "12c" });
    expect(other.problems[0]).toBe(
      'The description belongs to "12x", the image holds "12c" at 0x1002. Check that both belong together.',
    );
    expect(epk("12c", 0x1002, 0x9000).epk.state).toBe("mismatch");
    expect(epk("12c").epk.state).toBe("none");
    expect(readMade({}, bytes).epk.state).toBe("none");
  });
});

it("no made-up description throws: everything is read or has its reason (fuzzing)", () => {
  const odd = fc.oneof(fc.integer({ min: -3, max: 20 }), fc.constantFrom(Number.NaN, 1e12, 2 ** 32, -1, 0.5));
  const type = fc.constantFrom(...(Object.keys(DATA_TYPES) as DataType[]));
  const keyword = fc.constantFrom(
    ...[
      "FNC_VALUES",
      "AXIS_PTS_X",
      "AXIS_PTS_Y",
      "NO_AXIS_PTS_X",
      "NO_AXIS_PTS_Y",
      "RESERVED",
      "AXIS_RESCALE_X",
    ],
    ...["NO_RESCALE_X", "OFFSET_X", "DIST_OP_X", "SRC_ADDR_X", "NONSENSE"],
  );
  const made = fc.record({
    components: fc.array(
      fc
        .tuple(
          keyword,
          type,
          fc.constantFrom("ROW_DIR", "COLUMN_DIR", "ALTERNATE_WITH_X", "ALTERNATE_WITH_Y", null),
          odd,
        )
        .map(([name, data, indexMode, maxPairs]) =>
          component(1, name, data, { indexMode, maxPairs, indexOrder: maxPairs > 5 ? "INDEX_DECR" : null }),
        ),
      { maxLength: 6 },
    ),
    kind: fc.constantFrom<CharacteristicType>(
      "VALUE",
      "CURVE",
      "MAP",
      "CUBOID",
      "CUBE_4",
      "CUBE_5",
      "VAL_BLK",
      "ASCII",
    ),
    axes: fc.array(
      fc
        .tuple(
          fc.constantFrom("STD_AXIS", "COM_AXIS", "FIX_AXIS", "RES_AXIS", "CURVE_AXIS"),
          odd,
          fc.boolean(),
        )
        .map(([kind, maxPoints, isGiven]) =>
          axis({ kind, maxPoints, reference: "A", fixedRaw: isGiven ? [1, 2, 3] : null }),
        ),
      { maxLength: 5 },
    ),
    isStatic: fc.boolean(),
    keepsStarts: fc.boolean(),
    matrixDim: fc.option(fc.array(odd, { maxLength: 3 })),
    address: fc.oneof(fc.integer({ min: 0xff0, max: 0x1050 }), odd),
    bytes: fc.array(fc.nat(12), { minLength: 1, maxLength: 80 }),
  });
  fc.assert(
    fc.property(made, ({ components, kind, axes, isStatic, keepsStarts, matrixDim, address, bytes }) => {
      const reading = readMade(
        {
          characteristics: [characteristic({ type: kind, axes, matrixDim, address })],
          axisPoints: [axisPoints({ address: 0x1004, layout: "L" })],
          layouts: [layout(components, { isStatic, keepsStarts })],
        },
        bytes,
      );
      const named = [...reading.characteristics, ...reading.notRead].map(({ name }) => name).sort();
      expect(named).toEqual(["A", "C"]);
      for (const read of reading.characteristics) {
        const cells = read.dims.reduce((product, n) => product * n, 1);
        if (read.type !== "ASCII") expect([read.raw.length, read.values.length]).toEqual([cells, cells]);
        for (const [k, own] of read.axes.entries()) expect(own.points).toHaveLength(read.dims[k]);
      }
      expect(JSON.parse(JSON.stringify(reading))).toEqual(reading);
    }),
    { numRuns: 1000 },
  );
});
