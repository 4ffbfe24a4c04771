import { forEachRow } from "@/lib/logs/delimited-rows";
import { parseNumber } from "@/lib/logs/parse-number";
import { filledWidth, type TableForm } from "@/lib/logs/table-form";
import { countsToSeconds, readTimeCell, type TimeForm } from "@/lib/logs/time-forms";
import type { LogProblem, RefusedRow } from "@/lib/logs/types";

/** Values by column in file order; the time column in seconds. */
export interface CollectedTable {
  rows: number;
  /** One array a column, NaN = missing or text. */
  columns: Float64Array[];
  /** Cells a column that are numbers, and that are text (neither number nor missing mark). */
  numeric: Uint32Array;
  text: Uint32Array;
  /** Time cell as written, of each row. */
  timeText: string[];
  refused: RefusedRow[];
}

const MAX_REFUSED_LISTED = 1000;
const FIRST_CAPACITY = 4096;

function grow(columns: Float64Array[], capacity: number): void {
  for (let c = 0; c < columns.length; c++) {
    const larger = new Float64Array(capacity);
    larger.set(columns[c] ?? []);
    columns[c] = larger;
  }
}

/**
 * Parses all data rows. A row without a time, with too few or too many cells is refused with its line; a repeated
 * header is skipped with a problem entry; text in a numeric column becomes missing and is counted.
 */
export function collectValues(
  text: string,
  form: TableForm,
  timeIndex: number,
  timeForm: TimeForm,
  problems: LogProblem[],
): CollectedTable {
  const width = form.titles.length;
  const { decimal } = form;
  let capacity = FIRST_CAPACITY;
  const columns = Array.from({ length: width }, () => new Float64Array(capacity));
  const numeric = new Uint32Array(width);
  const textCells = new Uint32Array(width);
  const firstText = new Map<number, { row: number; raw: string }>();
  const timeText: string[] = [];
  const refused: RefusedRow[] = [];
  let rows = 0;
  let refusedCount = 0;
  let headers = 0;
  const refuse = (row: RefusedRow) => {
    refusedCount++;
    if (refused.length < MAX_REFUSED_LISTED) refused.push(row);
  };
  const isHead = (cells: readonly string[], head: readonly string[] | null) =>
    head?.every((title, c) => (cells[c] ?? "").trim() === title) ?? false;

  forEachRow(text, form.delimiter, ({ line, cells }) => {
    if (line <= form.lastHeadLine) return;
    if (cells.length !== width) {
      const filled = filledWidth(cells);
      if (cells.length < width || filled > width) {
        const reason =
          filled > width
            ? `has ${filled} cells where the header has ${width}`
            : `has ${cells.length} of ${width} cells`;
        refuse({ row: line, reason });
        return;
      }
    }
    const timeCell = cells[timeIndex] ?? "";
    const count = readTimeCell(timeCell, timeForm, decimal);
    if (Number.isNaN(count)) {
      if (isHead(cells, form.titles)) headers++;
      else if (!isHead(cells, form.unitRow)) {
        refuse({ row: line, column: form.titles[timeIndex], raw: timeCell, reason: "has no readable time" });
      }
      return;
    }
    if (rows === capacity) {
      capacity *= 2;
      grow(columns, capacity);
    }
    for (let c = 0; c < width; c++) {
      const column = columns[c];
      if (column === undefined) continue;
      if (c === timeIndex) {
        column[rows] = count;
        continue;
      }
      const cell = cells[c] ?? "";
      const value = parseNumber(cell, decimal);
      if (value === null) {
        textCells[c] = (textCells[c] ?? 0) + 1;
        if (!firstText.has(c)) firstText.set(c, { row: line, raw: cell });
        column[rows] = Number.NaN;
      } else {
        if (!Number.isNaN(value)) numeric[c] = (numeric[c] ?? 0) + 1;
        column[rows] = value;
      }
    }
    timeText.push(timeCell.trim());
    rows++;
  });

  if (headers > 0)
    problems.push({
      code: "repeated_header",
      message: `The header row is repeated ${headers} times inside the data; those lines were skipped.`,
    });
  if (refusedCount > 0)
    problems.push({
      code: "rows_refused",
      message: `${refusedCount} rows were refused, the first in line ${refused[0]?.row}: it ${refused[0]?.reason}.`,
    });
  for (const [c, { row, raw }] of firstText) {
    if ((numeric[c] ?? 0) === 0) continue;
    problems.push({
      code: "text_in_column",
      message: `"${form.titles[c]}" holds ${textCells[c]} cells that are no numbers, the first "${raw.trim().slice(0, 40)}" in line ${row}; they count as missing.`,
    });
  }
  const filled = columns.map((column) => column.subarray(0, rows));
  countsToSeconds(filled[timeIndex] ?? new Float64Array(), timeForm);
  return { rows, columns: filled, numeric, text: textCells, timeText, refused };
}
