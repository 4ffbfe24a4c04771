import { FileRefusedError } from "@/lib/errors";
import { splitQuoted } from "@/lib/logs/delimited/delimited-rows";

/** How rows are cut and how their cells become numbers. */
export interface ScanForm {
  delimiter: string;
  decimal: "." | ",";
  /** Columns of the table; further cells are counted, not kept. */
  width: number;
  /** "\n", or "\r" in a file that has no other line end. */
  lineEnd: "\n" | "\r";
  /** Lines up to this one are the head and are passed over; first line = 1. */
  lastHeadLine: number;
  /** A column that is always read by `oddCell`, e.g. a clock; −1 = none. */
  textColumn: number;
}

/** Where the numbers go. */
export interface RowTarget {
  /** One array a column; the next row is written at place `row` of each and stays unless `endRow` moves `row`. */
  columns: Float64Array[];
  row: number;
  /** Value of a cell that is no plain number, NaN = missing. */
  oddCell: (column: number, text: string) => number;
  /**
   * A row is complete.
   * @param filled cells without empty ones at the end
   */
  endRow: (line: number, cells: number, filled: number) => void;
}

/** Exact powers of ten: the whole-number mantissa of up to 15 digits and 10^k are exact, so one division rounds once. */
const TEN = Float64Array.from({ length: 16 }, (_, k) => Number(`1e${k}`));
const MOST_DIGITS = 15;
/** So many digits fit a machine word. */
const WORD_DIGITS = 9;
/** A quoted cell with line ends in it may be this long; beyond, the quote is taken as a mark of its own. */
const LONGEST_QUOTED_LINE = 1 << 20;
/** No table of numbers has such a line; the bound keeps a made-up file from claiming memory. */
const LONGEST_LINE = 8 << 20;
const [TAB, CR, SPACE, QUOTE, PLUS, MINUS, ZERO] = [9, 13, 32, 34, 43, 45, 48];

function refuseLine(line: number): never {
  throw new FileRefusedError(
    "line_too_long",
    `Line ${line} is longer than ${LONGEST_LINE >> 20} MB, which no table of numbers has. Export the log again with one row a line.`,
  );
}

/** Digits of [from, to) as one whole number, the decimal sign passed over; exact up to 15 digits. */
function longMantissa(bytes: Uint8Array, from: number, to: number): number {
  let mantissa = 0;
  for (let i = from; i < to; i++) {
    const digit = bytes[i] - ZERO;
    if (digit >>> 0 < 10) mantissa = mantissa * 10 + digit;
  }
  return mantissa;
}

/**
 * Cuts bytes of delimited text into rows of numbers, in one pass and without making strings of plain numbers; feed it piece
 * by piece, an unfinished line waits for the next piece. Text must be ASCII-compatible (UTF-8, windows-1252).
 * Same cells as `forEachRow` gives: RFC 4180 quotes, LF, CRLF or CR line ends, blank lines passed over. O(bytes). A class, as is
 * its target: functions made anew for each log would have the engine throw away what it compiled for the last one.
 */
export class RowScanner {
  private readonly lineEnd: number;
  private readonly plain: boolean;
  private readonly delimiter: number;
  private readonly decimal: number;
  private readonly blankDelimiter: boolean;
  private line = 0;
  /** The line under way, for whoever asks for its text. */
  private readonly current: { bytes: Uint8Array; from: number; end: number } = {
    bytes: new Uint8Array(0),
    from: 0,
    end: 0,
  };
  /** Pieces of the line that has no end yet. */
  private waiting: Uint8Array[] = [];
  private waitingBytes = 0;

  constructor(
    private readonly form: ScanForm,
    private readonly target: RowTarget,
    private readonly decode: (bytes: Uint8Array) => string,
  ) {
    this.lineEnd = form.lineEnd.charCodeAt(0);
    this.plain = /^[\t;,|:!#&^~/]$/.test(form.delimiter);
    this.delimiter = this.plain ? form.delimiter.charCodeAt(0) : -1;
    // A mark that cuts cells can't be the decimal sign as well: then only quoted cells hold one.
    this.decimal = form.decimal === form.delimiter ? -1 : form.decimal.charCodeAt(0);
    this.blankDelimiter = form.delimiter.trim() === "";
  }

  /** First position after the line that begins at `from`, quotes minded; −1 when a quoted cell is not closed before `to`. */
  private logicalEnd(bytes: Uint8Array, from: number, to: number): number {
    let quotes = 0;
    for (let i = from; i < to; i++) {
      if (bytes[i] === QUOTE) quotes++;
      else if (bytes[i] === this.lineEnd && quotes % 2 === 0) return i + 1;
    }
    return -1;
  }

  private textLine(bytes: Uint8Array, from: number, end: number): string {
    let stop = end;
    if (stop > from && bytes[stop - 1] === this.lineEnd) stop--;
    if (stop > from && bytes[stop - 1] === CR) stop--;
    return this.decode(bytes.subarray(from, stop));
  }

  private split(text: string): string[] {
    const { delimiter } = this.form;
    return text.includes('"') ? splitQuoted(text, delimiter) : text.split(delimiter);
  }

  /** A line with quotes, or any line where the delimiter is no single ASCII character. */
  private slowLine(bytes: Uint8Array, from: number, to: number, final: boolean): number {
    const { lineEnd, target } = this;
    const { lastHeadLine, width } = this.form;
    let end = this.logicalEnd(bytes, from, to);
    if (end < 0 && (final || to - from > LONGEST_QUOTED_LINE)) end = bytes.indexOf(lineEnd, from) + 1;
    if (end < 0) return from;
    const text = this.textLine(bytes, from, end);
    const at = this.line + 1;
    for (let i = from; i < end; i++) if (bytes[i] === lineEnd) this.line++;
    if (at <= lastHeadLine || text.trim() === "") return end;
    Object.assign(this.current, { bytes, from, end });
    const cells = this.split(text);
    const { columns, row } = target;
    let filled = 0;
    for (let c = 0; c < cells.length; c++) {
      if (cells[c].trim() !== "") filled = c + 1;
      if (c < width) columns[c][row] = target.oddCell(c, cells[c]);
    }
    for (let c = cells.length; c < width; c++) columns[c][row] = Number.NaN;
    target.endRow(at, cells.length, filled);
    return end;
  }

  /** Reads whole lines of [from, to), the last byte of which is a line end; gives the position up to which it came. */
  private scan(bytes: Uint8Array, from: number, to: number, final: boolean): number {
    // The engine keeps locals of a hot loop in registers, but reads members again and again.
    const { delimiter: cellEnd, lineEnd: rowEnd, decimal: point, plain, target } = this;
    const { width: cells, textColumn: asText, lastHeadLine } = this.form;
    const tab = cellEnd === TAB ? SPACE : TAB;
    let i = from;
    lines: while (i < to) {
      const start = i;
      if (!plain || this.line < lastHeadLine) {
        i = this.slowLine(bytes, start, to, final);
        if (i === start) return start;
        continue;
      }
      const { columns, row } = target;
      let column = 0;
      let filled = 0;
      for (; ; column++) {
        const cellStart = i;
        let c = bytes[i];
        if (c <= SPACE) while (c === SPACE || c === tab) c = bytes[++i];
        const negative = c === MINUS;
        if (negative || c === PLUS) c = bytes[++i];
        const first = i;
        let mantissa = 0;
        let digit = c - ZERO;
        while (digit >>> 0 < 10) {
          mantissa = (Math.imul(mantissa, 10) + digit) | 0;
          c = bytes[++i];
          digit = c - ZERO;
        }
        let digits = i - first;
        let fraction = 0;
        if (c === point) {
          c = bytes[++i];
          digit = c - ZERO;
          const begin = i;
          while (digit >>> 0 < 10) {
            mantissa = (Math.imul(mantissa, 10) + digit) | 0;
            c = bytes[++i];
            digit = c - ZERO;
          }
          fraction = i - begin;
          digits += fraction;
        }
        const stop = i;
        if (c <= SPACE) {
          while (c === SPACE || c === tab) c = bytes[++i];
          if (c === CR && bytes[i + 1] === rowEnd) c = bytes[++i];
        }
        let value: number;
        if ((c === cellEnd || c === rowEnd) && digits > 0 && digits <= MOST_DIGITS && column !== asText) {
          value = digits <= WORD_DIGITS ? mantissa : longMantissa(bytes, first, stop);
          if (fraction > 0) value /= TEN[fraction];
          if (negative) value = -value;
          filled = column + 1;
        } else {
          while (c !== cellEnd && c !== rowEnd && c !== QUOTE) c = bytes[++i];
          if (c === QUOTE) {
            i = this.slowLine(bytes, start, to, final);
            if (i === start) return start;
            continue lines;
          }
          const textEnd = c === rowEnd && i > cellStart && bytes[i - 1] === CR ? i - 1 : i;
          value = Number.NaN;
          if (textEnd > cellStart) {
            const text = this.decode(bytes.subarray(cellStart, textEnd));
            if (text.trim() !== "") {
              filled = column + 1;
              if (column < cells) value = target.oddCell(column, text);
            }
          }
        }
        if (column < cells) columns[column][row] = value;
        i++;
        if (c === rowEnd) break;
      }
      this.line++;
      const found = column + 1;
      if (filled === 0 && (found === 1 || this.blankDelimiter)) continue;
      for (let k = found; k < cells; k++) columns[k][row] = Number.NaN;
      this.current.bytes = bytes;
      this.current.from = start;
      this.current.end = i;
      target.endRow(this.line, found, filled);
    }
    return i;
  }

  private wait(bytes: Uint8Array): void {
    if (bytes.length === 0) return;
    if (this.waitingBytes + bytes.length > LONGEST_LINE) refuseLine(this.line + 1);
    this.waiting.push(bytes.slice());
    this.waitingBytes += bytes.length;
  }

  /** What waited with `tail` behind it; nothing waits then. */
  private join(tail: Uint8Array): Uint8Array {
    if (this.waiting.length === 0) return tail;
    const joined = new Uint8Array(this.waitingBytes + tail.length);
    let at = 0;
    for (const piece of this.waiting) {
      joined.set(piece, at);
      at += piece.length;
    }
    joined.set(tail, at);
    this.waiting = [];
    this.waitingBytes = 0;
    return joined;
  }

  /** The cells of the row under way as text; decodes and splits the line, so it is for the rare row only. */
  texts(): string[] {
    const { bytes, from, end } = this.current;
    return this.split(this.textLine(bytes, from, end));
  }

  push(piece: Uint8Array): void {
    // A Buffer is another shape to the engine: one loop that met both would read every byte the slow way.
    const bytes = new Uint8Array(piece.buffer, piece.byteOffset, piece.byteLength);
    const { lineEnd } = this;
    const last = bytes.lastIndexOf(lineEnd) + 1;
    if (last > 0) {
      // Only the line that was cut in two is copied, unless a quote in it is still open.
      const first = this.waitingBytes > 0 ? bytes.indexOf(lineEnd) + 1 : 0;
      const cut = this.join(bytes.subarray(0, first));
      this.wait(cut.subarray(this.scan(cut, 0, cut.length, false)));
      const whole = this.join(bytes.subarray(first, last));
      this.wait(whole.subarray(this.scan(whole, 0, whole.length, false)));
    }
    this.wait(bytes.subarray(last));
  }

  finish(): void {
    const rest = this.join(new Uint8Array());
    const closed = new Uint8Array(rest.length + 1);
    closed.set(rest);
    closed[rest.length] = this.lineEnd;
    for (let from = 0; from < closed.length; ) from = this.scan(closed, from, closed.length, true);
  }
}
