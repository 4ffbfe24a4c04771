import { describe, expect, it } from "vitest";
import type { CharacteristicChange } from "@/lib/calibration/changes/types";
import { coverageOf } from "@/lib/calibration/coverage/coverage";
import type { AxisLink, CoverageChannel, CoverageRun } from "@/lib/calibration/coverage/types";
import { change, changeSet, side } from "@/tests/support/change-set-sample";

const LINKS: AxisLink[] = [
  { quantity: "quantity_0", channel: "engine_speed", by: "title" },
  { quantity: "quantity_1", channel: "manifold_pressure", by: "hand" },
];
const X = [0, 1000, 2000, 3000];
const Y = [50, 100];

const flat = (n: number, value: number) => Array.from({ length: n }, () => value);
/** A curve or map of which every cell changed. */
function table(name: string, ...points: number[][]): CharacteristicChange {
  const cells = points.reduce((n, axis) => n * axis.length, 1);
  return change(name, side(flat(cells, 1), ...points), side(flat(cells, 2), ...points));
}

/** A run of `n` samples at `rateHz`; each channel a function of time. */
function run(
  n: number,
  rateHz: number,
  of: Record<string, (t: number) => number>,
  unit: Record<string, string> = { engine_speed: "1/min", manifold_pressure: "kPa" },
): CoverageRun {
  const timeS = Float64Array.from({ length: n }, (_, i) => i / rateHz);
  const channels = new Map<string, CoverageChannel>(
    Object.entries(of).map(([name, value]) => [name, { values: timeS.map(value), unit: unit[name] ?? "" }]),
  );
  return { id: "r", timeS, channels };
}

const covered = (one: CharacteristicChange, runs: CoverageRun[], links = LINKS) =>
  coverageOf(changeSet([one]), runs, links);
const only = (one: CharacteristicChange, runs: CoverageRun[], links = LINKS) => {
  const { maps, notTold } = covered(one, runs, links);
  expect(notTold).toEqual([]);
  return maps[0];
};

describe("Seconds", () => {
  it("of a steady ramp are the areas of the hat functions", () => {
    // 0 to 3,000 at 100 a second: a hat of half width 1,000 has the area 10 s, half a hat 5 s. Kinks fall on samples, so it is exact.
    const map = only(table("c", X), [run(3001, 100, { engine_speed: (t) => 100 * t })]);
    expect(map.dims).toEqual([4]);
    for (const [k, area] of [5, 10, 10, 5].entries()) expect(map.secondsByCell[k]).toBeCloseTo(area, 9);
    expect(map.secondsOutside).toBe(0);
    expect(map.visitsByCell).toEqual([1, 1, 1, 1]);
  });

  it("held in the middle of four cells are shared in quarters, on a point they are its own", () => {
    const middle = run(401, 100, { engine_speed: () => 1500, manifold_pressure: () => 75 });
    const map = only(table("m", X, Y), [middle]);
    const quarters = [0, 1, 1, 0, 0, 1, 1, 0];
    for (const [k, area] of quarters.entries()) expect(map.secondsByCell[k]).toBeCloseTo(area, 9);
    expect(map.changedNeverVisited).toEqual([0, 3, 4, 7]);
    const on = only(table("m", X, Y), [
      run(401, 100, { engine_speed: () => 2000, manifold_pressure: () => 100 }),
    ]);
    expect(on.secondsByCell[6]).toBeCloseTo(4, 9);
    expect(on.visitsByCell).toEqual([0, 0, 0, 0, 0, 0, 1, 0]);
  });

  it("beyond an end belong to the last cell, and are told apart", () => {
    const map = only(table("c", X), [run(201, 100, { engine_speed: (t) => (t < 0.995 ? 3400 : 3000) })]);
    expect(map.secondsByCell[3]).toBeCloseTo(2, 9);
    // Samples 0 to 99 lie beyond: 99 whole steps and the half one at the start.
    expect(map.secondsOutside).toBeCloseTo(0.995, 9);
    const single = only(table("one", [2000]), [run(101, 100, { engine_speed: () => 5000 })]);
    expect(single).toMatchObject({ secondsOutside: 0, changedVisited: 1 });
  });

  it("of gaps are nobody's", () => {
    const steady = run(201, 100, { engine_speed: () => 1000 });
    const times = steady.timeS.map((t, i) => (i > 100 ? t + 2 : t));
    const map = only(table("c", X), [{ ...steady, timeS: times }]);
    expect(map.secondsByCell[1]).toBeCloseTo(1.99, 9);
    // Three times the usual step is still a step, more is a gap.
    const late = (more: number) => steady.timeS.map((t, i) => (i > 100 ? t + more : t));
    expect(only(table("c", X), [{ ...steady, timeS: late(0.0199) }]).secondsByCell[1]).toBeCloseTo(2.0199, 9);
    expect(only(table("c", X), [{ ...steady, timeS: late(0.0201) }]).secondsByCell[1]).toBeCloseTo(1.99, 9);
  });

  it("of missing samples are nobody's", () => {
    const holes = run(201, 100, { engine_speed: (t) => (t > 0.495 && t < 1.495 ? Number.NaN : 1000) });
    // Samples 50 to 149 are missing.
    expect(only(table("c", X), [holes]).secondsByCell[1]).toBeCloseTo(1, 9);
  });

  it("from 0.1 s of weight on make a cell visited", () => {
    const short = (n: number) => only(table("c", X), [run(n, 100, { engine_speed: () => 1000 })]);
    expect(short(10).changedVisited).toBe(0);
    expect(short(12).changedVisited).toBe(1);
  });
});

describe("Visits", () => {
  const at = (rateHz: number, seconds: number, value: (t: number) => number) =>
    only(table("c", X), [run(seconds * rateHz + 1, rateHz, { engine_speed: value })]).visitsByCell;

  it("count entries after at least half a second away", () => {
    expect(at(100, 4, (t) => (t > 1 && t < 2 ? 0 : 2000))).toEqual([1, 0, 2, 0]);
    expect(at(100, 4, (t) => (t > 1 && t < 1.3 ? 0 : 2000))).toEqual([1, 0, 1, 0]);
  });

  it("do not count anew what a slow log shows in one place", () => {
    expect(at(1, 20, () => 2000)).toEqual([0, 0, 1, 0]);
  });

  it("begin anew with every run", () => {
    const one = run(301, 100, { engine_speed: () => 2000 });
    expect(only(table("c", X), [one, one, one]).visitsByCell).toEqual([0, 0, 3, 0]);
  });
});

describe("Channels", () => {
  it("are converted into the unit of the axis", () => {
    const hecto = table("h", [500, 1000]);
    for (const one of [hecto.before, hecto.after]) if (one) one.axes[0].unit = "hPa";
    const links: AxisLink[] = [{ quantity: "quantity_0", channel: "manifold_pressure", by: "hand" }];
    // 75 kPa = 750 hPa, the middle.
    const map = only(hecto, [run(201, 100, { manifold_pressure: () => 75 })], links);
    expect(map.secondsByCell[0]).toBeCloseTo(1, 9);
    expect(map.secondsByCell[1]).toBeCloseTo(1, 9);
  });

  it("are read at the run's times from their own, within half a second", () => {
    const base = run(201, 100, { manifold_pressure: () => 50 });
    const own = (step: number): CoverageChannel => {
      const timeS = Float64Array.from({ length: 2 / step + 1 }, (_, i) => i * step);
      return { timeS, values: timeS.map((t) => 1000 * t), unit: "1/min" };
    };
    const with_ = (step: number) => ({ ...base, channels: new Map([["engine_speed", own(step)]]) });
    // 0 to 2,000 in 2 s: hats of half width 1 s.
    const map = only(table("c", X), [with_(0.5)]);
    for (const [k, area] of [0.5, 1, 0.5, 0].entries()) expect(map.secondsByCell[k]).toBeCloseTo(area, 9);
    // The own samples between 0.4 and 1.6 s are missing from a channel of 10 Hz, so that only 0 to 0.4 and 1.6 to 2 s are known.
    const tenth = own(0.1);
    const kept = (list: Float64Array) => list.filter((_, i) => i <= 4 || i >= 16);
    const holed = { values: kept(tenth.values), timeS: kept(tenth.timeS ?? tenth.values), unit: "1/min" };
    const partly = only(table("c", X), [{ ...base, channels: new Map([["engine_speed", holed]]) }]);
    expect(partly.secondsByCell.reduce((a, b) => a + b)).toBeCloseTo(0.8 + 0.01, 9);
    const seldom = covered(table("c", X), [with_(1)]).notTold[0];
    expect(seldom).toMatchObject({ code: "not_recorded", reason: expect.stringContaining("every 1 s only") });
  });

  it("come from those runs that recorded them", () => {
    const told = run(201, 100, { engine_speed: () => 1000 });
    const dumb = { ...run(201, 100, { manifold_pressure: () => 50 }), id: "s" };
    const got = covered(table("c", X), [dumb, told, dumb]);
    expect(got.maps[0].secondsByCell[1]).toBeCloseTo(2, 9);
    expect(got.runs).toEqual(["s", "r", "s"]);
  });
});

describe("What can't be told", () => {
  const idle = run(201, 100, { engine_speed: () => 1000 });
  const why = (one: CharacteristicChange, runs = [idle], links = LINKS) => {
    const { maps, notTold, ...sums } = covered(one, runs, links);
    expect(maps).toEqual([]);
    return { ...notTold[0], sums };
  };

  it("names an axis without a link, and counts its cells as not visited", () => {
    const got = why(table("m", X, Y), [idle], LINKS.slice(0, 1));
    expect(got).toMatchObject({
      code: "no_link",
      changedCells: 8,
      reason: "No channel is linked to quantity_1, an axis of m.",
      sums: { changedCells: 8, changedVisited: 0 },
    });
    const nameless = table("m", X);
    for (const one of [nameless.before, nameless.after]) if (one) one.axes[0].inputQuantity = null;
    expect(why(nameless).reason).toContain("m/x");
    const byPlace: AxisLink[] = [{ quantity: "m/x", channel: "engine_speed", by: "hand" }];
    expect(only(nameless, [idle], byPlace).links).toEqual(byPlace);
  });

  it("names a channel that no run recorded, and a unit that does not convert", () => {
    expect(why(table("m", X, Y)).code).toBe("not_recorded");
    expect(why(table("m", X, Y)).reason).toContain("manifold_pressure, linked to quantity_1");
    expect(why(table("c", X), []).reason).toBe("There is no usable run.");
    expect(why(table("c", X), [run(5, 0.5, { engine_speed: () => 1000 })]).reason).toContain(
      "more than 1 s apart",
    );
    const odd = run(201, 100, { engine_speed: () => 1000 }, { engine_speed: "mg/stroke" });
    expect(why(table("c", X), [odd])).toMatchObject({
      code: "unit",
      reason: expect.stringContaining("has the unit 1/min, but engine_speed has the unit mg/stroke"),
    });
  });

  it("holds an absolute pressure apart from a gauge pressure", () => {
    const absolute = table("p", [50, 100]);
    for (const one of [absolute.before, absolute.after]) if (one) one.axes[0].unit = "kPa abs";
    const link = (channel: string): AxisLink[] => [{ quantity: "quantity_0", channel, by: "hand" }];
    const gauge = run(201, 100, { manifold_pressure_gauge: () => 75 }, { manifold_pressure_gauge: "kPa" });
    expect(why(absolute, [gauge], link("manifold_pressure_gauge")).code).toBe("unit");
    const right = run(201, 100, { manifold_pressure: () => 75 });
    expect(only(absolute, [right], link("manifold_pressure")).changedVisited).toBe(2);
  });

  it("refuses axis points that fall, repeat or are no numbers", () => {
    for (const points of [
      [0, 2000, 1000],
      [0, 1000, 1000],
    ])
      expect(why(table("c", points)).code).toBe("axis_points");
    const words = table("c", X);
    for (const one of [words.before, words.after]) if (one) one.axes[0].points = [0, "on", 2000, null];
    expect(why(words).code).toBe("axis_points");
  });

  it("leaves what has no axes out of the share, and what is gone altogether", () => {
    const value = change("limit", side([1]), side([2]));
    const shared = change("axis", side([1, 2]), side([1, 3]), { type: "AXIS_PTS" });
    const gone = change("gone", side([1, 2], [0, 1]), null, { kind: "removed" });
    const unlisted = { ...table("huge", X), before: null, after: null, changes: [], changed: 4 };
    const moved = { ...unlisted, name: "moved", cells: 9, changed: 0, axisChanged: true };
    const got = coverageOf(changeSet([value, shared, gone, unlisted, moved]), [idle], LINKS);
    expect(got.notTold.map(({ name, code }) => [name, code])).toEqual([
      ["limit", "no_axes"],
      ["axis", "no_axes"],
      ["huge", "not_listed"],
      ["moved", "not_listed"],
    ]);
    expect(got).toMatchObject({ changedCells: 4 + 9, changedVisited: 0 });
  });
});

describe("Changed cells", () => {
  const idle = run(201, 100, { engine_speed: () => 1000, manifold_pressure: () => 50 });
  it("are those of another value or at a moved axis point", () => {
    const before = side([1, 1, 1, 1, 1, 1, 1, 1], X, Y);
    const after = side([1, 1, 1, 1, 1, 1, 1, 2], [0, 1000, 2000, 3100], Y);
    const got = only(change("m", before, after, { axisChanged: true }), [idle]);
    // The last column along x, whose point moved; one of its two cells changed too.
    expect(got).toMatchObject({ changedCells: 2, changedVisited: 0, changedNeverVisited: [3, 7] });
    const here = change("m", before, side([1, 9, 1, 1, 1, 1, 1, 1], X, Y));
    expect(only(here, [idle])).toMatchObject({ changedCells: 1, changedVisited: 1 });
  });

  it("are all where the table is new or has another shape", () => {
    const grown = change("c", side([1, 1], [0, 1]), side([1, 1, 1, 1], X), { shapeChanged: true });
    expect(only(grown, [idle]).changedCells).toBe(4);
    const added = change("c", null, side([1, 1, 1, 1], X), { kind: "added" });
    expect(only(added, [idle]).changedCells).toBe(4);
  });
});
