import { createHash } from "node:crypto";
import { describe, expect, it } from "vitest";
import { changeSetOf } from "@/lib/calibration/changes/change-set";
import type { ChangeSet, CharacteristicChange } from "@/lib/calibration/changes/types";
import { readImageByDescription } from "@/lib/calibration/values/read-image-by-description";
import {
  axis,
  axisPoints,
  characteristic,
  component,
  describedBy,
  layout,
  type MadeModule,
  segments,
} from "@/tests/support/made-description";

const BYTE = layout([component(1, "FNC_VALUES", "UBYTE")]);
const CURVE = layout([component(1, "AXIS_PTS_X", "UBYTE"), component(2, "FNC_VALUES", "UBYTE")], {
  name: "LC",
});
const POINTS = layout([component(1, "NO_AXIS_PTS_X", "UBYTE"), component(2, "AXIS_PTS_X", "UBYTE")], {
  name: "LA",
});
const layouts = [BYTE, CURVE, POINTS];
const fixed = (n: number) => axis({ kind: "FIX_AXIS", fixedRaw: Array.from({ length: n }, (_, k) => k) });

/** Both images by the same description, 0x1000 on. */
function changed(made: MadeModule, before: number[], after: number[], other: MadeModule = made): ChangeSet {
  const side = (module: MadeModule, bytes: number[]) => {
    const image = { segments: segments(bytes) };
    return { image, reading: readImageByDescription(describedBy({ layouts, ...module }), image) };
  };
  return changeSetOf(side(made, before), side(other, after));
}
function only(set: ChangeSet): CharacteristicChange {
  expect(set.characteristics).toHaveLength(1);
  return set.characteristics[0];
}
const map = (more = {}): MadeModule => ({
  characteristics: [characteristic({ type: "MAP", axes: [fixed(3), fixed(2)], ...more })],
});

describe("functions and groups", () => {
  it("are those of both descriptions, so that describing a value anew hides it from no mark", () => {
    const set = (name: string) => ({ name, text: "", characteristics: ["C"], subSets: [], isRoot: false });
    const one = { characteristics: [characteristic()], groups: [set("All")] };
    const found = only(
      changed({ ...one, functions: [set("Limits"), set("Torque")] }, [1], [2], {
        ...one,
        functions: [set("Comfort"), set("Torque")],
      }),
    );
    expect(found).toMatchObject({ functions: ["Comfort", "Torque", "Limits"], groups: ["All"] });
  });
  it("are told of what could not be read too, of both descriptions", () => {
    const set = (name: string) => ({ name, text: "", characteristics: ["C"], subSets: [], isRoot: false });
    const lost = { characteristics: [characteristic({ layout: "GONE" })], groups: [set("All")] };
    const { notRead } = changed({ ...lost, functions: [set("Limits")] }, [1], [2], lost);
    expect(notRead).toMatchObject([{ name: "C", sets: ["Limits", "All"] }]);
  });
});

describe("values", () => {
  it("each cell whose raw number differs, with before, after and where it lies towards the limits", () => {
    const made = map({ lowerLimit: 10, upperLimit: 100, extendedLimits: [5, 110] });
    const set = changed(made, [10, 20, 30, 40, 50, 60], [9, 20, 105, 200, 1, 60]);
    expect(only(set)).toMatchObject({
      kind: "changed",
      cells: 6,
      changed: 4,
      axisChanged: false,
      shapeChanged: false,
      largestRise: 160,
      largestFall: -49,
      changes: [
        { index: [0, 0], before: 10, after: 9, limit: "extended" },
        { index: [2, 0], before: 30, after: 105, limit: "extended" },
        { index: [0, 1], before: 40, after: 200, limit: "above" },
        { index: [1, 1], before: 50, after: 1, limit: "below" },
      ],
    });
    expect(only(set).before?.values).toEqual([10, 20, 30, 40, 50, 60]);
    expect(set).toMatchObject({
      readBy: "both",
      identical: false,
      changedBytes: 4,
      uncovered: [],
      uncoveredBytes: 0,
    });
    // Spans: values 50, limits 90 → 160 / 50.
    expect(only(set).effect).toBeCloseTo(160 / 50, 12);
  });

  it("nothing of two equal images", () => {
    expect(changed(map(), [1, 2, 3, 4, 5, 6], [1, 2, 3, 4, 5, 6])).toMatchObject({
      identical: true,
      changedBytes: 0,
      characteristics: [],
      uncovered: [],
      problems: [],
    });
  });

  it("a value at its limit is inside though the conversion rounds", () => {
    const made: MadeModule = {
      characteristics: [characteristic({ conversion: "K", lowerLimit: 0, upperLimit: 25.5 })],
      conversions: [{ kind: "linear", name: "K", text: "", unit: "V", decimals: 1, a: 0.1, b: 0 }],
    };
    // 255 · 0.1 is 25.5 and a little more in binary.
    expect(255 * 0.1).toBeGreaterThanOrEqual(25.5);
    expect(only(changed(made, [1], [255])).changes[0].limit).toBe("ok");
  });

  it("words have no difference, only a before and an after", () => {
    const ranges = [
      { from: 0, to: 0, text: "off" },
      { from: 1, to: 1, text: "on" },
    ];
    const made: MadeModule = {
      characteristics: [characteristic({ conversion: "W" })],
      conversions: [{ kind: "words", name: "W", text: "", unit: "", decimals: 0, ranges, fallback: null }],
    };
    expect(only(changed(made, [0], [1]))).toMatchObject({
      largestRise: null,
      largestFall: null,
      effect: 1,
      changes: [{ index: [], before: "off", after: "on", limit: "ok" }],
    });
  });

  it("texts and blocks", () => {
    const made: MadeModule = {
      characteristics: [
        characteristic({ name: "T", type: "ASCII", matrixDim: [4] }),
        characteristic({ name: "B", type: "VAL_BLK", matrixDim: [2, 2], address: 0x1004 }),
      ],
    };
    const set = changed(made, [0x41, 0x42, 0, 0, 1, 2, 3, 4], [0x41, 0x43, 0, 0, 1, 2, 3, 5]);
    const [text, block] = set.characteristics;
    expect(text).toMatchObject({
      name: "T",
      cells: 1,
      changed: 1,
      changes: [],
      before: { characters: "AB" },
      after: { characters: "AC" },
    });
    expect(block).toMatchObject({
      name: "B",
      cells: 4,
      changed: 1,
      changes: [{ index: [1, 1], before: 4, after: 5 }],
    });
  });
});

describe("axes and shapes", () => {
  const curve = characteristic({ type: "CURVE", layout: "LC", axes: [axis({ maxPoints: 3 })] });
  it("an own axis that moved is told apart from values that changed", () => {
    const moved = only(changed({ characteristics: [curve] }, [1, 2, 3, 7, 8, 9], [1, 2, 5, 7, 8, 9]));
    expect(moved).toMatchObject({
      changed: 0,
      axisChanged: true,
      changes: [],
      before: { axes: [{ points: [1, 2, 3] }] },
    });
    // The last point shifted by 2 on an axis that spanned 2.
    expect(moved.effect).toBeCloseTo(1, 12);
    const value = only(changed({ characteristics: [curve] }, [1, 2, 3, 7, 8, 9], [1, 2, 3, 7, 8, 10]));
    expect(value).toMatchObject({ changed: 1, axisChanged: false });
  });

  it("a shared axis that moved shows as itself and on everything that rests on it", () => {
    const on = (name: string, address: number) =>
      characteristic({ name, address, type: "CURVE", axes: [axis({ kind: "COM_AXIS", reference: "A" })] });
    const made: MadeModule = {
      characteristics: [on("C1", 0x1010), on("C2", 0x1012)],
      axisPoints: [axisPoints({ maxPoints: 4 })],
    };
    const bytes = (last: number) => [2, 10, last, ...Array(13).fill(0), 1, 2, 3, 4];
    const set = changed(made, bytes(20), bytes(25));
    const found = set.characteristics.map(({ name, axisChanged, changed: cells }) => [
      name,
      axisChanged,
      cells,
    ]);
    expect(found.sort()).toEqual([
      ["A", false, 1],
      ["C1", true, 0],
      ["C2", true, 0],
    ]);
    expect(set.uncovered).toEqual([]);
  });

  it("another number of points is another shape: no cells, both sides whole", () => {
    const own = layout(
      [
        component(1, "NO_AXIS_PTS_X", "UBYTE"),
        component(2, "AXIS_PTS_X", "UBYTE"),
        component(3, "FNC_VALUES", "UBYTE"),
      ],
      { name: "LC" },
    );
    const made: MadeModule = { characteristics: [curve], layouts: [own] };
    const change = only(changed(made, [2, 1, 2, 50, 60, 0, 0], [3, 1, 2, 3, 50, 60, 70]));
    expect(change).toMatchObject({
      shapeChanged: true,
      axisChanged: false,
      changes: [],
      cells: 3,
      changed: 3,
      effect: 1,
    });
    expect([change.before?.values, change.after?.values]).toEqual([
      [50, 60],
      [50, 60, 70],
    ]);
  });
});

describe("two descriptions", () => {
  const at = (name: string, address: number) => characteristic({ name, address });
  it("added and removed", () => {
    const set = changed({ characteristics: [at("OLD", 0x1000)] }, [1, 2], [1, 3], {
      characteristics: [at("NEW", 0x1001)],
    });
    expect(
      set.characteristics.map(({ name, kind, before, after }) => [name, kind, before?.values, after?.values]),
    ).toEqual([
      ["NEW", "added", undefined, [3]],
      ["OLD", "removed", [1], undefined],
    ]);
    expect(set.uncovered).toEqual([]);
  });

  it("the same content at another address is no change, and its bytes are accounted for", () => {
    const set = changed({ characteristics: [at("V", 0x1000)] }, [7, 0], [0, 7], {
      characteristics: [at("V", 0x1001)],
    });
    expect(set).toMatchObject({ characteristics: [], uncoveredBytes: 0, identical: false });
    expect(set.problems).toEqual(["V lies at another address with the same content, which is no change."]);
  });

  it("what one image does not hold is not called removed", () => {
    const made = { characteristics: [at("V", 0x1002)] };
    const set = changed(made, [1, 2, 3], [1, 2]);
    expect(set.characteristics).toEqual([]);
    expect(set.notRead).toEqual([{ name: "V", reason: expect.stringMatching(/not in the image/) }]);
    expect(set.problems[0]).toMatch(/^V could be read in one of the two images only/);
    expect(set.uncovered[0]).toMatchObject({ address: 0x1002, kind: "only a", after: null });
  });

  it("another meaning of the same raw numbers is told", () => {
    const made = (a: number): MadeModule => ({
      characteristics: [characteristic({ conversion: "K" })],
      conversions: [{ kind: "linear", name: "K", text: "", unit: "V", decimals: 1, a, b: 0 }],
    });
    const set = changed(made(1), [4], [4], made(2));
    expect(set.characteristics).toEqual([]);
    expect(set.problems[0]).toMatch(/^V?C has the same raw numbers .* another meaning\.$/);
  });
});

describe("sorting and marks", () => {
  const made: MadeModule = {
    characteristics: [
      characteristic({ name: "SMALL", lowerLimit: 0, upperLimit: 100 }),
      characteristic({ name: "LARGE", lowerLimit: 0, upperLimit: 10, address: 0x1001 }),
      characteristic({ name: "EQUAL", lowerLimit: 0, upperLimit: 10, address: 0x1002 }),
    ],
  };
  it("the largest effect first, then by name", () => {
    const set = changed(made, [1, 1, 1], [2, 2, 2]);
    // One step over limits that span 100 and 10.
    expect(set.characteristics.map(({ name, effect }) => [name, effect])).toEqual([
      ["EQUAL", 0.1],
      ["LARGE", 0.1],
      ["SMALL", 0.01],
    ]);
  });

  it("a digest holds for exactly this change", () => {
    const digests = (after: number[]) =>
      changed(made, [1, 1, 1], after).characteristics.map(({ digest }) => digest);
    expect(digests([2, 2, 2])).toEqual(digests([2, 2, 2]));
    const [equal, large, small] = digests([2, 2, 2]);
    expect(digests([3, 2, 2])).toEqual([equal, large, expect.not.stringMatching(small)]);
    expect(equal).toMatch(/^[\da-f]{64}$/);
  });

  it("the digest is SHA-256 over the canonical JSON of name, before and after", () => {
    const side = (value: number) =>
      `{"axes":[],"characters":null,"dims":[],"raw":[${value}],"unit":"","values":[${value}]}`;
    const text = `{"after":${side(2)},"before":${side(1)},"name":"C"}`;
    const [change] = changed({ characteristics: [characteristic()] }, [1], [2]).characteristics;
    expect(change.digest).toBe(createHash("sha256").update(text).digest("hex"));
  });
});
