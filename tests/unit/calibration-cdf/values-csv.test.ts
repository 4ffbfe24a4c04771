import fc from "fast-check";
import Papa from "papaparse";
import { describe, expect, it, vi } from "vitest";
import { changesCsv, readingCsv } from "@/lib/calibration/cdf/values-csv";
import type { ChangeSet, CharacteristicChange } from "@/lib/calibration/changes/types";
import type { PhysicalValue } from "@/lib/calibration/values/types";
import { madeAxis, madeCharacteristic, madeReading } from "../../support/made-reading";

vi.setConfig({ testTimeout: 60_000 });

const AS_WRITTEN = { delimiter: ",", newline: "\r\n", skipEmptyLines: true } as const;

/** Rows as papaparse reads them, the apostrophe in front of would-be formulas taken off, by title. */
function parsed(pieces: Iterable<string>): Record<string, string>[] {
  const { data, errors } = Papa.parse<string[]>([...pieces].join(""), AS_WRITTEN);
  expect(errors).toEqual([]);
  const [titles, ...rows] = data.map((cells) =>
    cells.map((cell) => (cell.startsWith("'") ? cell.slice(1) : cell)),
  );
  return rows.map((cells) => Object.fromEntries(titles.map((title, k) => [title, cells[k]])));
}
const FORMULA = /^(?![+-]?\d+([.,]\d+)?([eE][+-]?\d+)?$)[=+\-@\t\r\n\0]/;
const text = fc.oneof(
  fc.string({ maxLength: 10 }),
  fc
    .tuple(fc.constantFrom("=", "+", "-", "@", "\t", "\r", "\n", "'", '"'), fc.string({ maxLength: 6 }))
    .map((p) => p.join("")),
  fc.constantFrom(
    "=1+1",
    "-5",
    "+49 1",
    "-1e3",
    "@SUM(A1)",
    "'=x",
    '=HYPERLINK("http://x","y")',
    "a;b,c",
    "−3",
  ),
);
const number = fc.oneof(fc.double({ noNaN: true, noDefaultInfinity: true }), fc.integer()).map((n) => n + 0);
const value: fc.Arbitrary<PhysicalValue> = fc.oneof(number, text, fc.constant(null));
const written = (v: PhysicalValue | undefined) => (v === null || v === undefined ? "" : String(v));

describe("values as CSV", () => {
  it("parse(export(x)) = x, numbers exact, and no cell is a formula (property)", () => {
    fc.assert(
      fc.property(
        fc.array(
          fc.record({
            name: text,
            unit: text,
            functions: fc.array(text, { maxLength: 2 }),
            values: fc.array(value, { minLength: 4, maxLength: 4 }),
            points: fc.array(value, { minLength: 2, maxLength: 2 }),
          }),
          { maxLength: 4 },
        ),
        (list) => {
          const reading = madeReading(
            ...list.map(({ points, ...one }) =>
              madeCharacteristic({
                ...one,
                type: "MAP",
                dims: [2, 2],
                axes: [madeAxis(points, { unit: one.unit }), madeAxis([7, -8])],
              }),
            ),
          );
          const pieces = [...readingCsv(reading)];
          const rows = parsed(pieces);
          const expected = list.flatMap(({ name, unit, functions, values, points }) =>
            values.map((v, cell) => [
              name,
              `${cell % 2}`,
              written(points[cell % 2]),
              unit,
              `${cell >> 1}`,
              ["7", "-8"][cell >> 1],
              written(v),
              unit,
              functions.join(", "),
            ]),
          );
          expect(
            rows.map((r) => [
              r.name,
              r["x index"],
              r["x value"],
              r["x unit"],
              r["y index"],
              r["y value"],
              r.value,
              r.unit,
              r.functions,
            ]),
          ).toEqual(expected);
          for (const cells of Papa.parse<string[]>(pieces.join(""), AS_WRITTEN).data)
            for (const cell of cells) expect(cell).not.toMatch(FORMULA);
        },
      ),
      { numRuns: 200, seed: 51 },
    );
  });
  it("a large block comes in many small pieces", () => {
    const values = Array.from({ length: 20_000 }, (_, k) => k);
    const block = madeCharacteristic({ name: "block", type: "VAL_BLK", dims: [values.length], values });
    const pieces = [...readingCsv(madeReading(block))];
    expect(Math.max(...pieces.map((piece) => piece.length))).toBeLessThan(100_000);
    expect(parsed(pieces).map((row) => Number(row.value))).toEqual(values);
  });
  it("a text is one row without an index; limits are told in words", () => {
    const limits = { lower: 0, upper: 10, extended: [-5, 20] as const };
    const reading = madeReading(
      madeCharacteristic({ name: "id", type: "ASCII", dims: [4], values: [], characters: "=A1" }),
      madeCharacteristic({ name: "b", type: "VAL_BLK", dims: [4], values: [10, 15, -6, 21], limits }),
    );
    const rows = parsed(readingCsv(reading));
    expect(rows.map((r) => [r.name, r["x index"], r.value, r.limit])).toEqual([
      ["id", "", "=A1", "inside"],
      ["b", "0", "10", "inside"],
      ["b", "1", "15", "inside the extended limits only"],
      ["b", "2", "-6", "below the lower limit"],
      ["b", "3", "21", "above the upper limit"],
    ]);
  });
});

describe("what could not be read", () => {
  it("stands at the end of the values with its reason", () => {
    const reading = madeReading(madeCharacteristic({ name: "v" }));
    const notRead = [{ name: "w", reason: "its byte 0x10 is not in the image", address: 0x10 }];
    const rows = parsed(readingCsv({ ...reading, notRead }));
    expect(rows.map((r) => [r.name, r.value, r.remark])).toEqual([
      ["v", "1", ""],
      ["w", "", "not read: its byte 0x10 is not in the image"],
    ]);
  });
});

describe("changes as CSV", () => {
  const side = (values: PhysicalValue[], points: number[], characters: string | null = null) => ({
    dims: [values.length],
    axes: characters === null ? [madeAxis(points, { unit: "1/min" })] : [],
    values,
    characters,
  });
  const change = (over: Partial<CharacteristicChange>) =>
    ({
      ...madeCharacteristic({ name: "c", type: "CURVE", unit: "kPa", functions: ["boost"] }),
      kind: "changed",
      changes: [],
      axisChanged: false,
      shapeChanged: false,
      ...over,
    }) as CharacteristicChange;
  const rowsOf = (...characteristics: CharacteristicChange[]) =>
    parsed(changesCsv({ characteristics } as ChangeSet)).map((r) =>
      [
        r.name,
        r.change,
        r["x index"],
        r["x value"],
        r.before,
        r.after,
        r.difference,
        r.unit,
        r["limit after"],
      ].join("|"),
    );
  it("changed cells only, at the points they hold at after the change", () => {
    const changes = [{ index: [1], before: 5, after: 3.5, limit: "below" as const }];
    expect(
      rowsOf(change({ before: side([1, 5], [10, 20]), after: side([1, 3.5], [10, 20]), changes })),
    ).toEqual(["c|changed|1|20|5|3.5|-1.5|kPa|below the lower limit"]);
  });
  it("moved points of an own axis are rows of their own; a shared axis is told under its own name", () => {
    const moved = change({
      axisChanged: true,
      before: side([1, 5], [10, 20]),
      after: side([1, 5], [10, 25]),
    });
    expect(rowsOf(moved)).toEqual(["c|axis x|1||20|25|5|1/min|"]);
    const shared = (points: number[]) => ({
      ...side([1, 5], []),
      axes: [madeAxis(points, { kind: "COM_AXIS", reference: "n" })],
    });
    expect(rowsOf(change({ axisChanged: true, before: shared([1, 2]), after: shared([1, 3]) }))).toEqual([]);
  });
  it("added, removed and of another shape: every cell of each side", () => {
    expect(rowsOf(change({ kind: "added", before: null, after: side([7], [10]) }))).toEqual([
      "c|added|0|10||7||kPa|",
    ]);
    expect(rowsOf(change({ kind: "removed", before: side([7], [10]), after: null }))).toEqual([
      "c|removed|0|10|7|||kPa|",
    ]);
    expect(
      rowsOf(change({ shapeChanged: true, before: side([7], [10]), after: side([7, 8], [10, 20]) })),
    ).toEqual(["c|changed|0|10|7|||kPa|", "c|changed|0|10||7||kPa|", "c|changed|1|20||8||kPa|"]);
  });
  it("a changed text is one row", () => {
    expect(
      rowsOf(change({ type: "ASCII", unit: "", before: side([], [], "R1"), after: side([], [], "-R2") })),
    ).toEqual(["c|changed|||R1|-R2|||"]);
  });
});
