import { gzipSync } from "node:zlib";
import { describe, expect, it, test } from "vitest";
import { gpxMilliseconds } from "@/lib/logs/gpx/gpx-points";
import { positionSpeed, wayM } from "@/lib/logs/gpx/position-speed";
import { readLog } from "@/lib/logs/read-log";
import { codesOf, columnOf, goldenLog, refusalOf } from "@/tests/support/golden-log";

const bytes = (text: string) => new TextEncoder().encode(text);
const point = (i: number, inside = "") =>
  `<trkpt lat="${45 + i * 1e-4}" lon="13.5"><ele>${100 + i}</ele><time>2030-05-01T10:00:${String(i).padStart(2, "0")}Z</time>${inside}</trkpt>`;
const track = (
  points: string,
  head = '<gpx version="1.1" creator="t" xmlns="http://www.topografix.com/GPX/1/1">',
) => `<?xml version="1.0" encoding="UTF-8"?>${head}<trk><trkseg>${points}</trkseg></trk></gpx>`;
const ten = (inside: (i: number) => string = () => "") =>
  Array.from({ length: 10 }, (_, i) => point(i, inside(i))).join("\n");
const read = (text: string) => readLog(bytes(text));

describe("recorded tracks", () => {
  // Counts by grep of the files: track points, and those of them with a time.
  test.each([
    ["around-visnjan-with-car", 104, 0, 1],
    ["korita-zbevnica", 513, 358, 4],
    ["track_with_speed", 3, 0, 1],
  ])("%s: %d points with a time, %d without", (name, rows, refused) => {
    const raw = goldenLog(`gpx/${name}.gpx`);
    const table = readLog(raw);
    expect(table).toMatchObject({
      format: "gpx",
      encoding: "utf-8",
      delimiter: null,
      decimal: null,
      rowsRead: rows,
    });
    expect(table.rowsRefused.length).toBe(refused);
    expect(readLog(gzipSync(raw))).toEqual(table);
  });
  it("stated speeds are read as they are, in m/s", () => {
    const table = readLog(goldenLog("gpx/track_with_speed.gpx"));
    expect(Array.from(columnOf(table, "GPS speed").values)).toEqual([1.2, 2.2, 3.2]);
    expect(Array.from(table.timeS)).toEqual([0, 6, 13]);
    expect(columnOf(table, "elevation")).toMatchObject({ channel: "altitude", unit: "m" });
    expect(codesOf(table)).toEqual([]);
  });
  it("a derived speed is labelled so in its name and told", () => {
    const table = readLog(goldenLog("gpx/around-visnjan-with-car.gpx"));
    expect(columnOf(table, "GPS speed derived from positions").channel).toBe("gps_speed");
    expect(codesOf(table)).toContain("speed_from_positions");
    // A car on a country road.
    expect(Math.max(...columnOf(table, "GPS speed derived from positions").values) * 3.6).toBeLessThan(100);
  });
});

describe("forms", () => {
  it.each([
    ["speed of 1.0", (i: number) => `<speed>${i}.5</speed>`],
    [
      "speed in an extension",
      (i: number) =>
        `<extensions><a:TrackPointExtension><a:speed>${i}.5</a:speed></a:TrackPointExtension></extensions>`,
    ],
    [
      "speed in an extension without a prefix",
      (i: number) => `<extensions><speed>${i}.5</speed></extensions>`,
    ],
  ])("%s", (_, inside) => {
    const table = read(track(ten(inside), '<gpx version="1.1" xmlns:a="urn:a">'));
    expect(Array.from(columnOf(table, "GPS speed").values)).toEqual(
      Array.from({ length: 10 }, (_, i) => i + 0.5),
    );
  });
  it.each([
    ["2030-05-01T10:00:00Z", "2030-05-01T10:00:00.000Z"],
    ["2030-05-01T10:00:00.250Z", "2030-05-01T10:00:00.250Z"],
    ["2030-05-01T10:00:00+01:00", "2030-05-01T09:00:00.000Z"],
    ["2030-05-01T00:30:00.5+01:00", "2030-04-30T23:30:00.500Z"],
    ["2030-05-01T10:00:00-0330", "2030-05-01T13:30:00.000Z"],
    [" 2030-05-01T10:00:00 ", "2030-05-01T10:00:00.000Z"],
  ])("%s", (text, want) => {
    expect(new Date(gpxMilliseconds(text)).toISOString()).toBe(want);
  });
  it.each(["", "yesterday", "2030-13-01T10:00:00Z", "2030-05-01", "2030-05-01T25:00:00Z"])(
    "%j is no time",
    (text) => {
      expect(gpxMilliseconds(text)).toBeNaN();
    },
  );
  it("points without a time are refused with their line, waypoints and routes are told", () => {
    const text = track(`${ten()}\n<trkpt lat="45" lon="13"/>`).replace(
      "<trk>",
      '<wpt lat="1" lon="1"/><trk>',
    );
    const table = read(text);
    expect(table.rowsRead).toBe(10);
    expect(table.rowsRefused).toEqual([{ row: 11, column: "time", raw: "", reason: "has no time" }]);
    expect(codesOf(table)).toEqual(["rows_refused", "points_left_out", "speed_from_positions"]);
  });
  it("a text that ends in the middle gives its whole points, told; one that breaks inside is refused", () => {
    const text = track(ten());
    const cut = read(text.slice(0, text.indexOf("<ele>107")));
    expect([cut.rowsRead, codesOf(cut)[0]]).toEqual([7, "file_cut_off"]);
    expect(refusalOf(() => read(text.replace("</ele>", "</elevation>")))).toBe("file_damaged");
  });
  it.each([
    ["only waypoints", '<gpx><wpt lat="1" lon="2"/></gpx>', "no_data_rows"],
    ["no times", track('<trkpt lat="1" lon="2"/>'), "no_time_column"],
    ["two points", track(point(1) + point(2)), "too_few_samples"],
    ["one time for all", track(point(1).repeat(12)), "time_not_increasing"],
  ])("%s is refused", (_, text, code) => {
    expect(refusalOf(() => read(text))).toBe(code);
  });
});

describe("hostile texts", () => {
  it("entities of its own are not expanded: a document type is refused", () => {
    const bomb = `<!DOCTYPE gpx [<!ENTITY a "aaaaaaaaaa"><!ENTITY b "&a;&a;&a;&a;">]>`;
    const outside = '<!DOCTYPE gpx SYSTEM "file:///etc/passwd">';
    for (const type of [bomb, outside]) {
      const text = track(ten(() => "<name>&b;</name>")).replace("?>", `?>${type}`);
      expect(refusalOf(() => read(text))).toBe("file_damaged");
    }
    expect(refusalOf(() => read(track(ten(() => "<name>&b;</name>"))))).toBe("file_damaged");
  });
  it("a flood of points is refused before it fills the memory", { timeout: 60_000 }, () => {
    expect(refusalOf(() => read(track("<trkpt/>".repeat(1_000_001))))).toBe("too_many_values");
  });
  it("a million elements inside one another are refused", () => {
    expect(refusalOf(() => read(`<gpx>${"<a>".repeat(1_000_000)}`))).toBe("file_damaged");
  });
});

describe("speed from positions", () => {
  it("a quarter of the meridian of WGS 84 is 10 001 965.729 m (published), summed in steps of 0.1°", () => {
    let way = 0;
    for (let k = 0; k < 900; k++) way += wayM(k / 10, 20, (k + 1) / 10, 20);
    expect(way).toBeCloseTo(10_001_965.729, 0);
  });
  it("one degree along the equator is a·π/180 = 111 319.4908 m, also across the date line", () => {
    expect(wayM(0, 10, 0, 11)).toBeCloseTo(111_319.4908, 3);
    expect(wayM(0, 179.5, 0, -179.5)).toBeCloseTo(111_319.4908, 3);
  });
  it("even driving gives an even speed; segments are not joined, a lone point has none", () => {
    const step = 20 / 111_319.4908;
    const timeS = new Float64Array([0, 1, 2, 10, 11, 50]);
    const longitude = timeS.map((_, i) => [0, 1, 2, 50, 51, 99][i] * step);
    const speed = positionSpeed(timeS, new Float64Array(6), longitude, [1, 1, 1, 2, 2, 3]);
    expect(Array.from(speed, (v) => Number(v.toFixed(6)))).toEqual([20, 20, 20, 20, 20, Number.NaN]);
  });
});
