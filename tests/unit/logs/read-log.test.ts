import { readFileSync } from "node:fs";
import { gunzipSync } from "node:zlib";
import { describe, expect, test } from "vitest";
import { FileRefusedError } from "@/lib/errors";
import { requireRoadSpeed } from "@/lib/logs/channels/road-speed";
import { readLog } from "@/lib/logs/read-log";
import type { LogTable } from "@/lib/logs/types";

const golden = (name: string) => readFileSync(new URL(`../../golden/logs/${name}.gz`, import.meta.url));
const values = (table: LogTable, channel: string) => {
  const found = table.channels.find((candidate) => candidate.channel === channel);
  if (!found) throw new Error(`no ${channel}`);
  return found.values;
};

/** Truth of the set: tests/golden/README.md, "logs/dialects". Speed resolution of each file as written, in m/s. */
const DIALECTS = [
  ["d01_comma_bracket_units.csv", "utf-8", ",", ".", "s", 1030],
  ["d02_semicolon_decimal_comma_crlf.csv", "utf-8", ";", ",", "s", 1030],
  ["d03_unit_row_bom.csv", "utf-8 BOM", ",", ".", "s", 1030],
  ["d04_utf16_tab.csv", "utf-16le", "\t", ".", "s", 1030],
  ["d05_latin1_german.csv", "windows-1252", ";", ",", "s", 1030],
  ["d06_mph_psi_fahrenheit.csv", "utf-8", ",", ".", "s", 1030],
  ["d07_bar_clock_midnight.csv", "utf-8", ",", ".", "clock", 1030],
  ["d08_epoch_ms_out_of_order.csv", "utf-8", ",", ".", "epoch_ms", 1030],
  ["d09_duplicates_gaps.csv", "utf-8", ",", ".", "s", 1012],
  ["d10_comments_truncated.csv", "utf-8", ",", ".", "s", 1029],
  ["d11_iso_time_mps_shuffled.csv", "utf-8", ",", ".", "iso", 1030],
  ["d12_snake_blank_repeat_header.csv", "utf-8", ",", ".", "s", 1030],
] as const;

const CHANNELS = [
  "wheel_speed_undriven",
  "wheel_speed_driven",
  "gps_speed",
  "engine_speed",
  "pedal",
  "throttle",
  "manifold_pressure",
  "lambda",
  "ignition_advance",
  "knock_retard",
  "intake_temperature",
  "coolant_temperature",
  "exhaust_temperature",
  "gear",
  "latitude",
  "longitude",
  "altitude",
  "longitudinal_acceleration",
] as const;

/** Half a written step of the coarser unit, in canonical units (mph to 0.001, psi to 0.01, bar to 0.001, °F to 0.1). */
const TOLERANCE: Record<string, number> = {
  wheel_speed_undriven: 3e-4,
  wheel_speed_driven: 3e-4,
  gps_speed: 3e-4,
  manifold_pressure: 0.1,
  intake_temperature: 0.05,
  coolant_temperature: 0.05,
  exhaust_temperature: 0.05,
};

describe("one run written in twelve ways reads as the same run", () => {
  const reference = readLog(golden("dialects/d01_comma_bracket_units.csv"), { drive: "FWD" });

  test("known figures of the run (truth of the simulated set)", () => {
    expect(reference.time.rateHz).toBe(25);
    expect(reference.time.toS).toBeCloseTo(41.16, 9);
    expect(Math.max(...values(reference, "wheel_speed_undriven")) * 3.6).toBeCloseTo(141.56, 6);
    expect(Math.max(...values(reference, "engine_speed"))).toBe(6595);
    expect(Math.max(...values(reference, "manifold_pressure"))).toBeCloseTo(226.4, 9);
    expect(Math.max(...values(reference, "exhaust_temperature"))).toBe(844);
    expect((values(reference, "wheel_speed_undriven")[125] ?? 0) * 3.6).toBeCloseTo(63.11, 6);
  });

  test.each(DIALECTS)("%s", (name, encoding, delimiter, decimal, form, rows) => {
    const table = readLog(golden(`dialects/${name}`), { drive: "FWD" });
    expect(table).toMatchObject({ encoding, delimiter, decimal, rowsRead: rows });
    expect(table.time.form).toBe(form);
    expect(table.channels.map((channel) => channel.channel).sort()).toEqual([...CHANNELS].sort());
    const rowAt = new Map(Array.from(reference.timeS, (t, i) => [t, i]));
    for (const channel of CHANNELS) {
      const [want, got] = [values(reference, channel), values(table, channel)];
      let worst = 0;
      let compared = 0;
      table.timeS.forEach((t, i) => {
        const value = got[i] ?? Number.NaN;
        if (Number.isNaN(value)) return;
        compared++;
        worst = Math.max(worst, Math.abs(value - (want[rowAt.get(t) ?? -1] ?? Number.NaN)));
      });
      expect(compared, channel).toBeGreaterThan(0.4 * rows);
      expect(worst, channel).toBeLessThanOrEqual(TOLERANCE[channel] ?? 1e-9);
    }
  });

  test("time rises strictly in every dialect and findings are told", () => {
    const codes = (name: string) =>
      readLog(golden(`dialects/${name}`), { drive: "FWD" }).problems.map((p) => p.code);
    for (const [name] of DIALECTS) {
      const { timeS } = readLog(golden(`dialects/${name}`));
      expect(timeS.every((t, i) => i === 0 || t > (timeS[i - 1] ?? 0))).toBe(true);
    }
    expect(codes("d07_bar_clock_midnight.csv")).toContain("midnight_passed");
    expect(codes("d08_epoch_ms_out_of_order.csv")).toContain("rows_out_of_order");
    expect(codes("d09_duplicates_gaps.csv")).toEqual(["repeated_time", "gaps"]);
    expect(codes("d12_snake_blank_repeat_header.csv")).toContain("repeated_header");
    expect(codes("d01_comma_bracket_units.csv")).toEqual([]);
  });

  test("the two gaps of d09 lie where the set says (4.0-4.2 s and 9.0-9.5 s cut out)", () => {
    const { gaps } = readLog(golden("dialects/d09_duplicates_gaps.csv")).time;
    expect(gaps).toEqual([
      { fromS: 3.96, toS: 4.2 },
      { fromS: 8.96, toS: 9.52 },
    ]);
  });

  test("the cut-off last row of d10 is refused with its line", () => {
    const { rowsRefused } = readLog(golden("dialects/d10_comments_truncated.csv"));
    expect(rowsRefused).toEqual([{ row: 1038, reason: "has 11 of 19 cells" }]);
  });

  test("front and rear wheel speeds stay free channels while the driven axle is unknown", () => {
    const table = readLog(golden("dialects/d05_latin1_german.csv"));
    expect(
      table.channels.filter((channel) => channel.axle).map((channel) => [channel.axle, channel.channel]),
    ).toEqual([
      ["rear", null],
      ["front", null],
    ]);
    const rear = readLog(golden("dialects/d05_latin1_german.csv"), { drive: "RWD" });
    expect(rear.channels[0]?.channel).toBe("wheel_speed_driven");
  });
});

const refusal = (act: () => unknown) => {
  try {
    act();
  } catch (error) {
    if (error instanceof FileRefusedError) return error.code;
    throw error;
  }
  return "read";
};

describe("each unusable file is refused with its reason (truth of the simulated set)", () => {
  test.each([
    ["b01_empty.csv", "empty_file"],
    ["b02_header_only.csv", "no_data_rows"],
    ["b03_no_time.csv", "no_time_column"],
    ["b04_time_all_equal.csv", "time_not_increasing"],
    ["b05_text_in_numbers.csv", "non_numeric_values"],
    ["b06_two_samples.csv", "too_few_samples"],
    ["b07_binary_junk.csv", "not_text"],
    ["b08_no_speed.csv", "no_speed_channel"],
    ["b09_speed_all_zero.csv", "speed_all_zero"],
    ["b10_nan_flood.csv", "too_many_missing"],
  ])("%s: %s", (name, reason) => {
    const bytes = gunzipSync(golden(`broken/${name}`));
    expect(refusal(() => requireRoadSpeed(readLog(bytes)))).toBe(reason);
  });
});
