import { describe, expect, it } from "vitest";
import { readLog } from "@/lib/logs/read-log";
import { codesOf, refusalOf } from "@/tests/support/golden-log";

const COUNT = 40;
/** A speed that rises by 0.25 km/h a row, 10 rows a second. */
const speed = (i: number) => (30 + i / 4).toFixed(2);
const clock = (i: number) => (i / 10).toFixed(1);
const table = (head: string, row: (i: number) => string, n = COUNT) =>
  [...(head ? [head] : []), ...Array.from({ length: n }, (_, i) => row(i))].join("\n");
const read = (content: string | Buffer) =>
  readLog(typeof content === "string" ? Buffer.from(content) : content);

/** The speed must come out as written, whatever the form. */
function sound(content: string | Buffer) {
  const log = read(content);
  expect(log.rowsRead).toBe(COUNT);
  const gps = log.channels.find((channel) => channel.channel === "gps_speed");
  expect(Array.from(gps?.values ?? [], (v) => Number((3.6 * v).toFixed(6)))).toEqual(
    Array.from({ length: COUNT }, (_, i) => Number(speed(i))),
  );
  expect(log.time.rateHz).toBeCloseTo(10, 3);
  return log;
}

const HEAD = "Time [s];GPS speed [km/h];x []";
const plain = table(HEAD, (i) => `${clock(i)};${speed(i)};1`);

describe("forms of a text log", () => {
  it.each<[string, string | Buffer]>([
    ["semicolons with a decimal point", plain],
    ["empty unit brackets", plain.replace("x []", "x ()")],
    ["UTF-16 without a mark, little endian", Buffer.from(plain, "utf16le")],
    ["UTF-16 without a mark, big endian", Buffer.from(plain, "utf16le").swap16()],
    ["CR alone", plain.replaceAll("\n", "\r")],
    ["CRLF and a blank line at the end", `${plain.replaceAll("\n", "\r\n")}\r\n\r\n`],
    ["no line end at the end", plain],
    ["sep= and a blank line below it", `sep=;\n\n${plain}`],
    ["sep= in CRLF with a mark", `\ufeffsep=;\r\n${plain.replaceAll("\n", "\r\n")}`],
    [
      "a blank after each comma",
      table("Time [s], GPS speed [km/h], x", (i) => `${clock(i)}, ${speed(i)}, 1`),
    ],
    [
      "a trailing comma in data rows only",
      table("Time [s],GPS speed [km/h],x", (i) => `${clock(i)},${speed(i)},1,`),
    ],
    [
      "quoted decimal commas between commas",
      table(
        "Time [s],GPS speed [km/h]",
        (i) => `"${clock(i).replace(".", ",")}","${speed(i).replace(".", ",")}"`,
      ),
    ],
    ["tabs", table("Time [s]\tGPS speed [km/h]", (i) => `${clock(i)}\t${speed(i)}`)],
    [
      "units with decimal comma in windows-1252",
      Buffer.from(
        table("Zeit [s];GPS speed [km/h];Öl [°C]", (i) => `${clock(i)};${speed(i)};1`.replaceAll(".", ",")),
        "latin1",
      ),
    ],
    ["a preamble of key and value", `Logger;7\nDate;2030-12-31\nCar;x\n\n${plain}`],
    [
      "a preamble of key and value over two columns",
      `Logger;7\nRate;10\n${table("Time [s];GPS speed [km/h]", (i) => `${clock(i)};${speed(i)}`)}`,
    ],
    ["a preamble with commas in a sentence", `Recorded on a closed strip, dry, day 1\n${plain}`],
    ["a unit row", table("Time;GPS speed\ns;km/h", (i) => `${clock(i)};${speed(i)}`)],
    ["a unit row in brackets", table("Time;GPS speed\n[s];[km/h]", (i) => `${clock(i)};${speed(i)}`)],
    ["the first time written as -0.0", table(HEAD, (i) => `${i === 0 ? "-0.0" : clock(i)};${speed(i)};1`)],
    [
      "epoch in nanoseconds",
      table(
        "Time;GPS speed [km/h]",
        (i) => `${1893495600 + Math.floor(i / 10)}${i % 10}00000000;${speed(i)}`,
      ),
    ],
    [
      "dates with underscores",
      table(
        "Time;GPS speed [km/h]",
        (i) => `2030_12_31_23_59_5${6 + Math.floor(i / 10)}_${i % 10}00;${speed(i)}`,
      ),
    ],
    [
      "dates with an offset",
      table(
        "Time;GPS speed [km/h]",
        (i) => `2030-12-31T23:59:5${6 + Math.floor(i / 10)}.${i % 10}+01:00;${speed(i)}`,
      ),
    ],
    [
      "a clock through midnight",
      table(
        "Time;GPS speed [km/h]",
        (i) =>
          `${i < 20 ? "23:59:5" : "00:00:0"}${i < 20 ? 8 + Math.floor(i / 10) : Math.floor(i / 10) - 2}.${i % 10};${speed(i)}`,
      ),
    ],
    [
      "one thousand columns beside",
      table(`${HEAD}${";y".repeat(1000)}`, (i) => `${clock(i)};${speed(i)};1${";2".repeat(1000)}`),
    ],
  ])("%s", (_, content) => {
    sound(content);
  });
  it("missing marks are missing, each in its place", () => {
    const marks = ["NA", "NaN", "Inf", "-inf", "--", "", "null", "#N/A"];
    const log = read(table(HEAD, (i) => `${clock(i)};${speed(i)};${i < marks.length ? marks[i] : 5}`));
    const values = Array.from(log.channels[1].values);
    expect(values.map((v) => Number.isNaN(v))).toEqual(values.map((_, i) => i < marks.length));
  });
  it("thousands marks are taken off where the decimal sign is beyond doubt", () => {
    const of = (cell: string, other: string) =>
      read(table("Time [s];Engine speed [rpm];x", (i) => `${i};${cell};${other}`)).channels[0].values[0];
    expect(of("1,648", "0.25")).toBe(1648);
    expect(of("1.234.648", "0,25")).toBe(1234648);
    // One dot alone can be either sign: asked for.
    expect(refusalOf(() => of("1.648", "0,25"))).toBe("ambiguous_decimal");
    expect(of("1 648", "0.25")).toBe(1648);
    expect(of("1\u202f648,5", "0,25")).toBe(1648.5);
    expect(of("1'648.5", "0.25")).toBe(1648.5);
  });
  it("a decimal comma after hundreds of whole numbers is asked for, not taken for a mark of thousands", () => {
    const late = (cell: string, key = {}) =>
      readLog(
        Buffer.from(table("Time [s];GPS speed [km/h]", (i) => `${i};${i < 300 ? i % 90 : cell}`, 400)),
        {
          key,
        },
      );
    for (const cell of ["12,345", "12,5", "0,512"])
      expect(refusalOf(() => late(cell))).toBe("ambiguous_decimal");
    const stated = late("12,345", { decimal: "," }).channels[0].values;
    expect(3.6 * stated[399]).toBeCloseTo(12.345, 9);
    // With a leading zero it is no number of thousands, whatever the decimal sign.
    expect(late("0,512", { decimal: "." }).channels[0].values[399]).toBeNaN();
  });
  it("14:03 is minutes and seconds, and that is told: it may be a wall clock without seconds", () => {
    const of = (time: (i: number) => string) =>
      codesOf(read(table("Time;GPS speed [km/h]", (i) => `${time(i)};${speed(i)}`)));
    expect(of((i) => `14:${10 + i}`)).toContain("time_unit_assumed");
    expect(of((i) => `14:${10 + i}.0`)).not.toContain("time_unit_assumed");
  });
  it("a clock set back splits the log; the longer piece is kept, and that is told", () => {
    const log = read(table(HEAD, (i) => `${i < 30 ? i / 10 + 50 : i / 10 - 3};${speed(i)};1`, 100));
    expect(log.rowsRead).toBe(70);
    expect(codesOf(log)).toContain("time_jumps_back");
  });
  it("a log of titles and no rows, and one of nothing, are refused", () => {
    expect(refusalOf(() => read(`${HEAD}\n`))).toBe("no_data_rows");
    expect(refusalOf(() => read("\ufeff \r\n"))).toBe("empty_file");
  });
});
