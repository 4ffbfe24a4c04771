import { FileRefusedError } from "@/lib/errors";
import { firstRows } from "@/lib/logs/delimited/delimited-rows";
import { findTableForm, type TableForm } from "@/lib/logs/delimited/table-form";
import { openText } from "@/lib/logs/delimited/text-bytes";
import type { LogHead } from "@/lib/logs/preview/gather-head";
import type { ChannelKey } from "@/lib/logs/types";

/** A longer cell is no number; it is cut so that a made-up file does not fill the page. */
const SHOWN_CELL = 200;

/** How a text table is laid out, as far as it can be told without its values being read. */
export interface TextLayout {
  encoding: string;
  form: TableForm;
  /** Which row that is not blank holds the titles, first = 1; 0: none does. In the spelling of a channel key. */
  headerRow: number;
  /** Cells of the first rows of values, one a title. */
  rows: string[][];
}

/** The form although the decimal sign is in doubt: titles and cells are the same either way. */
function formOf(text: string, key: ChannelKey): TableForm {
  try {
    return findTableForm(text, key);
  } catch (error) {
    if (!(error instanceof FileRefusedError) || error.code !== "ambiguous_decimal") throw error;
    return findTableForm(text, { ...key, decimal: "," });
  }
}

/**
 * Layout of a text log under a key.
 * @param rowCount how many rows of values are wanted
 * @throws FileRefusedError `not_text`, `no_data_rows`, `too_many_columns`
 */
export function textLayout(head: LogHead, key: ChannelKey, rowCount: number): TextLayout {
  const text = openText(head.bytes, head.complete, key.encoding);
  const form = formOf(text.head, key);
  const all = firstRows(text.head, form.delimiter, rowCount + 200);
  const stated = /^sep=(.)\r?\n/i.test(text.head);
  const lines = stated ? all.slice(1) : all;
  const hasTitles = form.lastHeadLine > (stated ? 1 : 0);
  const headerLine = form.preambleLines + 1;
  return {
    encoding: text.encoding,
    form,
    headerRow: hasTitles ? lines.findIndex((row) => row.line === headerLine) + 1 : 0,
    rows: lines
      .filter((row) => row.line > form.lastHeadLine)
      .slice(0, rowCount)
      .map((row) => row.cells.slice(0, form.titles.length).map((cell) => cell.slice(0, SHOWN_CELL))),
  };
}
