import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { shiftLabels } from "@/components/charts/frame/label-shift";
import { extentOf, indexSpan, nearestIndex } from "@/components/charts/frame/series";
import { tableStep } from "@/components/charts/frame/table-step";
import { thinIndices, thinTogether } from "@/components/charts/frame/thin";

describe("nearestIndex", () => {
  it("finds the nearer neighbour, the left one on a tie, the ends outside", () => {
    const xs = [0, 10, 20];
    expect([-5, 4, 5, 6, 14, 16, 99].map((at) => nearestIndex(xs, at))).toEqual([0, 0, 0, 1, 1, 2, 2]);
  });

  it("finds nothing in an empty grid", () => {
    expect(nearestIndex([], 3)).toBe(-1);
  });

  it("agrees with looking at every point", () => {
    fc.assert(
      fc.property(fc.uniqueArray(fc.integer(), { minLength: 1 }), fc.integer(), (points, at) => {
        const xs = [...points].sort((a, b) => a - b);
        const distances = xs.map((x) => Math.abs(x - at));
        expect(distances[nearestIndex(xs, at)]).toBe(Math.min(...distances));
      }),
    );
  });
});

describe("indexSpan and extentOf", () => {
  it("takes the grid points inside a range, ends included", () => {
    expect(indexSpan([1, 2, 3, 4], { from: 2, to: 3 })).toEqual({ first: 1, last: 2 });
    expect(indexSpan([1, 2, 3, 4], { from: 2.2, to: 2.8 })).toBeNull();
  });

  it("looks past gaps and says null when there is nothing else", () => {
    expect(
      extentOf(
        [
          [null, 3, 7],
          [2, null, null],
        ],
        0,
        2,
      ),
    ).toEqual([2, 7]);
    expect(extentOf([[null, null]], 0, 1)).toBeNull();
  });
});

describe("shiftLabels", () => {
  it("leaves labels alone that have room", () => {
    expect(shiftLabels([10, 40], 18, 0, 100)).toEqual([10, 40]);
  });

  it("parts labels that fall together, keeping their order", () => {
    expect(shiftLabels([50, 50], 18, 0, 100)).toEqual([50, 68]);
    expect(shiftLabels([52, 50], 18, 0, 100)).toEqual([68, 50]);
  });

  it("pushes back from the lower edge", () => {
    expect(shiftLabels([95, 99], 18, 0, 100)).toEqual([82, 100]);
  });
});

describe("thinIndices", () => {
  const xs = Array.from({ length: 10_000 }, (_, i) => i);

  it("returns short series whole", () => {
    expect(thinIndices([0, 1, 2], [5, null, 7], 100)).toEqual([0, 1, 2]);
  });

  it("keeps at most four points a pixel column, in order, with both ends", () => {
    const kept = thinIndices(
      xs,
      xs.map((x) => Math.sin(x / 50)),
      200,
    );
    expect(kept.length).toBeLessThanOrEqual(800);
    expect([...kept].sort((a, b) => a - b)).toEqual(kept);
    expect([kept[0], kept.at(-1)]).toEqual([0, 9999]);
  });

  it("never loses a spike one sample wide", () => {
    const values = xs.map(() => 1);
    values[6543] = 99;
    expect(thinIndices(xs, values, 200)).toContain(6543);
  });

  it("keeps a gap open and both of its shores", () => {
    const values = xs.map((x) => (x > 4010 && x < 4020 ? null : 1));
    const kept = thinIndices(xs, values, 200);
    expect(kept.some((i) => values[i] === null)).toBe(true);
    expect(kept).toContain(4020);
  });
});

describe("thinTogether", () => {
  it("keeps the spikes of every series at the same time points", () => {
    const xs = Array.from({ length: 10_000 }, (_, i) => i);
    const first = xs.map((x) => (x === 1234 ? 9 : 0));
    const second = xs.map((x) => (x === 8765 ? -9 : 0));
    const kept = thinTogether(xs, [first, second], 100);
    expect(kept).toContain(1234);
    expect(kept).toContain(8765);
    expect(kept.length).toBeLessThanOrEqual(800);
  });
});

describe("tableStep", () => {
  it("gives at most sixty rows in 1-2-5 steps", () => {
    expect([9, 60, 61, 120, 121, 4000].map(tableStep)).toEqual([1, 1, 2, 2, 5, 100]);
  });
});
