import { describe, expect, it } from "vitest";
import { boundTable, MOST_CELLS } from "@/components/features/change-sets/detail/bound-table";
import { changeGrid } from "@/components/features/change-sets/detail/change-grid";
import { curveView } from "@/components/features/change-sets/detail/curve-view";
import { type HeatQuestion, heatView } from "@/components/features/change-sets/detail/heat-view";
import type { CharacteristicChange } from "@/lib/calibration/changes/types";
import { axis, change, MAP, side } from "./sample";

const asked: HeatQuestion = {
  side: "difference",
  plane: [],
  coverage: null,
  withVisits: false,
};

function viewOf(of: CharacteristicChange, parts: Partial<HeatQuestion> = {}) {
  const grid = changeGrid(of);
  if (!grid) throw new Error("nothing to draw");
  return heatView(of, grid, { ...asked, ...parts });
}
const texts = (of: CharacteristicChange, parts: Partial<HeatQuestion> = {}) =>
  viewOf(of, parts).cells.map((row) => row.map(({ text }) => text));

describe("heatView", () => {
  it("puts x across and y down, a dot where nothing changed, ink by the largest difference", () => {
    const { x, y, cells } = viewOf(MAP);
    expect(x).toEqual({ head: "n_engine, 1/min", points: ["1\u202f000", "2\u202f000", "3\u202f000"] });
    expect(y).toEqual({ head: "pedal, %", points: ["50", "100"] });
    expect(cells.map((row) => row.map(({ text, step }) => [text, step]))).toEqual([
      [
        ["·", "heat-0"],
        ["·", "heat-0"],
        ["\u22122.0", "heat-a1"],
      ],
      [
        ["·", "heat-0"],
        ["+9.0", "heat-b3"],
        ["·", "heat-0"],
      ],
    ]);
  });

  it("keeps the ink of the difference when the numbers are those of one side", () => {
    const after = viewOf(MAP, { side: "after" }).cells[1]?.[1];
    expect([after?.text, after?.step]).toEqual(["149.0", "heat-b3"]);
    expect(texts(MAP, { side: "before" })).toEqual([
      ["100.0", "110.0", "120.0"],
      ["130.0", "140.0", "150.0"],
    ]);
  });

  it("marks limits on the new value only, cells never visited, and prints time and visits on demand", () => {
    const limited = { ...MAP, changes: MAP.changes.map((cell) => ({ ...cell, limit: "above" as const })) };
    const coverage = {
      ...{
        name: "Boost.Target",
        dims: [3, 2],
        secondsByCell: [0, 1.25, 0, 0, 300, 0],
        visitsByCell: [0, 2, 0, 0, 40, 0],
      },
      ...{ secondsOutside: 0, changedCells: 2, changedVisited: 1, changedNeverVisited: [2], links: [] },
    };
    const { cells } = viewOf(limited, { coverage, withVisits: true });
    expect(cells[0]?.[2]).toMatchObject({ isUnvisited: true, mark: { glyph: "▲" }, below: "0\u202fs, 0×" });
    expect(cells[0]?.[1]?.below).toBe("1.3\u202fs, 2×");
    expect(cells[1]?.[1]?.isUnvisited).toBeUndefined();
    expect(viewOf(limited, { side: "before" }).cells[1]?.[1]?.mark).toBeUndefined();
  });

  it("prints words as before → after with an edge, since they have no direction", () => {
    const words = change("Switches", side([2, 1], [], ["off", "on"]), side([2, 1], [], ["on", "on"]));
    expect(viewOf(words).cells).toEqual([
      [
        { text: "off → on", step: "heat-0", isEdged: true },
        { text: "·", step: "heat-0" },
      ],
    ]);
  });

  it("shows a moved axis point with the old one, only where differences are shown", () => {
    const moved = {
      ...MAP,
      axisChanged: true,
      before: side([3, 2], [axis([1000, 1900, 3000]), axis([50, 100])], MAP.before?.values ?? []),
    };
    expect(viewOf(moved).x.was).toEqual([null, "1\u202f900", null]);
    expect(viewOf(moved, { side: "before" }).x).toMatchObject({
      points: ["1\u202f000", "1\u202f900", "3\u202f000"],
    });
  });

  it("shows the plane that is asked for", () => {
    const values = Array.from({ length: 12 }, (_, i) => i);
    const cube = change(
      "Cube",
      side([3, 2, 2], [], values),
      side(
        [3, 2, 2],
        [],
        values.map((value) => (value === 10 ? 99 : value)),
      ),
    );
    expect(
      texts(cube, { plane: [0] })
        .flat()
        .join(""),
    ).toBe("······");
    // x fastest, then y, then z: number 10 is x 1, y 1, z 1.
    expect(texts(cube, { plane: [1] })[1]?.[1]).toBe("+89.0");
  });
});

describe("boundTable", () => {
  it("leaves a table of 64 × 64 whole", () => {
    const values = new Array<number>(4096).fill(1);
    const of = change(
      "Map",
      side([64, 64], [], values),
      side(
        [64, 64],
        [],
        values.map(() => 2),
      ),
    );
    expect(boundTable(of, null)).toEqual({ change: of, coverage: null, leftOut: null });
  });

  it("of a giant table keeps the lines that hold a change, with their points, values and coverage, and says so", () => {
    const [nx, ny] = [16, 4096];
    const values = Array.from({ length: nx * ny }, (_, at) => at);
    const [p, q] = [5 + nx * 4000, 7 + nx * 12];
    const after = values.map((value, at) => (at === p || at === q ? -1 : value));
    const coverage = {
      ...{ name: "Block", dims: [nx, ny], secondsByCell: values, visitsByCell: values, secondsOutside: 0 },
      ...{ changedCells: 2, changedVisited: 1, changedNeverVisited: [p], links: [] },
    };
    const bound = boundTable(
      change("Block", side([nx, ny], [], values), side([nx, ny], [], after)),
      coverage,
    );
    expect(bound.leftOut).toBe(
      "A table of 65\u202f536 cells: only lines that hold a change are drawn, 2 of 16 × 2 of 4\u202f096.",
    );
    expect(viewOf(bound.change).y.points).toEqual(["12", "4\u202f000"]);
    // x 5 and 7, y 12 and 4000, x fastest.
    expect(bound.change.before?.values).toEqual([5 + nx * 12, q, p, 7 + nx * 4000]);
    expect(bound.change.changes.map(({ index }) => index)).toEqual([
      [1, 0],
      [0, 1],
    ]);
    expect(bound.coverage).toMatchObject({
      dims: [2, 2],
      secondsByCell: [197, q, p, 64007],
      changedNeverVisited: [2],
    });
  });

  it("stays bounded when every cell changed, and says how many are drawn", () => {
    const values = new Array<number>(1024 * 64).fill(1);
    const bound = boundTable(
      change(
        "B",
        side([1024, 64], [], values),
        side(
          [1024, 64],
          [],
          values.map(() => 2),
        ),
      ),
      null,
    );
    expect(bound.change.after?.values.length).toBeLessThanOrEqual(MOST_CELLS);
    expect(bound.change.changes).toHaveLength(bound.change.after?.values.length ?? -1);
    expect(bound.leftOut).toContain("Of 65\u202f536 changed cells 8\u202f192 are drawn");
  });
});

describe("curveView", () => {
  const curve = (points: number[], values: (number | string)[]) =>
    side([points.length], [axis(points)], values);

  it("turns a falling axis so that it rises, values with it", () => {
    expect(curveView(curve([3, 2, 1], [30, 20, 10]), null)).toEqual({
      a: { x: [1, 2, 3], y: [10, 20, 30] },
      b: null,
      byPlace: false,
    });
  });

  it("draws over places where points neither rise nor fall, on both sides alike", () => {
    expect(curveView(curve([1, 3, 2], [1, 2, 3]), curve([1, 2, 3], [1, 2, 3]))).toMatchObject({
      byPlace: true,
      b: { x: [0, 1, 2] },
    });
  });

  it("has no line for texts", () => {
    expect(curveView(curve([1, 2], ["a", "b"]), null)).toBeNull();
  });
});
