import fc from "fast-check";
import { expect, it, vi } from "vitest";
import type { Characteristic } from "@/lib/calibration/a2l/types";
import { changeSetOf } from "@/lib/calibration/changes/change-set";
import { readImageByDescription } from "@/lib/calibration/values/read-image-by-description";
import {
  axis,
  characteristic,
  component,
  describedBy,
  layout,
  segments,
} from "@/tests/support/made-description";

vi.setConfig({ testTimeout: 60_000 });

const fixed = (n: number) => axis({ kind: "FIX_AXIS", fixedRaw: Array.from({ length: n }, (_, k) => k) });
const SHAPES: readonly ((n: number) => Partial<Characteristic>)[] = [
  () => ({ type: "VALUE" }),
  (n) => ({ type: "VAL_BLK", matrixDim: [n, 2] }),
  (n) => ({ type: "ASCII", matrixDim: [n] }),
  (n) => ({ type: "CURVE", axes: [axis({ maxPoints: n })] }),
  (n) => ({ type: "MAP", axes: [fixed(n), axis({ maxPoints: 2 })] }),
  () => ({ type: "CURVE", axes: [axis({ kind: "CURVE_AXIS", reference: "C1", maxPoints: 2 })] }),
];
const type = fc.constantFrom("UBYTE", "SBYTE", "UWORD", "FLOAT64_IEEE", "A_UINT64" as const);
const revision = fc.record({
  things: fc.array(fc.tuple(fc.nat(SHAPES.length - 1), fc.integer({ min: 1, max: 3 }), fc.nat(20)), {
    maxLength: 5,
  }),
  type,
  bytes: fc.array(fc.nat(255), { minLength: 30, maxLength: 60 }),
});

function contentOf({ things, type: data, bytes }: typeof revision extends fc.Arbitrary<infer T> ? T : never) {
  const image = { segments: segments(bytes) };
  const made = {
    characteristics: things.map(([shape, n, at], k) =>
      characteristic({
        name: `C${k}`,
        address: 0x1000 + at,
        lowerLimit: 0,
        upperLimit: 9,
        ...SHAPES[shape](n),
      }),
    ),
    layouts: [
      layout([
        component(1, "AXIS_PTS_X", "UBYTE"),
        component(2, "AXIS_PTS_Y", data),
        component(3, "FNC_VALUES", data),
      ]),
    ],
  };
  return { image, reading: readImageByDescription(describedBy(made), image) };
}

it("any two revisions by any two descriptions give a set that is whole, storable and the same every time", () => {
  fc.assert(
    fc.property(revision, revision, (one, two) => {
      const [a, b] = [contentOf(one), contentOf(two)];
      const set = changeSetOf(a, b);
      expect(JSON.parse(JSON.stringify(set))).toEqual(set);
      expect(changeSetOf(contentOf(one), contentOf(two))).toEqual(set);
      for (const change of set.characteristics) {
        expect(change.changes.length).toBeLessThanOrEqual(change.cells);
        expect(change.effect).toBeGreaterThanOrEqual(0);
        expect([change.before === null, change.after === null]).toEqual([
          change.kind === "added",
          change.kind === "removed",
        ]);
        for (const cell of change.changes) expect(cell.index).toHaveLength(change.after?.dims.length ?? 0);
      }
      const effects = set.characteristics.map(({ effect }) => effect);
      expect(effects).toEqual([...effects].sort((p, q) => q - p));
      // The other way round: added and removed change places, the changed ones stay.
      const back = changeSetOf(b, a);
      const kinds = (of: typeof set, kind: string) =>
        of.characteristics
          .filter((change) => change.kind === kind)
          .map(({ name }) => name)
          .sort();
      expect(kinds(back, "added")).toEqual(kinds(set, "removed"));
      expect(kinds(back, "changed")).toEqual(kinds(set, "changed"));
      expect(back.uncoveredBytes).toBe(set.uncoveredBytes);
      expect(changeSetOf(a, a)).toMatchObject({ identical: true, characteristics: [], uncoveredBytes: 0 });
    }),
    { numRuns: 300 },
  );
});
