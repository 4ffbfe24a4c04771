import fc from "fast-check";
import { expect, it, vi } from "vitest";
import { sampleTimes } from "@/lib/calibration/coverage/sample-times";
import { placeOnAxis, visitCells } from "@/lib/calibration/coverage/visit-cells";

vi.setConfig({ testTimeout: 60_000 });

const finite = { noNaN: true, noDefaultInfinity: true };
const axisPoints = fc
  .uniqueArray(fc.integer({ min: -50, max: 50 }), { minLength: 1, maxLength: 6 })
  .map((points) => Float64Array.from(points.sort((a, b) => a - b)));
const sample = fc.option(
  fc.integer({ min: -560, max: 560 }).map((n) => n / 8),
  { nil: Number.NaN, freq: 8 },
);
const scene = fc.integer({ min: 1, max: 4 }).chain((axes) =>
  fc.record({
    points: fc.array(axisPoints, { minLength: axes, maxLength: axes }),
    rows: fc.array(
      fc.record({
        step: fc.oneof(
          { weight: 9, arbitrary: fc.double({ min: 0.005, max: 0.02, ...finite }) },
          fc.constant(1.5),
        ),
        at: fc.array(sample, { minLength: axes, maxLength: axes }),
      }),
      { minLength: 1, maxLength: 60 },
    ),
  }),
);

/** The hat function of a point: 1 there, 0 at its neighbours, held beyond the ends; written down from its definition. */
function hat(points: Float64Array, k: number, value: number): number {
  const x = Math.min(points[points.length - 1], Math.max(points[0], value));
  if (x === points[k]) return 1;
  const [left, right] = [points[k - 1], points[k + 1]];
  if (left !== undefined && x > left && x < points[k]) return (x - left) / (points[k] - left);
  if (right !== undefined && x < right && x > points[k]) return (right - x) / (right - points[k]);
  return 0;
}

it("gives each cell the product of its hat functions, and shares out the usable time without rest", () => {
  fc.assert(
    fc.property(scene, ({ points, rows }) => {
      let t = 0;
      const timeS = Float64Array.from(rows, ({ step }) => (t += step));
      const times = sampleTimes(timeS);
      const dims = points.map((axis) => axis.length);
      const cells = dims.reduce((a, b) => a * b, 1);
      const table = { seconds: new Float64Array(cells), visits: new Float64Array(cells), secondsOutside: 0 };
      const places = points.map((axis, k) =>
        placeOnAxis(
          axis,
          Float64Array.from(rows, ({ at }) => at[k]),
        ),
      );
      visitCells(table, dims, places, timeS, times);

      const usable = rows.map(({ at }, i) => (at.some(Number.isNaN) ? 0 : times.worthS[i]));
      const sum = (list: Iterable<number>) => [...list].reduce((a, b) => a + b, 0);
      expect(sum(table.seconds)).toBeCloseTo(sum(usable), 9);
      for (let cell = 0; cell < cells; cell++) {
        let stride = 1;
        const index = dims.map((n) => {
          const place = Math.floor(cell / stride) % n;
          stride *= n;
          return place;
        });
        const weights = rows.map(
          ({ at }, i) =>
            usable[i] && points.reduce((w, axis, k) => w * hat(axis, index[k], at[k]), usable[i]),
        );
        expect(table.seconds[cell]).toBeCloseTo(sum(weights), 9);
        expect(table.visits[cell] > 0).toBe(weights.some((w) => w > 0));
      }
      const beyond = rows.map(({ at }, i) =>
        points.some((axis, k) => axis.length > 1 && (at[k] < axis[0] || at[k] > axis[axis.length - 1]))
          ? usable[i]
          : 0,
      );
      expect(table.secondsOutside).toBeCloseTo(sum(beyond), 9);
    }),
    { numRuns: 300, seed: 5 },
  );
});

it("shares the whole time of a log without gaps among its samples", () => {
  fc.assert(
    fc.property(
      fc.array(fc.double({ min: 0.01, max: 0.0299, ...finite }), { minLength: 2, maxLength: 80 }),
      (steps) => {
        let t = 0;
        const timeS = Float64Array.from(steps, (step) => (t += step));
        const { worthS, joined } = sampleTimes(timeS);
        expect(worthS.reduce((a, b) => a + b, 0)).toBeCloseTo(timeS[timeS.length - 1] - timeS[0], 9);
        expect([...joined].slice(1).every(Boolean)).toBe(true);
      },
    ),
    { numRuns: 100, seed: 5 },
  );
});
