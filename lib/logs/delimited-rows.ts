import Papa from "papaparse";

/** One row of a delimited text with its line number (first line of the file = 1). */
export interface DelimitedRow {
  line: number;
  cells: string[];
}

/**
 * Walks over the rows of a delimited text. Without a quote mark in the text a plain split is exact and fast;
 * with one, papaparse does the quoting (delimiter always given, it never guesses). Blank lines are skipped.
 * Line ends may be LF, CRLF or CR. Cells are not trimmed. Return false from `onRow` to stop.
 */
export function forEachRow(
  text: string,
  delimiter: string,
  onRow: (row: DelimitedRow) => boolean | undefined,
): void {
  if (text.includes('"')) {
    forEachQuotedRow(text, delimiter, onRow);
    return;
  }
  let from = 0;
  let line = 0;
  const lineFeed = text.includes("\n") ? "\n" : "\r";
  while (from < text.length) {
    let end = text.indexOf(lineFeed, from);
    if (end < 0) end = text.length;
    line++;
    const stop = end > from && text.charCodeAt(end - 1) === 13 ? end - 1 : end;
    const content = text.slice(from, stop);
    from = end + 1;
    if (content.trim() === "") continue;
    if (onRow({ line, cells: content.split(delimiter) }) === false) return;
  }
}

function forEachQuotedRow(
  text: string,
  delimiter: string,
  onRow: (row: DelimitedRow) => boolean | undefined,
): void {
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
