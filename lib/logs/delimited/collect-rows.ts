import { FileRefusedError } from "@/lib/errors";
import { createColumnStore } from "@/lib/logs/delimited/column-store";
import { RowScanner, type RowTarget } from "@/lib/logs/delimited/scan-rows";
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

const isHead = (cells: readonly string[], head: readonly string[] | null) =>
  head?.every((title, c) => (cells[c] ?? "").trim() === title) ?? false;

/**
 * Parses all data rows from bytes that are pushed piece by piece. A row without a time, with too few or too many cells is
 * refused with its line; a repeated header is skipped with a problem entry; text in a numeric column becomes missing and is
 * counted. One pass; memory is that of the columns.
 */
export class RowCollector implements RowTarget {
  columns: Float64Array[];
  row = 0;
  private readonly store: ReturnType<typeof createColumnStore>;
  private readonly scanner: RowScanner;
  private readonly width: number;
  private readonly text: Uint32Array;
  private readonly firstText = new Map<number, { row: number; raw: string }>();
  private readonly startText = new Map<number, string>();
  private readonly refused: RefusedRow[] = [];
  private oddTexts: [number, string][] = [];
  private refusedCount = 0;
  private headers = 0;
  private lastCount = Number.POSITIVE_INFINITY;

  constructor(private readonly options: CollectOptions) {
    const { form, timeIndex, timeForm, lineEnd, decode } = options;
    const { delimiter, decimal, lastHeadLine } = form;
    this.width = form.titles.length;
    this.store = createColumnStore(this.width, options.expectedRows);
    this.columns = this.store.piece();
    this.text = new Uint32Array(this.width);
    const textColumn = timeForm === "clock" || timeForm === "iso" ? timeIndex : -1;
    const { width } = this;
    this.scanner = new RowScanner(
      { delimiter, decimal, width, lineEnd, lastHeadLine, textColumn },
      this,
      decode,
    );
  }

  private refuse(row: RefusedRow): void {
    const { listAtMost = MOST_REFUSED_LISTED } = this.options;
    this.refusedCount++;
    if (this.refused.length < listAtMost) this.refused.push(row);
  }

  private refuseUntimed(line: number): void {
    const { form, timeIndex } = this.options;
    const cells = this.scanner.texts();
    if (isHead(cells, form.titles)) this.headers++;
    else if (!isHead(cells, form.unitRow)) {
      const raw = (cells[timeIndex] ?? "").slice(0, LONGEST_RAW);
      this.refuse({ row: line, column: form.titles[timeIndex], raw, reason: "has no readable time" });
    }
  }

  endRow(line: number, cells: number, filled: number): void {
    const { width, columns, row } = this;
    const { timeIndex } = this.options;
    const odd = this.oddTexts;
    if (odd.length > 0) this.oddTexts = [];
    if (cells !== width && (cells < width || filled > width)) {
      const reason =
        filled > width
          ? `has ${filled} cells where the header has ${width}`
          : `has ${cells} of ${width} cells`;
      this.refuse({ row: line, reason });
      return;
    }
    const count = columns[timeIndex][row];
    if (Number.isNaN(count)) {
      this.refuseUntimed(line);
      return;
    }
    if (!(count >= this.lastCount) && this.startText.size < MAX_STARTS)
      this.startText.set(this.store.rows(), (this.scanner.texts()[timeIndex] ?? "").trim());
    this.lastCount = count;
    for (const [c, raw] of odd) {
      this.text[c]++;
      if (!this.firstText.has(c)) this.firstText.set(c, { row: line, raw });
    }
    this.row = this.store.keepRow();
    if (this.row === 0) this.columns = this.store.piece();
  }

  oddCell(column: number, cell: string): number {
    const { form, timeIndex, timeForm } = this.options;
    if (form.decimalOpen && COMMA_NUMBER.test(cell)) refuseDecimal(cell);
    if (column === timeIndex) return readTimeCell(cell, timeForm, form.decimal);
    const value = parseNumber(cell, form.decimal);
    if (value === null) this.oddTexts.push([column, cell]);
    return value ?? Number.NaN;
  }

  push(bytes: Uint8Array): void {
    this.scanner.push(bytes);
  }

  finish(problems: LogProblem[]): CollectedTable {
    const { form, timeIndex, timeForm } = this.options;
    this.scanner.finish();
    const { headers, refusedCount, refused, firstText, startText, text, store } = this;
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
  }
}
