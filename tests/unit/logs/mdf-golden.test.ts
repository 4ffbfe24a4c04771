import { gzipSync } from "node:zlib";
import { describe, expect, it, test } from "vitest";
import { readLog } from "@/lib/logs/read-log";
import { parseUnit, toCanonical } from "@/lib/units/unit-text";
import { columnOf, goldenLog, refusalOf } from "@/tests/support/golden-log";

/** What the outside library that wrote the files reads from them (tests/golden/README.md, logs/mdf). */
interface Facts {
  groups: {
    cycles: number;
    channels: {
      name: string;
      type: number;
      data_type: number;
      unit: string;
      n: number;
      first: number | string;
      last: number | string;
      min?: number;
      max?: number;
      sum?: number;
      t0: number;
      t1: number;
    }[];
  }[];
}

const facts = JSON.parse(new TextDecoder().decode(goldenLog("mdf/facts.json"))) as Record<string, Facts>;
const FILES = ["made_dt.mf4", "made_dz0_deflate.mf4", "made_dz1_transposed.mf4"];

describe.each(FILES)("%s reads as the outside library reads it", (name) => {
  const table = readLog(goldenLog(`mdf/${name}`));
  const channels = facts[name].groups.flatMap((group) =>
    group.channels.filter((c) => c.type === 0).map((c) => [c.name, c, group.cycles] as const),
  );

  test.each(channels)("%s", (column, fact, cycles) => {
    const channel = columnOf(table, column);
    const timeS = channel.timeS ?? table.timeS;
    const unit = parseUnit(fact.unit);
    const convert = (value: number) => (channel.channel && unit ? toCanonical(value, unit) : value);
    const present = channel.values.filter((value) => !Number.isNaN(value));
    expect(channel.unitFound).toBe(fact.unit);
    expect(channel.values.length).toBe(cycles);
    expect(present.length).toBe(fact.n);
    expect(present[0]).toBeCloseTo(convert(Number(fact.first)), 9);
    expect(present[present.length - 1]).toBeCloseTo(convert(Number(fact.last)), 9);
    expect(Math.min(...present)).toBeCloseTo(convert(fact.min ?? 0), 9);
    expect(Math.max(...present)).toBeCloseTo(convert(fact.max ?? 0), 9);
    const sum = present.reduce((total, value) => total + value, 0);
    const scale = channel.channel && unit ? unit.factor : 1;
    expect(sum / scale).toBeCloseTo(fact.sum ?? 0, 5);
    expect(timeS[0]).toBe(fact.t0);
    expect(timeS[timeS.length - 1]).toBeCloseTo(fact.t1, 9);
  });

  it("the rows are those of the road speed; the slow group keeps its own times", () => {
    expect(table).toMatchObject({
      format: "mdf4",
      encoding: null,
      delimiter: null,
      decimal: null,
      rowsRead: 2000,
    });
    expect(table.time).toMatchObject({ column: "time", form: "s", rateHz: 100, gaps: [] });
    expect(table.time.from).toMatch(/^2026-12-01T03:24:53\.67\dZ$/);
    expect(columnOf(table, "v_vehicle").timeS).toBeUndefined();
    expect(columnOf(table, "T_coolant").timeS?.length).toBe(200);
  });

  it("closed forms: v = 30 + 4t km/h to one raw step, n = 2000 + 100t, the text channel left out with its ends", () => {
    const speed = columnOf(table, "v_vehicle").values;
    const engine = columnOf(table, "n_engine").values;
    table.timeS.forEach((t, i) => {
      expect(Math.abs(speed[i] * 3.6 - (30 + 4 * t))).toBeLessThan(0.01);
      expect(engine[i]).toBeCloseTo(2000 + 100 * t, 3);
    });
    expect(table.leftOut).toEqual(["state_text"]);
    expect(table.problems[0].message).toBe(
      'Text is not read: "state_text" (first "state 0", last "state 1").',
    );
  });

  it("exactly samples 50 to 59 of the invalidated channel are missing", () => {
    const missing = Array.from(columnOf(table, "T_coolant").values).flatMap((value, i) =>
      Number.isNaN(value) ? [i] : [],
    );
    expect(missing).toEqual([50, 51, 52, 53, 54, 55, 56, 57, 58, 59]);
  });

  it("packed in gzip it reads the same", () => {
    expect(readLog(gzipSync(goldenLog(`mdf/${name}`)))).toEqual(table);
  });
});

test("the cut file is refused: its structure lies past its end", () => {
  expect(refusalOf(() => readLog(goldenLog("mdf/made_dt_cut_short.mf4")))).toBe("file_damaged");
});
