import { readFileSync } from "node:fs";
import { gunzipSync, gzipSync } from "node:zlib";
import { describe, expect, test } from "vitest";
import { HEAD_BYTES } from "@/lib/logs/delimited/read-delimited";
import { logReport } from "@/lib/logs/log-report";
import { completeKey } from "@/lib/logs/preview/complete-key";
import { gatherHead } from "@/lib/logs/preview/gather-head";
import { previewLog } from "@/lib/logs/preview/preview-log";
import { previewWords } from "@/lib/logs/preview/preview-words";
import { readHead } from "@/lib/logs/preview/read-head";
import { readLog } from "@/lib/logs/read-log";

const golden = (name: string) =>
  gunzipSync(readFileSync(new URL(`../../golden/logs/${name}.gz`, import.meta.url)));
async function* pieces(bytes: Uint8Array, size = 64 * 1024) {
  for (let at = 0; at < bytes.length; at += size) yield bytes.subarray(at, at + size);
}
const DIALECTS = [
  "d01_comma_bracket_units",
  "d02_semicolon_decimal_comma_crlf",
  "d03_unit_row_bom",
  "d04_utf16_tab",
  "d05_latin1_german",
  "d07_bar_clock_midnight",
  "d08_epoch_ms_out_of_order",
  "d12_snake_blank_repeat_header",
];

/** A log of more than one head, whose speed tells the row: row i holds i / 100. */
function longLog(encoding: "utf8" | "utf16le"): Buffer {
  const rows = Array.from({ length: 160_000 }, (_, i) => `${(i / 50).toFixed(2)};${(i / 100).toFixed(2)}`);
  return Buffer.from(["Time [s];GPS speed [m/s]", ...rows, ""].join("\r\n"), encoding);
}

describe("a preview", () => {
  for (const name of DIALECTS) {
    test(`of ${name} is what the import reads`, { timeout: 60_000 }, async () => {
      const bytes = golden(`dialects/${name}.csv`);
      const options = { drive: "FWD" as const };
      const preview = previewLog(await gatherHead(pieces(bytes)), options);
      const table = readLog(bytes, options);
      const report = logReport(table);
      expect(preview).toMatchObject({ wholeFile: true, refusal: null, rowsRead: report.rows_read });
      expect(preview.problems).toEqual(report.problems);
      const shown = preview.columns.filter(({ role }) => role === "channel" || role === "free");
      expect(shown.map(({ title }) => title).sort()).toEqual(report.channels.map((c) => c.column).sort());
      for (const channel of report.channels) {
        const column = shown.find(({ title }) => title === channel.column);
        expect(column?.channel).toBe(channel.channel);
        const factor = channel.unit === "m/s" ? 3.6 : 1;
        for (const figure of ["min", "median", "max"] as const)
          expect(column?.[figure]).toBeCloseTo(factor * (channel[figure] ?? Number.NaN), 2);
      }
      expect(preview.rows).toHaveLength(20);
      expect(preview.rows[0]).toHaveLength(preview.columns.length);
    });
  }

  for (const encoding of ["utf8", "utf16le"] as const) {
    test(`of a long log in ${encoding} has the rows with which the import begins`, {
      timeout: 60_000,
    }, async () => {
      const bytes = longLog(encoding);
      expect(bytes.length).toBeGreaterThan(HEAD_BYTES * 1.5);
      const head = await gatherHead(pieces(bytes));
      expect(head.complete).toBe(false);
      expect(head.bytes.length).toBe(HEAD_BYTES);
      const begun = readHead(head, {});
      const imported = readLog(bytes);
      const rows = begun.timeS.length;
      // 1 MiB of rows of 11 to 16 characters.
      expect(rows).toBeGreaterThan(30_000);
      expect(begun.rowsRefused).toEqual([]);
      const bytesOf = (values?: Float64Array) =>
        Buffer.from(values?.buffer ?? new ArrayBuffer(), values?.byteOffset, 8 * rows);
      expect(bytesOf(begun.timeS).equals(bytesOf(imported.timeS))).toBe(true);
      expect(bytesOf(begun.channels[0]?.values).equals(bytesOf(imported.channels[0]?.values))).toBe(true);
      expect(begun.channels[0]?.values[rows - 1]).toBeCloseTo((rows - 1) / 100, 9);
    });
  }

  test("of a packed log unpacks no more than it looks at", { timeout: 60_000 }, async () => {
    const log = longLog("utf8");
    const head = await gatherHead(pieces(gzipSync(log)));
    expect(head.complete).toBe(false);
    expect(Buffer.compare(head.bytes, log.subarray(0, HEAD_BYTES))).toBe(0);
    const bomb = gzipSync(Buffer.alloc(32 * HEAD_BYTES, "a"));
    expect(bomb.length).toBeLessThan(HEAD_BYTES / 20);
    expect((await gatherHead(pieces(bomb))).bytes.length).toBe(HEAD_BYTES);
  });

  test("reads no more of a long log than its beginning", async () => {
    let taken = 0;
    let closed = false;
    async function* endless() {
      try {
        for (;;) {
          taken += 65_536;
          yield Buffer.alloc(65_536, "1,2\n");
        }
      } finally {
        closed = true;
      }
    }
    await gatherHead(endless());
    expect(taken).toBe(HEAD_BYTES);
    expect(closed).toBe(true);
  });
});

describe("a log that leaves doubt", () => {
  const rows = Array.from({ length: 40 }, (_, i) => `${i};1,${100 + i};${800 + i}`);
  const log = Buffer.from(["Zeitpunkt;Tempo;Kurbel", ...rows].join("\n"));
  const head = { bytes: log, complete: true };

  test("shows titles and cells although it is refused, and is read once it is told", () => {
    const refused = previewLog(head, {});
    expect(refused.refusal?.code).toBe("ambiguous_decimal");
    expect(refused.columns.map(({ title, role, samples }) => [title, role, samples[0]])).toEqual([
      ["Zeitpunkt", "unread", "0"],
      ["Tempo", "unread", "1,100"],
      ["Kurbel", "unread", "800"],
    ]);
    const key = {
      decimal: "," as const,
      time: { column: "Zeitpunkt", form: "s" },
      columns: {
        Tempo: { channel: "gps_speed", unit: "km/h" },
        Kurbel: { channel: "engine_speed" },
      },
    };
    const read = previewLog(head, { key });
    expect(read.refusal).toBeNull();
    expect(read.columns.map(({ channel, min, max, unit }) => [channel, min, max, unit])).toEqual([
      ["time", null, null, "s"],
      ["gps_speed", 1.1, 1.139, "km/h"],
      ["engine_speed", 800, 839, "1/min"],
    ]);
    expect(previewWords(read).found).toEqual(["GPS speed", "engine speed"]);
    expect(read.format).toBe(refused.format);
  });

  test("a kept key names every column, those left out too, and reads the same again", () => {
    const bytes = golden("dialects/d05_latin1_german.csv");
    const whole = { bytes, complete: true };
    const first = previewLog(whole, { drive: "FWD" });
    const speed = first.columns.find(({ channel }) => channel === "gps_speed")?.title ?? "";
    const stated = { columns: { [speed]: { channel: null }, "not in this file": { channel: "lambda" } } };
    const preview = previewLog(whole, { key: stated, drive: "FWD" });
    const key = completeKey(preview, stated);
    expect(key.columns?.[speed]).toEqual({ channel: null });
    expect(key.columns).not.toHaveProperty("not in this file");
    const open = preview.columns.filter(({ role, axle }) => role !== "time" && !axle);
    for (const { title } of open) expect(key.columns).toHaveProperty([title]);
    expect(key.time).toEqual({ column: preview.time?.column, form: "s" });
    const again = previewLog(whole, { key, drive: "FWD" });
    expect(again.columns.map(({ title, channel }) => [title, channel])).toEqual(
      preview.columns.map(({ title, channel }) => [title, channel]),
    );
  });
});
