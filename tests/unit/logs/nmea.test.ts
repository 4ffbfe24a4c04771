import { gzipSync } from "node:zlib";
import fc from "fast-check";
import { describe, expect, it, test } from "vitest";
import { logReport } from "@/lib/logs/log-report";
import { fieldDay, fieldDegrees, fieldSeconds, readSentence } from "@/lib/logs/nmea/nmea-sentence";
import { readLog } from "@/lib/logs/read-log";
import { codesOf, columnOf, goldenLog, refusalOf } from "@/tests/support/golden-log";

const bytes = (text: string) => new TextEncoder().encode(text);
/** A sentence with its checksum: the exclusive or of all characters between the dollar sign and the star. */
const sentence = (body: string) => {
  const sum = [...body].reduce((x, c) => x ^ c.charCodeAt(0), 0);
  return `$${body}*${sum.toString(16).toUpperCase().padStart(2, "0")}`;
};
const clock = (s: number) =>
  [Math.floor(s / 3600) % 24, Math.floor(s / 60) % 60, s % 60]
    .map((n) => String(Math.floor(n)).padStart(2, "0"))
    .join("");
const rmc = (s: number, knots: number | "", date = "311230", status = "A", talker = "GP") =>
  sentence(
    `${talker}RMC,${clock(s)}.${String(Math.round((s % 1) * 100)).padStart(2, "0")},${status},4807.038,N,01131.000,W,${knots},084.4,${date},,,A`,
  );
const read = (lines: string[]) => readLog(bytes(lines.join("\r\n")));

describe("many sentences", { timeout: 60_000 }, () => {
  it("as many refused ones are listed as are asked for", () => {
    const lines = Array.from({ length: 3000 }, (_, i) => (i % 2 ? rmc(i / 10, 20) : "$GPRMC,1*00"));
    const listed = (maxRefusedRows?: number) =>
      readLog(bytes(lines.join("\n")), { maxRefusedRows }).rowsRefused.length;
    expect([listed(), listed(5000)]).toEqual([1000, 1500]);
  });
  it("a flood of moments is refused before it fills the memory", () => {
    const two = `${sentence("GPZDA,000000")}\n${sentence("GPZDA,000001")}\n`;
    expect(refusalOf(() => readLog(bytes(two.repeat(500_001))))).toBe("too_many_values");
  });
});

describe("recordings of real receivers", () => {
  // Counts: every sentence whose checksum holds, counted with pynmea2; 37 of 224 RMC without a fix in the second file.
  test.each([
    ["sirfstarv-nmea", 59, 367, 0],
    ["telit-he910", 187, 1558, 0],
    ["ublox-8", 72, 1008, 1],
    ["ublox-zed-f9p-nmea", 29, 1015, 0],
  ])("%s: %d moments from %d sentences, %d refused", (name, rows, sentences, refused) => {
    const raw = goldenLog(`nmea/${name}.log`);
    const table = readLog(raw);
    const good = new TextDecoder("latin1")
      .decode(raw)
      .split("\n")
      .map(readSentence)
      .filter((s) => s !== null && typeof s !== "string");
    expect(good.length).toBe(sentences);
    expect(table).toMatchObject({
      format: "nmea0183",
      rowsRead: rows,
      encoding: "ascii",
      delimiter: null,
      decimal: null,
    });
    expect(table.rowsRefused.length).toBe(refused);
    expect(table.time).toMatchObject({ form: "iso", rateHz: 1 });
    // All of them stood still: never faster than a walk.
    expect(Math.max(...columnOf(table, "GPS speed").values)).toBeLessThan(0.5);
    expect(readLog(gzipSync(raw))).toEqual(table);
  });
  it("37 of 224 moments without a fix are told and give no value", () => {
    const table = readLog(goldenLog("nmea/telit-he910.log"));
    expect(table.problems.find((p) => p.code === "fix_missing")?.message).toContain("37 of 224 RMC");
    expect(columnOf(table, "latitude").values.every((v) => Math.abs(v - 50.8402) < 1e-3)).toBe(true);
  });
  it("the sentence that was cut off is listed with its line and text", () => {
    const [row] = readLog(goldenLog("nmea/ublox-8.log")).rowsRefused;
    expect(row.raw).toBe("$GNRMC,001053.00,A,4404.14083,N,12118.85886,W,0.");
    expect(row.reason).toContain("cut off");
  });
});

describe("fields", () => {
  it("the published example: 48° 07.038' N, 11° 31.000' E, 22.4 knots", () => {
    const line = "$GPRMC,123519,A,4807.038,N,01131.000,E,022.4,084.4,230394,003.1,W*6A";
    expect(readSentence(line)).toMatchObject({ talker: "GP", type: "RMC" });
    const table = read([line, ...[20, 21, 22].map((s) => rmc(12 * 3600 + 35 * 60 + s, 22.4, "230394"))]);
    expect(columnOf(table, "latitude").values[0]).toBeCloseTo(48 + 7.038 / 60, 12);
    expect(columnOf(table, "longitude").values[0]).toBeCloseTo(11 + 31 / 60, 12);
    // 1 kn = 1852 m an hour, exactly.
    expect(columnOf(table, "GPS speed").values[0]).toBeCloseTo((22.4 * 1852) / 3600, 12);
    expect(table.time.from).toBe("1994-03-23T12:35:19.000Z");
  });
  it.each([
    ["4807.038", "S", -(48 + 7.038 / 60)],
    ["9100.0", "N", Number.NaN],
    ["18000.0", "W", -180],
    ["18001.0", "E", Number.NaN],
    ["4860.0", "N", Number.NaN],
    ["", "N", Number.NaN],
    ["4807.038", "", Number.NaN],
  ])("%s %s", (field, hemisphere, want) => {
    const got = fieldDegrees(field, hemisphere);
    if (Number.isNaN(want)) expect(got).toBeNaN();
    else expect(got).toBeCloseTo(want, 12);
  });
  it("times and dates that do not exist are missing", () => {
    for (const text of ["240000", "126000", "1234", "", "12345x"]) expect(fieldSeconds(text)).toBeNaN();
    expect([fieldDay(29, 2, 2023), fieldDay(32, 1, 2030)]).toEqual([Number.NaN, Number.NaN]);
    expect(fieldDay(1, 1, 1970)).toBe(0);
  });
  it.each([
    ["$GPRMC,1*00", "wrong checksum"],
    ["$GPRMC,1", "no checksum"],
    ["$GPRMC,1*4", "cut off"],
    ["noise", null],
    ["# comment $GPRMC", null],
  ])("%s", (line, want) => {
    const got = readSentence(line);
    if (want === null) expect(got).toBeNull();
    else expect(got).toContain(want);
  });
  it("a logger's own time before the sentence is passed over", () => {
    expect(readSentence(`12:00:00.123 ${rmc(1, 1)}`)).toMatchObject({ type: "RMC" });
  });
  it("any single changed character is caught (property)", () => {
    const line = rmc(43_210, 12.34);
    fc.assert(
      fc.property(
        fc.integer({ min: 1, max: line.length - 1 }),
        fc.integer({ min: 33, max: 126 }),
        (at, code) => {
          const changed = line.slice(0, at) + String.fromCharCode(code) + line.slice(at + 1);
          if (changed.toUpperCase() === line.toUpperCase()) return;
          expect(typeof readSentence(changed) === "object" && readSentence(changed) !== null).toBe(false);
        },
      ),
      { numRuns: 1000, seed: 21 },
    );
  });
});

describe("moments", () => {
  it("sentences of one moment make one row; the first value said counts; VTG belongs to the moment before it", () => {
    const lines = Array.from({ length: 5 }, (_, i) => [
      sentence(`GPGGA,${clock(100 + i)}.00,4807.000,N,01131.000,E,1,08,0.9,${500 + i}.5,M,46.9,M,,`),
      sentence(`GPVTG,054.7,T,034.4,M,${10 + i}.5,N,019.4,K,A`),
      sentence(`GPZDA,${clock(100 + i)}.00,31,12,2030,00,00`),
    ]).flat();
    const table = read(lines);
    expect(table.rowsRead).toBe(5);
    expect(table.time.from).toBe("2030-12-31T00:01:40.000Z");
    expect(Array.from(columnOf(table, "altitude").values)).toEqual([500.5, 501.5, 502.5, 503.5, 504.5]);
    expect(columnOf(table, "GPS speed").values[4]).toBeCloseTo((14.5 * 1852) / 3600, 12);
  });
  it("without a fix a value is missing, not 0, even where the receiver writes one", () => {
    const lines = Array.from({ length: 12 }, (_, i) => rmc(i, i, "311230", i % 4 === 3 ? "V" : "A"));
    const speed = columnOf(read(lines), "GPS speed").values;
    expect(Array.from(speed, Number.isNaN)).toEqual(lines.map((_, i) => i % 4 === 3));
  });
  it("dead reckoning and simulation are no measured speed", () => {
    const lines = Array.from({ length: 5 }, (_, i) => rmc(i, 9));
    const estimated = sentence("GPRMC,000002.50,A,4807.038,N,01131.000,W,50,084.4,311230,,,E");
    const table = read([...lines.slice(0, 3), estimated, ...lines.slice(3)]);
    expect(columnOf(table, "GPS speed").values[3]).toBeNaN();
  });
  it("midnight, with dates and without", () => {
    const at = (k: number) => 86_398 + k / 2;
    const dated = read(
      Array.from({ length: 10 }, (_, k) => rmc(at(k) % 86_400, 5, at(k) < 86_400 ? "311230" : "010131")),
    );
    expect(dated.time).toMatchObject({ from: "2030-12-31T23:59:58.000Z", toS: 4.5, rateHz: 2 });
    expect(codesOf(dated)).toEqual(["midnight_passed"]);
    const gga = (s: number) =>
      sentence(`GNGGA,${clock(s)}.${s % 1 ? 50 : "00"},4807.0,N,01131.0,E,4,08,0.9,5.5,M,46.9,M,,`);
    const undated = read(Array.from({ length: 10 }, (_, k) => gga(at(k) % 86_400)));
    expect(undated.time).toMatchObject({ form: "clock", from: "23:59:58.000", toS: 4.5 });
    expect(codesOf(undated)).toEqual(["date_unknown", "midnight_passed"]);
  });
  it("any talker is read, other sentences are left out with their number, proprietary ones too", () => {
    const lines = ["GP", "GN", "GL", "GA", "BD"].map((talker, i) => rmc(i, i, "311230", "A", talker));
    const table = read([...lines, sentence("GPGSA,A,1"), sentence("GPGSA,A,2"), sentence("PUBX,00,1")]);
    expect(table.rowsRead).toBe(5);
    expect(table.leftOut).toEqual(["GSA (2 sentences)", "PUBX (1 sentences)"]);
  });
  it("cut and damaged sentences are counted, listed with their line, and the rest is read", () => {
    const lines = Array.from({ length: 20 }, (_, i) => rmc(i, i));
    lines[7] = lines[7].slice(0, 20);
    lines[9] = lines[9].replace(",A,", ",B,");
    const table = read(lines);
    expect(table.rowsRead).toBe(18);
    expect(table.rowsRefused.map((r) => r.row)).toEqual([8, 10]);
    expect(table.problems[0].message).toContain("2 of 20 sentences were refused, the first in line 8");
  });
  it("a log without one time, and one of two moments, are refused", () => {
    expect(refusalOf(() => read([sentence("GPGSV,1"), sentence("GPGSA,2")]))).toBe("no_data_rows");
    expect(refusalOf(() => read([rmc(1, 1), rmc(2, 1)]))).toBe("too_few_samples");
  });
  it("the report names the format", () => {
    expect(logReport(read([1, 2, 3, 4].map((s) => rmc(s, s))))).toMatchObject({
      format: "nmea0183",
      rows_read: 4,
    });
  });
});
