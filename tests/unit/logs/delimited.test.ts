import { gzipSync } from "node:zlib";
import fc from "fast-check";
import Papa from "papaparse";
import { describe, expect, it } from "vitest";
import { FileRefusedError } from "@/lib/errors";
import { splitQuoted } from "@/lib/logs/delimited/delimited-rows";
import { logReport } from "@/lib/logs/log-report";
import { parseNumber } from "@/lib/logs/parse-number";
import { LOG_REFUSALS, type ReadLogOptions, readLog } from "@/lib/logs/read-log";

const bytes = (text: string) => new TextEncoder().encode(text);
const read = (text: string, options?: ReadLogOptions) => readLog(bytes(text), options);
const refusal = (act: () => unknown) => {
  try {
    act();
  } catch (error) {
    if (error instanceof FileRefusedError) {
      expect(LOG_REFUSALS).toContain(error.code);
      return error.code;
    }
    throw error;
  }
  return "read";
};
/** Twenty rows at 10 Hz: time, then one value a column. */
const rows = (head: string, row: (i: number) => string, n = 20) =>
  [head, ...Array.from({ length: n }, (_, i) => row(i))].join("\n");
const channel = (text: string, options?: ReadLogOptions) => read(text, options).channels[0];

describe("numbers", () => {
  it("reads every way in which JavaScript writes a number, to the last bit (property)", () => {
    fc.assert(
      fc.property(fc.double({ noNaN: true, noDefaultInfinity: true }), (value) => {
        const text = String(value);
        expect(parseNumber(text, ".")).toBe(Number(text));
        expect(parseNumber(text.replace(".", ","), ",")).toBe(Number(text));
      }),
      { numRuns: 2000, seed: 1 },
    );
  });
  it("rounds decimals exactly as the language does (property: up to 15 digits, up to 10 places)", () => {
    fc.assert(
      fc.property(fc.integer({ min: -999_999_999, max: 999_999_999 }), fc.nat(10), (digits, places) => {
        const text = (digits / 10 ** places).toFixed(places);
        expect(parseNumber(text, ".")).toBe(Number(text));
      }),
      { numRuns: 2000, seed: 2 },
    );
  });
  it.each([
    ["1,648", ".", 1648],
    ["1,234.5", ".", 1234.5],
    ["1.234,5", ",", 1234.5],
    ["1.648", ",", 1648],
    ["12,5", ".", null],
    ["12.5", ",", null],
    ["0x10", ".", null],
    ["1e3", ".", 1000],
    ["+3", ".", 3],
    ["  7 ", ".", 7],
    ["1 2", ".", null],
    ["12:30", ".", null],
    ["on", ".", null],
  ] as const)("%j with decimal %j", (text, decimal, value) => {
    expect(parseNumber(text, decimal)).toBe(value);
  });
  it.each(["", " ", "NaN", "nan", "NA", "N/A", "--", "null", "Inf", "-inf"])("%j is missing", (text) => {
    expect(parseNumber(text, ".")).toBeNaN();
  });
});

describe("round trip: what a CSV writer of another hand wrote is read back (property)", () => {
  it("any delimiter, decimal sign, quoting and line end", () => {
    const table = fc.record({
      delimiter: fc.constantFrom(",", ";", "\t", "|"),
      decimal: fc.constantFrom(".", ","),
      quotes: fc.boolean(),
      newline: fc.constantFrom("\n", "\r\n", "\r"),
      values: fc.array(
        fc.tuple(fc.integer({ min: 0, max: 9999 }), fc.option(fc.integer({ min: 1, max: 30_000 }))),
        {
          minLength: 10,
          maxLength: 40,
        },
      ),
    });
    fc.assert(
      fc.property(table, ({ delimiter, decimal, quotes, newline, values }) => {
        // A decimal comma between commas must be quoted; two places keep it apart from a thousands mark.
        const write = (x: number) => x.toFixed(2).replace(".", decimal);
        const data = values.map(([speed, rpm], i) => [
          write(i / 10),
          write(speed / 100),
          rpm === null ? "" : String(rpm),
        ]);
        const text = Papa.unparse([["Time [s]", "GPS speed [m/s]", "Engine speed [rpm]"], ...data], {
          delimiter,
          newline,
          quotes: quotes || delimiter === decimal,
        });
        const got = read(text);
        expect(got.rowsRead).toBe(values.length);
        expect(got.decimal).toBe(decimal);
        expect(Array.from(got.channels[0].values)).toEqual(
          values.map(([speed]) => Number((speed / 100).toFixed(2))),
        );
        // A column without one value is no channel; any other gives its numbers and gaps back.
        if (values.some(([, rpm]) => rpm !== null)) {
          expect(Array.from(got.channels[1].values)).toEqual(values.map(([, rpm]) => rpm ?? Number.NaN));
        }
      }),
      { numRuns: 200, seed: 3 },
    );
  });
});

describe("quotes", () => {
  it("a line is split as papaparse splits it (property: any cells without a line end)", () => {
    const cell = fc.string({ unit: fc.constantFrom("a", "1", ",", ";", '"', " ", "."), maxLength: 6 });
    fc.assert(
      fc.property(
        fc.array(cell, { minLength: 1, maxLength: 6 }),
        fc.constantFrom(",", ";"),
        (cells, delimiter) => {
          const line = Papa.unparse([cells], { delimiter });
          expect(splitQuoted(line, delimiter)).toEqual(
            Papa.parse<string[]>(line, { delimiter }).data[0] ?? [""],
          );
        },
      ),
      { numRuns: 1000, seed: 4 },
    );
  });
  it("text after a closing quote makes a cell text, never a number", () => {
    expect(splitQuoted('"1"2,3', ",")).toEqual(['"1"2', "3"]);
  });
  it("a quoted cell may hold a line end; line numbers of refused rows stay right", () => {
    const text = rows(
      '"Time [s]","GPS speed [km/h]",Note',
      (i) => `${i / 10},36.5,${i === 2 ? '"two\nlines"' : i === 5 ? "x,y" : "ok"}`,
    );
    const table = read(text);
    expect(table.rowsRead).toBe(19);
    expect(table.rowsRefused).toEqual([{ row: 8, reason: "has 4 cells where the header has 3" }]);
  });
});

describe("doubt is a refusal or a problem entry, never a silent guess", () => {
  it("both decimal signs in one file are refused", () => {
    expect(refusal(() => read(rows("Time;GPS speed [km/h];x", (i) => `${i},10;12.55;1,25`)))).toBe(
      "ambiguous_decimal",
    );
  });
  it("numbers that can be thousands or decimals, with nothing to decide it, are refused; a key decides", () => {
    const text = rows("t [ms];Engine speed [rpm]", (i) => `${i * 100};1,${600 + i}`);
    expect(refusal(() => read(text))).toBe("ambiguous_decimal");
    expect(channel(text, { key: { decimal: "." } })?.values[3]).toBe(1603);
    expect(channel(text, { key: { decimal: "," } })?.values[3]).toBe(1.603);
  });
  it("a speed without a unit stays a free channel with a problem entry; a key settles it", () => {
    const text = rows("Time [s],GPS speed", (i) => `${i / 10},${30 + i}`);
    expect(channel(text)?.channel).toBeNull();
    expect(read(text).problems.map((p) => p.code)).toContain("unit_unknown");
    const keyed = channel(text, { key: { columns: { "GPS speed": { channel: "gps_speed", unit: "mph" } } } });
    expect(keyed?.channel).toBe("gps_speed");
    expect(keyed?.values[0]).toBeCloseTo(30 * 0.44704, 12);
  });
  it("a unit that does not fit the quantity is not converted", () => {
    const text = rows("Time [s],Coolant temp [bar]", (i) => `${i / 10},90.5`);
    expect(channel(text)).toMatchObject({ channel: null, unitFound: "bar", unit: "bar" });
    expect(read(text).problems[0].code).toBe("unit_does_not_fit");
  });
  it("gauge and absolute pressure are told apart by unit, title and values", () => {
    const of = (title: string, kpa: (i: number) => number) => {
      const table = read(rows(`Time [s],${title}`, (i) => `${i / 10},${kpa(i)}`));
      return [table.channels[0].channel, table.problems.map((p) => p.code).join()];
    };
    expect(of("Manifold pressure [kPa]", (i) => 35 + i)).toEqual(["manifold_pressure", ""]);
    expect(of("MAP [kPa]", (i) => 35 + i)).toEqual(["manifold_pressure", ""]);
    expect(of("Boost [kPa gauge]", (i) => 20 + i)).toEqual(["manifold_pressure_gauge", ""]);
    expect(of("Boost [kPa]", (i) => i - 5)).toEqual(["manifold_pressure_gauge", "pressure_taken_as_gauge"]);
    expect(of("Ladedruck [kPa]", (i) => 95 + i)).toEqual(["manifold_pressure", "pressure_taken_as_absolute"]);
  });
  it("a speed of open kind is taken as driven wheel speed and told", () => {
    const table = read(rows("Time [s],Vehicle speed [km/h]", (i) => `${i / 10},36`));
    expect(table.channels[0].channel).toBe("wheel_speed_driven");
    expect(table.problems.map((p) => p.code)).toEqual(["speed_kind_assumed"]);
  });
  it("target and steering columns are not mistaken for the quantity", () => {
    const titles = [
      "Lambda target [-]",
      "Steering wheel angle [deg]",
      "Brake pedal [%]",
      "Boost target [kPa]",
      "T oil [°C]",
    ];
    const table = read(rows(`Time [s],${titles.join(",")}`, (i) => `${i / 10},1.5,2.5,3.5,4.5,5.5`));
    expect(table.channels.map((c) => c.channel)).toEqual(titles.map(() => null));
    expect(table.time.column).toBe("Time [s]");
  });
  it("whole-number time without a unit is told as an assumption", () => {
    const table = read(rows("Time,GPS speed [km/h]", (i) => `${40 * i},36.5`));
    expect(table.time).toMatchObject({ form: "ms", rateHz: 25 });
    expect(table.problems.map((p) => p.code)).toEqual(["time_unit_assumed"]);
  });
  it("text inside a numeric column counts as missing and is told with its line", () => {
    const table = read(rows("Time [s],GPS speed [km/h]", (i) => `${i / 10},${i === 4 ? "ERR" : 36.5}`));
    expect(table.channels[0].values[4]).toBeNaN();
    expect(table.problems[0]).toMatchObject({ code: "text_in_column" });
    expect(table.problems[0].message).toContain("line 6");
  });
});

describe("time", () => {
  it("a long jump back splits the log and the longest piece is kept, told", () => {
    const text = rows("Time [s],GPS speed [km/h]", (i) => `${(i < 30 ? i : i - 30) / 10},${i}.5`, 80);
    const table = read(text);
    expect(table.rowsRead).toBe(50);
    expect(table.channels[0].values[0]).toBeCloseTo(30.5 / 3.6, 12);
    expect(table.problems.map((p) => p.code)).toContain("time_jumps_back");
  });
  it("a time that slips in twice keeps its last row", () => {
    const table = read(
      rows("Time [s],GPS speed [m/s]", (i) => `${(i % 5 === 1 ? i - 1 : i) / 10},${i}.5`, 40),
    );
    expect(Array.from(table.channels[0].values.slice(0, 3))).toEqual([1.5, 2.5, 3.5]);
    expect(table.problems.map((p) => p.code)).toContain("repeated_time");
  });
  it.each([
    ["day first", (i: number) => `01.12.2030 23:59:59,${String(100 + i * 10).padStart(3, "0")}`, "iso"],
    ["underscores", (i: number) => `2030_12_01_23_59_59_${String(100 + i * 10).padStart(3, "0")}`, "iso"],
    ["offset", (i: number) => `2030-12-01T23:59:59.${String(100 + i * 10).padStart(3, "0")}+01:00`, "iso"],
    ["minutes and seconds", (i: number) => `04:59.${String(100 + i * 10).padStart(3, "0")}`, "clock"],
    ["month by name", (i: number) => `01-Dec-2030 23:59:59.${String(100 + i * 10).padStart(3, "0")}`, "iso"],
    ["slashes", (i: number) => `12/31/2030 23:59:59.${String(100 + i * 10).padStart(3, "0")}`, "iso"],
    [
      "forenoon and afternoon",
      (i: number) => `11:59:59.${String(100 + i * 10).padStart(3, "0")} PM`,
      "clock",
    ],
    ["epoch s", (i: number) => `1893495600.${String(100 + i * 10).padStart(3, "0")}`, "epoch_s"],
  ])("%s", (_, time, form) => {
    const table = read(rows("Time;GPS speed [m/s];Engine speed [rpm]", (i) => `${time(i)};30;2000`));
    expect(table.time.form).toBe(form);
    expect(table.time.toS).toBeCloseTo(0.19, 6);
    expect(table.time.rateHz).toBeCloseTo(100, 3);
  });
});

describe("titles", () => {
  it.each([
    ["v;n", "km/h;1/min", ["wheel_speed_driven", "engine_speed"]],
    ["RPM;Speed GPS", "[1/min];[km/h]", ["engine_speed", "gps_speed"]],
    ["Motordrehzahl;Ladedruck", "U/min;mbar", ["engine_speed", "manifold_pressure_gauge"]],
    ["TPS;APP;CLT;IAT", "%;%;°C;°F", ["throttle", "pedal", "coolant_temperature", "intake_temperature"]],
    ["Speed (OBD);Spark advance", "mph;°", ["wheel_speed_driven", "ignition_advance"]],
  ])("%s", (titles, units, channels) => {
    const width = channels.length;
    const text = rows(`Device Time;${titles}\ns;${units}`, (i) =>
      [i / 10, ...Array(width).fill(5)].join(";"),
    );
    expect(read(text).channels.map((c) => c.channel)).toEqual(channels);
  });
});

describe("a channel key against the file", () => {
  const text = rows("time [s];gps speed [km/h]", (i) => `${i};${i + 1}.345`);
  const codes = (decimal: "." | ",") => read(text, { key: { decimal } }).problems.map((p) => p.code);
  it("tells where the key's decimal sign is not the one that the cells show", () => {
    expect(codes(",")).toContain("key_decimal_disagrees");
    expect(codes(".")).not.toContain("key_decimal_disagrees");
  });
});

describe("containers and other formats", () => {
  const text = rows("Time [s],GPS speed [km/h]", (i) => `${i / 10},36.5`);
  it("gzip is read; a damaged or doubly packed file is refused", () => {
    const packed = gzipSync(text);
    expect(readLog(packed).rowsRead).toBe(20);
    expect(refusal(() => readLog(packed.subarray(0, 40)))).toBe("gzip_damaged");
    expect(refusal(() => readLog(gzipSync(packed)))).toBe("format_not_supported");
  });
  it("a packed file that grows beyond its bound is refused before it is held (10 MB in 10 kB)", () => {
    const bomb = gzipSync(new Uint8Array(10 * 1024 * 1024));
    expect(bomb.length).toBeLessThan(20_000);
    expect(refusal(() => readLog(bomb, { maxInflatedBytes: 1024 * 1024 }))).toBe("inflates_too_large");
  });
  it.each([
    ["ZIP / xlsx", "PK\u0003\u0004 rest"],
    ["other XML", '<?xml version="1.0"?><a></a>'],
    ["JSON", '{"a": 1}'],
  ])("%s is refused by name", (_, content) => {
    expect(refusal(() => read(content))).toBe("format_not_supported");
  });
  it("a file with more columns than any logger has is refused before memory is claimed", () => {
    const wide = rows(`Time [s],${"x,".repeat(3000)}y`, (i) => `${i / 10},${"1,".repeat(3000)}2`);
    expect(refusal(() => read(wide))).toBe("too_many_columns");
  });
  it("a first line sep=; states the delimiter", () => {
    expect(read(`sep=;\n${rows("Time [s];GPS speed [km/h]", (i) => `${i / 10};36.5`)}`).delimiter).toBe(";");
  });
  it("a key names columns of a log without titles", () => {
    const bare = Array.from({ length: 20 }, (_, i) => `${i / 10},${10 + i},${2000 + i}`).join("\n");
    expect(refusal(() => read(bare))).toBe("no_time_column");
    const key = {
      header_rows: 0,
      time: { column: "column 1", form: "s" },
      columns: { "column 2": { channel: "gps_speed", unit: "m/s" } },
    };
    expect(channel(bare, { key })).toMatchObject({ channel: "gps_speed", unit: "m/s" });
  });
  it("a key that names an absent column is told", () => {
    const key = { columns: { Speed: { channel: "gps_speed", unit: "m/s" } } };
    expect(read(text, { key }).problems.map((p) => p.code)).toEqual(["key_column_not_found"]);
  });
  it("the report holds what read-log prints", () => {
    const report = logReport(read(text));
    expect(report.channels[0]).toEqual({
      column: "GPS speed [km/h]",
      name: "gps_speed",
      channel: "gps_speed",
      unit_found: "km/h",
      unit: "m/s",
      min: 10.1388888889,
      median: 10.1388888889,
      max: 10.1388888889,
      missing: 0,
      rows: 20,
      rate_hz: 10,
    });
    expect(report.format).toBe("delimited");
    expect(report.time).toEqual({
      column: "Time [s]",
      form: "s",
      from: "0",
      to_s: 1.9,
      rate_hz: 10,
      gaps: [],
    });
  });
});
