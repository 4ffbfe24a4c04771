import fc from "fast-check";
import { SaxesParser } from "saxes";
import { describe, expect, it } from "vitest";
import { cdfOfChanges, cdfOfReading } from "@/lib/calibration/cdf/cdf-instances";
import { readCdfx } from "@/lib/calibration/cdf/read-cdfx";
import type { CdfAxis, CdfInstance } from "@/lib/calibration/cdf/types";
import { isWritable, writeCdfx } from "@/lib/calibration/cdf/write-cdfx";
import type { ChangeSet, CharacteristicChange } from "@/lib/calibration/changes/types";
import { madeAxis, madeCharacteristic, madeReading } from "../../support/made-reading";

const written = (instances: CdfInstance[]) => [...writeCdfx("R14 & R12", instances)].join("");
const back = (instances: CdfInstance[]) => readCdfx(new TextEncoder().encode(written(instances)));

const name = fc.stringMatching(/^[A-Za-z_][\w.[\]<&"']{0,20}$/);
const text = fc.string({ unit: "binary", maxLength: 12 }).filter(isWritable);
const value = fc.oneof(
  fc.double({ noNaN: true, noDefaultInfinity: true }),
  fc.integer(),
  text.filter((t) => t !== ""),
);
const cells = (dims: number[]) => {
  const length = dims.reduce((product, n) => product * n, 1);
  return fc.array(value, { minLength: length, maxLength: length });
};
const size = fc.integer({ min: 1, max: 4 });
const shape = fc.oneof(
  fc.constant({ category: "VALUE", dims: [] as number[] }),
  size.map((n) => ({ category: "COM_AXIS", dims: [n] })),
  size.map((n) => ({ category: "RES_AXIS", dims: [2, n] })),
  fc.tuple(size, size).map(([x, y]) => ({ category: "VAL_BLK", dims: y > 1 ? [x, y] : [x] })),
  size.map((x) => ({ category: "CURVE", dims: [x] })),
  fc.tuple(size, size).map((dims) => ({ category: "MAP", dims })),
  fc.tuple(size, size, size).map((dims) => ({ category: "CUBOID", dims })),
  fc.tuple(size, size, size, size, size).map((dims) => ({ category: "CUBE_5", dims })),
);
const axis: fc.Arbitrary<CdfAxis> = fc.oneof(
  fc.record({
    category: fc.constantFrom("STD_AXIS", "FIX_AXIS"),
    reference: fc.constant(null),
    unit: text,
    values: fc.array(value, { maxLength: 4 }),
  }),
  fc.record({
    category: fc.constantFrom("COM_AXIS", "RES_AXIS", "CURVE_AXIS"),
    reference: name,
    unit: text,
    values: fc.constant<CdfAxis["values"]>([]),
  }),
);
const instance: fc.Arbitrary<CdfInstance> = shape.chain(({ category, dims }) =>
  fc.record({
    name,
    text,
    category: fc.constant(category),
    unit: text,
    dims: fc.constant(dims),
    values: cells(dims),
    axes: fc.array(axis, { maxLength: 3 }),
    functions: fc.array(name, { maxLength: 2 }),
  }),
);

describe("a values file that was written", () => {
  it("is read back the same, to the last bit of each number (property)", () => {
    fc.assert(
      fc.property(
        fc.uniqueArray(instance, { selector: (i) => i.name, minLength: 1, maxLength: 5 }),
        (instances) => {
          const file = back(instances);
          expect(file.instances).toEqual(instances);
          expect([file.notes, file.problems]).toEqual([[], []]);
        },
      ),
      { numRuns: 300, seed: 41 },
    );
  });
  it("is well-formed XML with one V a number, one VT a text and one group a row", () => {
    const counts: Record<string, number> = {};
    const parser = new SaxesParser();
    parser.on("error", (error) => {
      throw error;
    });
    parser.on("opentag", ({ name: tag }) => {
      counts[tag] = (counts[tag] ?? 0) + 1;
    });
    const map = { name: "m", text: "", category: "MAP", unit: "°", dims: [3, 2], functions: [], axes: [] };
    parser.write(written([{ ...map, values: [1, 2, 3, 4, 5, "six"] }])).close();
    expect(counts).toMatchObject({ V: 5, VT: 1, VG: 2, LABEL: 2, "SW-INSTANCE": 1, MSRSW: 1 });
  });
  it("says in remarks what it does not hold, whatever the names are (property)", () => {
    fc.assert(
      fc.property(fc.string({ unit: "binary" }), fc.string(), (missing, reason) => {
        const leftOut = [
          { name: missing, reason },
          { name: "a--b", reason: "-" },
        ];
        const whole = [...writeCdfx("t", [], leftOut)].join("");
        expect(whole).toContain("<!-- Left out: a- -b: -  -->");
        expect(readCdfx(new TextEncoder().encode(whole))).toMatchObject({ instances: [], problems: [] });
      }),
      { numRuns: 100, seed: 42 },
    );
  });
  it("comes in pieces, an instance never before it is asked for", () => {
    let asked = 0;
    const endless = function* (): Generator<CdfInstance> {
      for (;;) {
        asked++;
        yield {
          name: `v${asked}`,
          text: "",
          category: "VALUE",
          unit: "",
          dims: [],
          values: [asked],
          axes: [],
          functions: [],
        };
      }
    };
    const pieces = writeCdfx("t", endless());
    for (let k = 0; k < 40; k++) expect(pieces.next().value.length).toBeLessThan(500);
    expect(asked).toBeLessThan(15);
  });
});

describe("what of a reading goes into a values file", () => {
  const load = madeAxis([20, 40], { kind: "COM_AXIS", reference: "load.axis", unit: "%" });
  const curve = madeCharacteristic({
    name: "c",
    type: "CURVE",
    dims: [2],
    values: [1, 2],
    axes: [load],
    unit: "kPa",
  });
  it("all characteristics and shared axes with their own category; texts as one value", () => {
    const { instances, leftOut } = cdfOfReading(
      madeReading(
        curve,
        madeCharacteristic({ name: "load.axis", type: "AXIS_PTS", dims: [2], values: [20, 40] }),
        madeCharacteristic({ name: "pairs", type: "AXIS_PTS", dims: [2, 2], values: [0, 0, 9, 1] }),
        madeCharacteristic({ name: "id", type: "ASCII", dims: [8], values: [], characters: "AB <1>" }),
      ),
    );
    expect(leftOut).toEqual([]);
    expect(instances.map(({ category, dims, values }) => [category, dims, values])).toEqual([
      ["CURVE", [2], [1, 2]],
      ["COM_AXIS", [2], [20, 40]],
      ["RES_AXIS", [2, 2], [0, 0, 9, 1]],
      ["ASCII", [], ["AB <1>"]],
    ]);
    expect(instances[0].axes).toEqual([
      { category: "COM_AXIS", reference: "load.axis", unit: "%", values: [] },
    ]);
    expect(back(instances).instances).toEqual(instances);
  });
  it("leaves out, with the reason, what a values file can't hold", () => {
    const reading = madeReading(
      madeCharacteristic({ name: "undefined", values: [null] }),
      madeCharacteristic({ name: "infinite", values: [Infinity] }),
      madeCharacteristic({ name: "control", type: "ASCII", values: [], characters: "a\u0001b" }),
      madeCharacteristic({ name: "axis", type: "CURVE", dims: [1], axes: [madeAxis([null])] }),
    );
    const { instances, leftOut } = cdfOfReading({
      ...reading,
      notRead: [{ name: "gone", reason: "its byte 0x10 is not in the image", address: 0x10 }],
    });
    expect(instances).toEqual([]);
    expect(leftOut.map(({ name: n, reason }) => `${n}: ${reason}`)).toEqual([
      "undefined: a value has no physical meaning, and a values file holds physical values only",
      "infinite: a value has no physical meaning, and a values file holds physical values only",
      "control: a text holds characters that XML can't carry",
      "axis: a value has no physical meaning, and a values file holds physical values only",
      "gone: its byte 0x10 is not in the image",
    ]);
  });
  it("a change set: one side of what changed, with the shared axes it rests on", () => {
    const side = (values: number[]) => ({ dims: [2], axes: [load], values, characters: null });
    const change = (over: Partial<CharacteristicChange>) =>
      ({ ...curve, kind: "changed", ...over }) as CharacteristicChange;
    const changes = {
      characteristics: [
        change({ before: side([1, 2]), after: side([1, 3]) }),
        change({ name: "new", kind: "added", before: null, after: side([5, 6]) }),
      ],
    } as ChangeSet;
    const after = cdfOfChanges(changes, "after");
    expect(after.instances.map((i) => [i.name, i.category, i.values])).toEqual([
      ["c", "CURVE", [1, 3]],
      ["new", "CURVE", [5, 6]],
      ["load.axis", "COM_AXIS", [20, 40]],
    ]);
    const before = cdfOfChanges(changes, "before");
    expect(before.instances.map((i) => i.values)).toEqual([
      [1, 2],
      [20, 40],
    ]);
    expect(before.leftOut).toEqual([{ name: "new", reason: "it is not there before the change" }]);
    expect(back(after.instances).instances).toEqual(after.instances);
  });
});
