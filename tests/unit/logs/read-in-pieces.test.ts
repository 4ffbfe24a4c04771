import fc from "fast-check";
import Papa from "papaparse";
import { describe, expect, it } from "vitest";
import { openDelimited } from "@/lib/logs/delimited/read-delimited";
import { RowScanner, type ScanForm } from "@/lib/logs/delimited/scan-rows";
import { parseNumber } from "@/lib/logs/parse-number";
import type { LogTable } from "@/lib/logs/types";

const utf8 = (text: string) => new TextEncoder().encode(text);

/** Cuts bytes into pieces of the given lengths, over and over. */
function* cut(bytes: Uint8Array, lengths: readonly number[]): Generator<Uint8Array> {
  for (let at = 0, k = 0; at < bytes.length; k++) {
    const end = at + Math.max(1, lengths[k % lengths.length]);
    yield bytes.slice(at, end);
    at = end;
  }
}

function readInPieces(bytes: Uint8Array, lengths: readonly number[]): LogTable {
  const reader = openDelimited(bytes, bytes.length, {});
  for (const piece of cut(bytes, lengths)) reader.push(piece);
  return reader.finish();
}

const pieces = fc.array(fc.integer({ min: 1, max: 40 }), { minLength: 1, maxLength: 6 });

describe("a log that arrives in pieces", () => {
  const head = "time [s];GPS-Geschwindigkeit [km/h];Temperatur Öl [°C];Notiz";
  const row = (i: number) => `${(i / 10).toFixed(1).replace(".", ",")};${i},25;  -${i},5e1 ;"a ""b""; c"`;
  const text = [head, ...Array.from({ length: 40 }, (_, i) => row(i))];
  const encodings: [string, Uint8Array][] = [
    ["UTF-8, LF", utf8(text.join("\n"))],
    ["UTF-8 with mark, CRLF", utf8(`\u{feff}${text.join("\r\n")}\r\n`)],
    ["CR alone", utf8(text.join("\r"))],
    ["UTF-16 little endian", new Uint8Array(Buffer.from(`\u{feff}${text.join("\r\n")}`, "utf16le"))],
    ["windows-1252", new Uint8Array(Buffer.from(text.join("\n"), "latin1"))],
  ];
  it.each(encodings)("%s: the same table wherever it is cut (property)", (_, bytes) => {
    const whole = readInPieces(bytes, [bytes.length]);
    expect(whole.rowsRead).toBe(40);
    expect(Array.from(whole.channels[0].values.slice(0, 3))).toEqual([0.25 / 3.6, 1.25 / 3.6, 2.25 / 3.6]);
    expect(whole.channels[1].values[3]).toBe(-35);
    fc.assert(
      fc.property(pieces, (lengths) => {
        expect(readInPieces(bytes, lengths)).toEqual(whole);
      }),
      { numRuns: 40, seed: 4 },
    );
  });

  it("goes on in windows-1252 where the first byte beyond UTF-8 comes late", () => {
    const rows = Array.from({ length: 30 }, (_, i) => `${i},${i},${i === 29 ? "\u00b0" : i}`);
    const bytes = new Uint8Array(Buffer.from(["time,gps speed [m/s],x", ...rows].join("\n"), "latin1"));
    const reader = openDelimited(bytes.subarray(0, 60), bytes.length, {});
    reader.push(bytes);
    const table = reader.finish();
    expect(table.problems.find((p) => p.code === "text_in_column")?.message).toContain('"°" in line 31');
  });
});

interface Scanned {
  values: number[][];
  lines: number[];
  texts: string[][];
}

function scan(bytes: Uint8Array, lengths: readonly number[], changes: Partial<ScanForm> = {}): Scanned {
  const form: ScanForm = {
    delimiter: ",",
    decimal: ".",
    width: 3,
    lineEnd: "\n",
    lastHeadLine: 0,
    textColumn: -1,
    ...changes,
  };
  const out: Scanned = { values: [], lines: [], texts: [] };
  const columns = Array.from({ length: form.width }, () => new Float64Array(1));
  const decoder = new TextDecoder();
  const scanner = new RowScanner(
    form,
    {
      columns,
      row: 0,
      oddCell: (_, text) => parseNumber(text, form.decimal) ?? Number.NaN,
      endRow: (line) => {
        out.values.push(columns.map((column) => column[0]));
        out.lines.push(line);
        out.texts.push(scanner.texts());
      },
    },
    (cell) => decoder.decode(cell),
  );
  for (const piece of cut(bytes, lengths)) scanner.push(piece);
  scanner.finish();
  return out;
}

describe("row scanner", () => {
  const cell = fc.oneof(
    fc.double({ noNaN: true, noDefaultInfinity: true }).map(String),
    fc.integer({ min: -99_999, max: 99_999 }).map((n) => ` ${n / 100} `),
    fc.constantFrom("", "NaN", "x", "1 2", "+7", "-.5", "1e-3", "123456789012345678", 'a"b', "3\n4", "5,6"),
  );
  it("cuts and reads as papaparse and the language do, in any pieces (property)", () => {
    fc.assert(
      fc.property(
        fc.array(fc.tuple(cell, cell, cell), { minLength: 1, maxLength: 12 }),
        pieces,
        (rows, lengths) => {
          const text = Papa.unparse(rows, { newline: "\n" });
          const expected = Papa.parse<string[]>(text, { delimiter: "," }).data.filter(
            (cells) => cells.length > 1 || cells[0].trim() !== "",
          );
          const got = scan(utf8(text), lengths);
          expect(got.texts).toEqual(expected);
          expect(got.values).toEqual(
            expected.map((cells) => cells.map((raw) => parseNumber(raw, ".") ?? Number.NaN)),
          );
        },
      ),
      { numRuns: 1000, seed: 5 },
    );
  });

  it("counts lines past quoted line ends and blank lines", () => {
    const text = '1,2,3\n\n"4\n4",5,6\n   \n7,8,9';
    expect(scan(utf8(text), [3]).lines).toEqual([1, 3, 6]);
  });

  it("takes a quote that never closes as a mark of its own and loses no row after it", () => {
    const text = `1,2,3\n4",5,6\n${"7,8,9\n".repeat(5)}`;
    const got = scan(utf8(text), [7]);
    expect(got.values).toHaveLength(7);
    expect(got.values[6]).toEqual([7, 8, 9]);
  });

  it("a line without an end is refused before it fills the memory", () => {
    const piece = new Uint8Array(1 << 20).fill(0x31);
    const scanner = new RowScanner(
      { delimiter: ",", decimal: ".", width: 1, lineEnd: "\n", lastHeadLine: 0, textColumn: -1 },
      { columns: [new Float64Array(1)], row: 0, oddCell: () => Number.NaN, endRow: () => undefined },
      () => "",
    );
    expect(() => {
      for (let k = 0; k < 20; k++) scanner.push(piece);
    }).toThrow(/longer than 8 MB/);
  });
});
