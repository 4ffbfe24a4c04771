import { FileRefusedError } from "@/lib/errors";
import { createColumnStore } from "@/lib/logs/delimited/column-store";
import { createRowScanner, type RowTarget } from "@/lib/logs/delimited/scan-rows";
import type { TableForm } from "@/lib/logs/delimited/table-form";
import { parseNumber } from "@/lib/logs/parse-number";
import { countsToSeconds, readTimeCell, type TimeForm } from "@/lib/logs/times/time-forms";
import { type LogProblem, MOST_REFUSED_LISTED, type RefusedRow } from "@/lib/logs/types";

/** Values by column in file order; the time column in seconds. */
export interface CollectedTable {
  rows: number;
  /** One array a column, NaN = missing or text. */
  columns: Float64Array[];
  /** Cells a column that are text: neither a number nor a missing mark. */
  text: Uint32Array;
  /** Time cell as written in a row where a piece of the recording can begin: the first row, and each that goes back in time. */
  startText: ReadonlyMap<number, string>;
  refused: RefusedRow[];
}

/** How the bytes are laid out and read. */
export interface CollectOptions {
  form: TableForm;
  timeIndex: number;
  timeForm: TimeForm;
  lineEnd: "\n" | "\r";
  decode: (bytes: Uint8Array) => string;
  /** A guess, for the memory taken at first. */
  expectedRows: number;
  /** Refused rows that are listed; the rest is counted only. */
  listAtMost?: number;
}

/** A longer cell is no time; cut, it fits a page and a database. */
const LONGEST_RAW = 200;
/** Jumps back beyond this many are the mark of a column that is no time. */
const MAX_STARTS = 10_000;

/** A number with a comma, in a log whose first rows told no decimal sign. */
const COMMA_NUMBER = /^\s*[+-]?\d*,\d+(e[+-]?\d+)?\s*$/i;

function refuseDecimal(cell: string): never {
  throw new FileRefusedError(
    "ambiguous_decimal",
    `The first rows of this log hold whole numbers only; then comes "${cell.trim().slice(0, 40)}", so the decimal sign is in doubt. State it in a channel key ("decimal": "." or ",").`,
  );
}

/** True when a column holds any number at all. */
export const hasNumber = (column: Float64Array): boolean => column.some((value) => !Number.isNaN(value));

/**
 * Parses all data rows from bytes that are pushed piece by piece. A row without a time, with too few or too many cells is
 * refused with its line; a repeated header is skipped with a problem entry; text in a numeric column becomes missing and is
 * counted. One pass; memory is that of the columns.
 */
export function createCollector(options: CollectOptions) {
  const { form, timeIndex, timeForm, lineEnd, decode, listAtMost = MOST_REFUSED_LISTED } = options;
  const width = form.titles.length;
  const { decimal } = form;
  const store = createColumnStore(width, options.expectedRows);
  const text = new Uint32Array(width);
  const firstText = new Map<number, { row: number; raw: string }>();
  const startText = new Map<number, string>();
  const refused: RefusedRow[] = [];
  let oddTexts: [number, string][] = [];
  let refusedCount = 0;
  let headers = 0;
  let lastCount = Number.POSITIVE_INFINITY;

  const refuse = (row: RefusedRow) => {
    refusedCount++;
    if (refused.length < listAtMost) refused.push(row);
  };
  const isHead = (cells: readonly string[], head: readonly string[] | null) =>
    head?.every((title, c) => (cells[c] ?? "").trim() === title) ?? false;

  function refuseUntimed(line: number): void {
    const cells = scanner.texts();
    if (isHead(cells, form.titles)) headers++;
    else if (!isHead(cells, form.unitRow)) {
      const raw = (cells[timeIndex] ?? "").slice(0, LONGEST_RAW);
      refuse({ row: line, column: form.titles[timeIndex], raw, reason: "has no readable time" });
    }
  }

  function endRow(line: number, cells: number, filled: number): void {
    const odd = oddTexts;
    if (odd.length > 0) oddTexts = [];
    if (cells !== width && (cells < width || filled > width)) {
      const reason =
        filled > width
          ? `has ${filled} cells where the header has ${width}`
          : `has ${cells} of ${width} cells`;
      refuse({ row: line, reason });
      return;
    }
    const count = target.columns[timeIndex][target.row];
    if (Number.isNaN(count)) {
      refuseUntimed(line);
      return;
    }
    if (!(count >= lastCount) && startText.size < MAX_STARTS)
      startText.set(store.rows(), (scanner.texts()[timeIndex] ?? "").trim());
    lastCount = count;
    for (const [c, raw] of odd) {
      text[c]++;
      if (!firstText.has(c)) firstText.set(c, { row: line, raw });
    }
    target.row = store.keepRow();
    if (target.row === 0) target.columns = store.piece();
  }

  const target: RowTarget = {
    columns: store.piece(),
    row: 0,
    oddCell(column, cell) {
      if (form.decimalOpen && COMMA_NUMBER.test(cell)) refuseDecimal(cell);
      if (column === timeIndex) return readTimeCell(cell, timeForm, decimal);
      const value = parseNumber(cell, decimal);
      if (value === null) oddTexts.push([column, cell]);
      return value ?? Number.NaN;
    },
    endRow,
  };
  const textColumn = timeForm === "clock" || timeForm === "iso" ? timeIndex : -1;
  const { delimiter, lastHeadLine } = form;
  const scanner = createRowScanner(
    { delimiter, decimal, width, lineEnd, lastHeadLine, textColumn },
    target,
    decode,
  );

  return {
    push: scanner.push,
    finish(problems: LogProblem[]): CollectedTable {
      scanner.finish();
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
      const columns = store.finish();
      for (const [c, { row, raw }] of firstText) {
        if (!hasNumber(columns[c])) continue;
        problems.push({
          code: "text_in_column",
          message: `"${form.titles[c]}" holds ${text[c]} cells that are no numbers, the first "${raw.trim().slice(0, 40)}" in line ${row}; they count as missing.`,
        });
      }
      countsToSeconds(columns[timeIndex], timeForm);
      return { rows: store.rows(), columns, text, startText, refused };
    },
  };
}
