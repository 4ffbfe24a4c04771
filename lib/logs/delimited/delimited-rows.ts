import Papa from "papaparse";

/** One row of a delimited text with its line number (first line of the file = 1). */
export interface DelimitedRow {
  line: number;
  cells: string[];
}

type OnRow = (row: DelimitedRow) => boolean | undefined;

/**
 * Walks over the rows of a delimited text. A line is split at the delimiter, a line with quotes by its quotes; where a
 * quoted cell holds a line end papaparse reads the whole (delimiter always given, it never guesses). Blank lines are
 * skipped. Line ends may be LF, CRLF or CR. Cells are not trimmed. Return false from `onRow` to stop.
 */
function forEachRow(text: string, delimiter: string, onRow: OnRow): void {
  const quoted = text.includes('"');
  if (quoted && hasQuotedLineEnd(text)) {
    forEachParsedRow(text, delimiter, onRow);
    return;
  }
  forEachLine(text, (content, line) => {
    if (content.trim() === "") return;
    const cells =
      quoted && content.includes('"') ? splitQuoted(content, delimiter) : content.split(delimiter);
    return onRow({ line, cells });
  });
}

function forEachLine(text: string, onLine: (content: string, line: number) => boolean | undefined): void {
  const lineEnd = text.includes("\n") ? "\n" : "\r";
  let line = 0;
  for (let from = 0; from < text.length; ) {
    let end = text.indexOf(lineEnd, from);
    if (end < 0) end = text.length;
    line++;
    const stop = end > from && text.charCodeAt(end - 1) === 13 ? end - 1 : end;
    if (onLine(text.slice(from, stop), line) === false) return;
    from = end + 1;
  }
}

/** True when some line holds an odd number of quotes: a quoted cell goes on in the next line. */
function hasQuotedLineEnd(text: string): boolean {
  let found = false;
  forEachLine(text, (content) => {
    let count = 0;
    for (let i = content.indexOf('"'); i >= 0; i = content.indexOf('"', i + 1)) count++;
    found = count % 2 === 1;
    return found ? false : undefined;
  });
  return found;
}

/** Splits one line by its quotes (RFC 4180): a cell is quoted when it begins with a quote, "" inside is one quote. */
export function splitQuoted(line: string, delimiter: string): string[] {
  const cells: string[] = [];
  for (let at = 0; ; ) {
    if (line.charCodeAt(at) !== 34) {
      const end = line.indexOf(delimiter, at);
      cells.push(end < 0 ? line.slice(at) : line.slice(at, end));
      if (end < 0) return cells;
      at = end + delimiter.length;
      continue;
    }
    let close = line.indexOf('"', at + 1);
    while (close >= 0 && line.charCodeAt(close + 1) === 34) close = line.indexOf('"', close + 2);
    const stop = close < 0 ? line.length : close;
    const end = line.indexOf(delimiter, stop);
    const cell = line.slice(at + 1, stop);
    // Something after the closing quote: the cell is kept as written, so that it counts as text, not as a number.
    if (stop + 1 < (end < 0 ? line.length : end)) cells.push(line.slice(at, end < 0 ? line.length : end));
    else cells.push(cell.includes('"') ? cell.replaceAll('""', '"') : cell);
    if (end < 0) return cells;
    at = end + delimiter.length;
  }
}

function forEachParsedRow(text: string, delimiter: string, onRow: OnRow): void {
  let line = 0;
  Papa.parse<string[]>(text, {
    delimiter,
    skipEmptyLines: false,
    step: (result, parser) => {
      line++;
      const at = line;
      const cells = result.data;
      for (const cell of cells)
        for (let i = cell.indexOf("\n"); i >= 0; i = cell.indexOf("\n", i + 1)) line++;
      if (cells.length === 1 && (cells[0] ?? "").trim() === "") return;
      if (onRow({ line: at, cells }) === false) parser.abort();
    },
  });
}

/** The first rows of a text, for looking at its form. */
export function firstRows(text: string, delimiter: string, count: number): DelimitedRow[] {
  const rows: DelimitedRow[] = [];
  forEachRow(text, delimiter, (row) => {
    rows.push(row);
    return rows.length < count ? undefined : false;
  });
  return rows;
}
