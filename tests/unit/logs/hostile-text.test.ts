import { describe, expect, it } from "vitest";
import { readLog } from "@/lib/logs/read-log";
import { codesOf, refusalOf } from "@/tests/support/golden-log";

const HEAD = "Time [s],GPS speed [km/h]";
const lines = (n: number, line: (i: number) => string) =>
  Array.from({ length: n }, (_, i) => line(i)).join("\n");
const sound = lines(50, (i) => `${i / 10},${30 + i}`);
const text = (value: string) => Buffer.from(value);
const repeat = (value: string, n: number) => text(value.repeat(n));

/** Generous: a reader that is quadratic in its input takes minutes. */
const LIMIT_MS = 20_000;

describe("made-up text ends in a plain refusal or a sound table, in bounded time", {
  timeout: LIMIT_MS,
}, () => {
  it.each([
    ["a million columns", () => text(`${"x,".repeat(1e6)}y\n${"1,".repeat(1e6)}2\n`), ["too_many_columns"]],
    [
      "a million columns and no header",
      () => repeat("1,", 1e6),
      ["too_many_columns", "no_time_column", "no_data_rows"],
    ],
    [
      "a line of 10 MB after a sound head",
      () => text(`${HEAD}\n${sound}\n${"7".repeat(10 << 20)}`),
      ["line_too_long"],
    ],
    [
      "a line of 10 MB alone",
      () => repeat("7", 10 << 20),
      ["line_too_long", "no_time_column", "no_data_rows"],
    ],
    [
      "a quote in every cell of 200,000 rows",
      () => text(`${HEAD}\n${lines(2e5, (i) => `"${i / 10}","${i % 90}`)}`),
      null,
    ],
    ["a megabyte of quotes", () => text(`${HEAD}\n${sound}\n${'"'.repeat(1 << 20)}\n`), null],
    ["two megabytes of delimiters", () => repeat(",", 2 << 20), null],
    ["two million blank lines", () => text(`${HEAD}\n${"\n".repeat(2e6)}${sound}`), null],
    [
      "a time that jumps back in every second row",
      () => text(`${HEAD}\n${lines(2e5, (i) => `${(i % 2) * 1e5 - i},${i % 90}`)}`),
      null,
    ],
    [
      "the same time 300,000 times",
      () => text(`${HEAD}\n${lines(3e5, (i) => `5,${i % 90}`)}`),
      ["time_not_increasing"],
    ],
    [
      "numbers of 400 digits",
      () => text(`${HEAD}\n${lines(3000, (i) => `${i / 10},${"9".repeat(400)}`)}`),
      null,
    ],
    ["titles of 100,000 brackets", () => text(`Time [s],${"[".repeat(1e5)}\n${sound}`), null],
    ["titles of 100,000 blanks and letters", () => text(`Time [s],${"a ".repeat(1e5)}b\n${sound}`), null],
    [
      "times of 100,000 colons",
      () => text(`Time,GPS speed [km/h]\n${lines(50, () => `${"1:".repeat(2000)},1`)}`),
      null,
    ],
  ] as const)("%s", (_, make, codes) => {
    const began = performance.now();
    const outcome = refusalOf(() => readLog(make()));
    expect(performance.now() - began).toBeLessThan(LIMIT_MS);
    expect(outcome).not.toBe("");
    if (codes) expect(codes).toContain(outcome);
  });
});

describe("odd bytes", () => {
  it("NUL bytes late in a file cost their cells, not the log, and are told", () => {
    const rows = lines(20_000, (i) => `${i / 10},${30 + (i % 50)}`);
    const bytes = text(`${HEAD}\n${rows}\n${lines(20, (i) => `${2000 + i / 10},5\u00005`)}`);
    const table = readLog(bytes);
    expect(table.rowsRead).toBe(20_020);
    expect(codesOf(table)).toContain("text_in_column");
    expect(table.channels[0].values[20_010]).toBeNaN();
  });
  it("line ends of all three kinds in one file", () => {
    const rows = Array.from({ length: 60 }, (_, i) => `${i / 10},${30 + i}${i % 2 ? "\r\n" : "\n"}`).join("");
    const table = readLog(text(`${HEAD}\r\n${rows}`));
    expect(table.rowsRead).toBe(60);
    expect(table.rowsRefused).toEqual([]);
  });
  it("a CR alone inside a file of LF lines joins two rows; the line is refused, not half read", () => {
    const table = readLog(text(`${HEAD}\n${sound}\n9,50\r9.1,51\n9.2,52\n`));
    expect(table.rowsRead).toBe(51);
    expect(table.rowsRefused).toHaveLength(1);
  });
  it("a refused row keeps the beginning of its raw text, not megabytes of it", () => {
    const table = readLog(text(`${HEAD}\n${sound}\n${"x".repeat(1 << 20)},50\n`));
    expect(table.rowsRefused.map(({ raw }) => raw)).toEqual(["x".repeat(200)]);
  });
  it("one column is no table", () => {
    expect(refusalOf(() => readLog(text(lines(50, (i) => `${i}`))))).toBe("no_time_column");
    const timeOnly = refusalOf(() => readLog(text(`Time [s]\n${lines(50, (i) => `${i / 10}`)}`)));
    expect(timeOnly).toBe("no_time_column");
  });
  it("a title with the word time and the unit of a speed is no time", () => {
    const of = (head: string) =>
      refusalOf(() => readLog(text(`${head}\n${lines(50, (i) => `${i},${i / 10}`)}`)));
    expect(of("Tempo [km/h],x")).toBe("no_time_column");
    expect(of("Time to target [rpm],x")).toBe("no_time_column");
  });
});
