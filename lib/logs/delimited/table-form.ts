import { FileRefusedError } from "@/lib/errors";
import { isTimeTitle } from "@/lib/logs/channels/channel-names";
import { type DelimitedRow, firstRows } from "@/lib/logs/delimited/delimited-rows";
import { isMissingMark, parseNumber, ungrouped } from "@/lib/logs/parse-number";
import type { ChannelKey } from "@/lib/logs/types";
import { parseUnit } from "@/lib/units/unit-text";

/** How a delimited text is laid out. Lines are numbered from 1. */
export interface TableForm {
  delimiter: string;
  decimal: "." | ",";
  /** No cell of the first rows and no key tells the decimal sign: it is a point until a cell says otherwise. */
  decimalOpen: boolean;
  /** The key states another decimal sign than the cells show. */
  decimalDisagrees: boolean;
  /** Column titles as written; `column 1`, … when the file has no header row. */
  titles: string[];
  /** Unit row cells by column, or null. */
  unitRow: string[] | null;
  /** Data starts after this line. */
  lastHeadLine: number;
  /** Lines before the header that are no part of the table. */
  preambleLines: number;
}

const SAMPLE_ROWS = 200;
/** Rows by which delimiters are judged. */
const DELIMITER_ROWS = 60;
/** A log has tens of columns; the bounds keep a made-up file from claiming memory. */
const MAX_COLUMNS = 2000;
const MAX_TITLE_LENGTH = 200;
const DELIMITERS = ["\t", ";", "|", ","] as const;
const TIME_LIKE = /^\d{1,4}[-_/.:]\d{1,2}[-_/.:]\d{1,4}|^\d{1,2}:\d{2}([.,]\d+)?$/;

function looksNumeric(cell: string): boolean {
  if (cell.trim() === "") return false;
  const dot = parseNumber(cell, ".");
  if (dot !== null) return !Number.isNaN(dot);
  const comma = parseNumber(cell, ",");
  return (comma !== null && !Number.isNaN(comma)) || TIME_LIKE.test(cell.trim());
}

/** Number of cells without empty ones at the end (a trailing delimiter makes one). */
function filledWidth(cells: readonly string[]): number {
  let width = cells.length;
  while (width > 0 && (cells[width - 1] ?? "").trim() === "") width--;
  return width;
}

function commonWidth(rows: readonly DelimitedRow[]): { width: number; share: number } {
  const counts = new Map<number, number>();
  for (const row of rows) counts.set(row.cells.length, (counts.get(row.cells.length) ?? 0) + 1);
  let width = 0;
  let best = 0;
  for (const [w, n] of counts) if (n > best || (n === best && w > width)) [width, best] = [w, n];
  return { width, share: rows.length === 0 ? 0 : best / rows.length };
}

function findDelimiter(text: string): string {
  let best = ",";
  let bestScore = 0;
  for (const delimiter of DELIMITERS) {
    const rows = firstRows(text, delimiter, DELIMITER_ROWS);
    const { width, share } = commonWidth(rows);
    if (width < 2) continue;
    let numeric = 0;
    let filled = 0;
    for (const row of rows) {
      if (row.cells.length !== width) continue;
      for (const cell of row.cells) {
        if (cell.trim() === "") continue;
        filled++;
        if (looksNumeric(cell) || isMissingMark(cell)) numeric++;
      }
    }
    const score = share * (0.02 + (filled === 0 ? 0 : numeric / filled)) + 1e-4 * Math.min(width, 50);
    if (score > bestScore) [best, bestScore] = [delimiter, score];
  }
  return best;
}

/** Decides the decimal sign from the cells themselves; contradicting or undecidable evidence is refused. */
function findDecimal(rows: readonly DelimitedRow[]): { decimal: "." | ","; decimalOpen: boolean } {
  let dot: string | null = null;
  let comma: string | null = null;
  let commaOpen: string | null = null;
  for (const row of rows) {
    for (const raw of row.cells) {
      const cell = ungrouped(raw.trim());
      const match = /^[+-]?(\d*)([.,])(\d+)(e[+-]?\d+)?$/i.exec(cell);
      if (match) {
        const [, whole = "", sign, fraction = ""] = match;
        const open = fraction.length === 3 && /^[1-9]\d{0,2}$/.test(whole);
        if (sign === ".") dot ??= cell;
        else if (open) commaOpen ??= cell;
        else comma ??= cell;
      } else if (/^[+-]?\d{1,3}(,\d{3})+\.\d+$/.test(cell)) dot ??= cell;
      else if (/^[+-]?\d{1,3}(\.\d{3})+,\d+$/.test(cell)) comma ??= cell;
    }
  }
  if (dot !== null && comma !== null) {
    throw new FileRefusedError(
      "ambiguous_decimal",
      `Both "${dot}" and "${comma}" occur as numbers, so the decimal sign is in doubt. State it in a channel key ("decimal": "." or ",").`,
    );
  }
  if (comma !== null) return { decimal: ",", decimalOpen: false };
  if (dot === null && commaOpen !== null) {
    throw new FileRefusedError(
      "ambiguous_decimal",
      `"${commaOpen}" can be a decimal number or a whole one with a thousands mark, and no other cell decides it. State the decimal sign in a channel key.`,
    );
  }
  return { decimal: ".", decimalOpen: dot === null };
}

type Decimal = Pick<TableForm, "decimal" | "decimalOpen" | "decimalDisagrees">;

/** The decimal sign as the key states it, else as the cells show it; cells that contradict a key are told, not obeyed. */
function chooseDecimal(rows: readonly DelimitedRow[], stated: "." | "," | undefined): Decimal {
  if (!stated) return { ...findDecimal(rows), decimalDisagrees: false };
  const common = { decimal: stated, decimalOpen: false };
  try {
    const found = findDecimal(rows);
    return { ...common, decimalDisagrees: !found.decimalOpen && found.decimal !== stated };
  } catch (error) {
    if (!(error instanceof FileRefusedError)) throw error;
    return { ...common, decimalDisagrees: false };
  }
}

const hasNumber = (cells: readonly string[]) => cells.some((cell) => looksNumeric(cell));
const stripBrackets = (cell: string) => cell.trim().replace(/^[([{]\s*|\s*[)\]}]$/g, "");

/** A row of values: at least half of its filled cells are numbers or missing marks, at least one a number. */
function isDataRow(cells: readonly string[]): boolean {
  const filled = cells.filter((cell) => cell.trim() !== "");
  return (
    hasNumber(filled) &&
    2 * filled.filter((cell) => looksNumeric(cell) || isMissingMark(cell)).length >= filled.length
  );
}

/** A row of titles has no number; some loggers number their columns, but then the time is still named. */
function isTitleRow(cells: readonly string[]): boolean {
  return !hasNumber(cells) || (!isDataRow(cells) && cells.some((cell) => isTimeTitle(cell)));
}

function isUnitRow(cells: readonly string[]): boolean {
  const filled = cells.filter((cell) => cell.trim() !== "");
  if (filled.length === 0 || hasNumber(cells)) return false;
  const units = filled.filter((cell) => parseUnit(stripBrackets(cell)) !== null);
  return units.length >= filled.length / 2;
}

/** The row of titles: a row without a number above the data, as wide as the data; the one that names a time, else the first. -1: there is none. */
function findHeader(rows: readonly DelimitedRow[], width: number): number {
  const first = rows.findIndex((row) => row.cells.length >= width && isDataRow(row.cells));
  const limit = first < 0 ? rows.length : first;
  let found = -1;
  for (let i = 0; i < limit; i++) {
    const cells = rows[i]?.cells ?? [];
    const filled = filledWidth(cells);
    if (filled < Math.max(2, width - 1) || !isTitleRow(cells)) continue;
    if (/^\s*(#|\/\/|;|%)/.test(cells[0] ?? "") && i + 1 < limit) {
      const next = rows[i + 1]?.cells ?? [];
      if (!hasNumber(next) && filledWidth(next) >= width - 1 && !isUnitRow(next)) continue;
    }
    if (cells.some(isTimeTitle) && !isUnitRow(cells)) return i;
    if (found < 0) found = i;
  }
  if (found >= 0) return found;
  // Lines of a preamble can look like values; then the row of titles is the one that names a time.
  return rows.findIndex(
    ({ cells }) =>
      filledWidth(cells) >= Math.max(2, width - 1) && !hasNumber(cells) && cells.some(isTimeTitle),
  );
}

/**
 * Finds delimiter, decimal sign, header row and unit row of a delimited text; each may be stated in the key.
 * Throws FileRefusedError `no_data_rows`, `ambiguous_decimal` or `too_many_columns`.
 */
export function findTableForm(text: string, key: ChannelKey = {}): TableForm {
  const stated = /^sep=(.)\r?\n/i.exec(text);
  const delimiter = key.delimiter ?? stated?.[1] ?? findDelimiter(text);
  const all = firstRows(text, delimiter, SAMPLE_ROWS);
  const rows = stated ? all.slice(1) : all;
  const { width } = commonWidth(rows.length > 8 ? rows.slice(Math.floor(rows.length / 4)) : rows.slice(-3));
  const at = key.header_rows === undefined ? findHeader(rows, width) : key.header_rows - 1;
  const header = at >= 0 ? rows[at] : undefined;
  const columns = header ? filledWidth(header.cells) : width;
  if (width > MAX_COLUMNS || columns > MAX_COLUMNS) {
    throw new FileRefusedError(
      "too_many_columns",
      `The log has ${Math.max(width, columns)} columns; at most ${MAX_COLUMNS} are read. Export fewer channels.`,
    );
  }
  const after = rows.slice(at + 1);
  const next = after[0];
  const withUnits = next !== undefined && (key.unit_row ?? (header !== undefined && isUnitRow(next.cells)));
  const data = withUnits ? after.slice(1) : after;
  if (data.length === 0 && header !== undefined) {
    throw new FileRefusedError(
      "no_data_rows",
      "The file holds a header row and no row of values below it. Check that the logger was recording, then export again.",
    );
  }
  const titles = header
    ? header.cells.slice(0, Math.max(columns, 1)).map((title) => title.trim().slice(0, MAX_TITLE_LENGTH))
    : Array.from({ length: Math.max(1, width) }, (_, i) => `column ${i + 1}`);
  if (header && /^\s*(#|\/\/|%)\s*/.test(titles[0] ?? ""))
    titles[0] = (titles[0] ?? "").replace(/^\s*(#|\/\/|%)\s*/, "");
  return {
    delimiter,
    ...chooseDecimal(data, key.decimal),
    titles,
    unitRow: withUnits && next ? next.cells.map(stripBrackets) : null,
    lastHeadLine: withUnits && next ? next.line : (header?.line ?? (stated ? 1 : 0)),
    preambleLines: header ? header.line - 1 : 0,
  };
}
