import { FileRefusedError } from "@/lib/errors";
import type { LogHead } from "@/lib/logs/preview/gather-head";
import { findHeader } from "@/lib/logs/preview/header-fingerprint";
import { type PreviewColumn, previewColumns, unreadColumns } from "@/lib/logs/preview/preview-columns";
import { readHead } from "@/lib/logs/preview/read-head";
import { type TextLayout, textLayout } from "@/lib/logs/preview/text-layout";
import type { ReadLogOptions } from "@/lib/logs/read-log";
import { sniffLog } from "@/lib/logs/sniff-log";
import type { ChannelKey, LogFormat, LogProblem, LogTable, RefusedRow } from "@/lib/logs/types";

/** How a text log was read, in the spelling of a channel key. */
export interface PreviewLayout {
  delimiter: string;
  decimal: "." | ",";
  header_rows: number;
  unit_row: boolean;
  encoding: string;
}

/** What reading the beginning of a log gives, for a page: plain values, gaps null. */
export interface LogPreview {
  /** Null where the file has no header that can be read. */
  format: LogFormat | null;
  /** Whether all of the file was looked at. */
  wholeFile: boolean;
  layout: PreviewLayout | null;
  time: { column: string; form: string; rateHz: number } | null;
  /** First rows of values as parsed, cell by cell in the order of `columns`. */
  rows: string[][];
  columns: PreviewColumn[];
  /** What else the file holds and is not read: texts, raw frames, groups without a time. It has no cells to choose from. */
  notRead: string[];
  rowsRead: number;
  /** The first five. */
  rowsRefused: RefusedRow[];
  problems: LogProblem[];
  /** Why the log can't be read like this; the columns then tell titles and cells only. */
  refusal: LogProblem | null;
}

const SHOWN_ROWS = 20;
const LISTED_REFUSED = 5;

function layoutOf(head: LogHead, key: ChannelKey): TextLayout | null {
  if (sniffLog(head.bytes).kind !== "delimited") return null;
  try {
    return textLayout(head, key, SHOWN_ROWS);
  } catch (error) {
    if (error instanceof FileRefusedError) return null;
    throw error;
  }
}

function tableOf(head: LogHead, options: ReadLogOptions): LogTable | FileRefusedError {
  try {
    return readHead(head, options);
  } catch (error) {
    if (error instanceof FileRefusedError) return error;
    throw error;
  }
}

/** Rows of a log that has no cells of its own, from the values. */
function valueRows(table: LogTable): string[][] {
  const text = (value: number | undefined) =>
    value === undefined || Number.isNaN(value) ? "" : String(Number(value.toPrecision(9)));
  const count = Math.min(SHOWN_ROWS, table.timeS.length);
  return Array.from({ length: count }, (_, row) => [
    text(table.timeS[row]),
    ...table.channels.map((channel) => (channel.timeS ? "" : text(channel.values[row]))),
  ]);
}

/** Reads the beginning of a log under a key, as the import does, and tells what came of it. A refusal is part of the answer. */
export function previewLog(head: LogHead, options: ReadLogOptions): LogPreview {
  const layout = layoutOf(head, options.key ?? {});
  const read = tableOf(head, options);
  const table = read instanceof FileRefusedError ? null : read;
  const rows = layout?.rows ?? (table ? valueRows(table) : []);
  return {
    format: table?.format ?? findHeader(head)?.format ?? null,
    wholeFile: head.complete,
    layout: layout && {
      delimiter: layout.form.delimiter,
      decimal: layout.form.decimal,
      header_rows: layout.headerRow,
      unit_row: layout.form.unitRow !== null,
      encoding: layout.encoding,
    },
    time: table && { column: table.time.column, form: table.time.form, rateHz: table.time.rateHz },
    rows,
    columns: table
      ? previewColumns(table, layout?.form.titles ?? null, rows)
      : unreadColumns(layout?.form.titles ?? [], layout?.form.unitRow ?? null, rows),
    notRead: layout ? [] : (table?.leftOut ?? []),
    rowsRead: table?.rowsRead ?? 0,
    rowsRefused: table?.rowsRefused.slice(0, LISTED_REFUSED) ?? [],
    problems: table?.problems ?? [],
    refusal: read instanceof FileRefusedError ? { code: read.code, message: read.message } : null,
  };
}
