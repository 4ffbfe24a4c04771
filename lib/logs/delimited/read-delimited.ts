import { FileRefusedError } from "@/lib/errors";
import { isTimeTitle, splitTitle } from "@/lib/logs/channels/channel-names";
import { buildChannels, missingKeyColumns, type RawColumn } from "@/lib/logs/channels/channel-values";
import { checkMissing } from "@/lib/logs/channels/missing-values";
import { type CollectedTable, hasNumber, RowCollector } from "@/lib/logs/delimited/collect-rows";
import { firstRows } from "@/lib/logs/delimited/delimited-rows";
import { spreadTimes } from "@/lib/logs/delimited/spread-times";
import { findTableForm, type TableForm } from "@/lib/logs/delimited/table-form";
import { openText } from "@/lib/logs/delimited/text-bytes";
import { buildTimeAxis, unwrapMidnight } from "@/lib/logs/times/time-axis";
import { findTimeForm, TIME_FORMS, type TimeForm } from "@/lib/logs/times/time-forms";
import type { ChannelKey, LogProblem, LogTable } from "@/lib/logs/types";
import { parseUnit } from "@/lib/units/unit-text";

/** Fewer rows than this carry no run. */
const MIN_ROWS = 10;
const PROBE_ROWS = 200;
/** So much of a file decides its form: encoding, delimiter, decimal sign, titles, units, time. */
export const HEAD_BYTES = 1 << 20;

type Drive = "FWD" | "RWD" | "AWD";

interface TimeColumn {
  index: number;
  form: TimeForm;
}

function unitOf(form: TableForm, index: number): string | null {
  return form.unitRow?.[index] || splitTitle(form.titles[index] ?? "").unitText;
}

function findTimeColumn(text: string, form: TableForm, key: ChannelKey, problems: LogProblem[]): TimeColumn {
  const rows = firstRows(text, form.delimiter, PROBE_ROWS).filter((row) => row.line > form.lastHeadLine);
  const statedForm = TIME_FORMS.find((name) => name === key.time?.form);
  const candidates = key.time
    ? [form.titles.indexOf(key.time.column)].filter((index) => index >= 0)
    : form.titles.flatMap((title, index) => (isTimeTitle(title) || /^column 1$/.test(title) ? [index] : []));
  for (const index of candidates) {
    const dimension = parseUnit(unitOf(form, index))?.dimension ?? "time";
    // A word for time in some language beside the unit of a speed, a temperature …: no time.
    if (!key.time && dimension !== "time" && dimension !== "number") continue;
    const cells = rows.map((row) => row.cells[index] ?? "");
    if (statedForm) return { index, form: statedForm };
    const found = findTimeForm(cells, unitOf(form, index), form.decimal);
    if (found === null) continue;
    // A file without titles names no column: only a written date or clock is a time beyond doubt.
    if (form.titles[index] === "column 1" && found.form !== "iso" && found.form !== "clock" && !key.time)
      continue;
    if (found.assumed) problems.push({ code: "time_unit_assumed", message: found.assumed });
    return { index, form: found.form };
  }
  throw new FileRefusedError(
    "no_time_column",
    `No column of this log is a time (columns: ${form.titles.slice(0, 8).join(", ")}). Export it with a time column, or name the column in a channel key.`,
  );
}

function refuseUnusable(table: CollectedTable, time: TimeColumn): void {
  const n = table.rows;
  if (n === 0)
    throw new FileRefusedError(
      "no_data_rows",
      "The file holds no row of values. Check that the logger was recording, then export again.",
    );
  const others = table.columns.flatMap((_, c) => (c === time.index ? [] : [c]));
  if (others.some((c) => table.text[c] > 0) && !others.some((c) => hasNumber(table.columns[c]))) {
    throw new FileRefusedError(
      "non_numeric_values",
      "No column but the time holds numbers: the cells are text. Export the log with numeric values.",
    );
  }
  if (n < MIN_ROWS) {
    throw new FileRefusedError(
      "too_few_samples",
      `The log holds ${n} ${n === 1 ? "row" : "rows"} of values; at least ${MIN_ROWS} are needed to see a run.`,
    );
  }
}

/** Time cell as written in row `first`, or in the last row before it from which time went on. */
function startText(table: CollectedTable, first: number): string {
  let text = "";
  for (const [row, cell] of table.startText) if (row <= first) text = cell;
  return text;
}

/** Columns in the order of the axis; each raw column is let go as soon as it is done with. */
function takeColumns(table: CollectedTable, order: Uint32Array | null, form: TableForm, timeIndex: number) {
  const columns: RawColumn[] = [];
  const leftOut: string[] = [];
  form.titles.forEach((title, index) => {
    if (index === timeIndex) return;
    const raw = table.columns[index];
    table.columns[index] = new Float64Array();
    if ((table.text[index] > 0 || title === "") && !hasNumber(raw)) {
      leftOut.push(title === "" ? `column ${index + 1}` : title);
      return;
    }
    let values = raw;
    if (order) {
      values = new Float64Array(order.length);
      for (let i = 0; i < order.length; i++) values[i] = raw[order[i]];
    }
    columns.push({ title, unitRowText: form.unitRow?.[index] ?? null, values });
  });
  return { columns, leftOut };
}

/** Rows that a file of this size holds if it goes on as it begins; each cell takes a byte at least. */
function guessRows(text: string, sizeBytes: number | null, width: number): number {
  const size = sizeBytes ?? text.length;
  const lines = text.split(/\r?\n|\r/).length;
  const guess = Math.ceil((1.02 * lines * size) / text.length) + 16;
  return Math.max(1, Math.min(guess, Math.floor(size / width) + 16));
}

/** Takes the bytes of a delimited text piece by piece, from its first byte on; `finish` gives the table. */
export interface DelimitedReader {
  push: (bytes: Uint8Array) => void;
  finish: () => LogTable;
}

/**
 * Reader of a delimited text log (CSV and its relatives). Its form is settled from `head`, the first HEAD_BYTES or the whole
 * file; then every byte is pushed, those of the head as well. Throws FileRefusedError here or later; see readLog.
 * @param sizeBytes size of the file, null where it is not known before its end
 * @param listAtMost refused rows that are listed; 1,000 when absent
 */
export function openDelimited(
  head: Uint8Array,
  sizeBytes: number | null,
  key: ChannelKey,
  drive?: Drive,
  listAtMost?: number,
): DelimitedReader {
  const complete = head.length === sizeBytes;
  const text = openText(head, complete, key.encoding);
  if (text.head.trim() === "")
    throw new FileRefusedError("empty_file", "The file is empty. Export the log again.");
  const problems: LogProblem[] = [];
  const form = findTableForm(text.head, key);
  if (form.decimalDisagrees)
    problems.push({
      code: "key_decimal_disagrees",
      message: `The channel key states "${form.decimal}" as the decimal sign, but the cells of this log are written with the other one. Check the values, and give this log a key of its own.`,
    });
  const time = findTimeColumn(text.head, form, key, problems);
  const collector = new RowCollector({
    form,
    timeIndex: time.index,
    timeForm: time.form,
    lineEnd: text.head.includes("\n") ? "\n" : "\r",
    decode: text.decode,
    listAtMost,
    expectedRows: guessRows(text.head, sizeBytes, form.titles.length),
  });
  return {
    push: (bytes) => collector.push(text.convert(bytes)),
    finish: () => {
      collector.push(text.finish());
      const table = collector.finish(problems);
      return buildTable({ table, form, time, problems, encoding: text.encoding, key, drive });
    },
  };
}

function buildTable(read: {
  table: CollectedTable;
  form: TableForm;
  time: TimeColumn;
  problems: LogProblem[];
  encoding: string;
  key: ChannelKey;
  drive?: Drive;
}): LogTable {
  const { table, form, time, problems, encoding, key, drive } = read;
  refuseUnusable(table, time);
  const rawS = table.columns[time.index];
  if (time.form === "clock" && unwrapMidnight(rawS) > 0) {
    problems.push({
      code: "midnight_passed",
      message: "The clock passes midnight; time was carried on into the next day.",
    });
  }
  const others = table.columns.filter((_, c) => c !== time.index);
  spreadTimes(rawS, others, problems);
  const axis = buildTimeAxis(rawS);
  problems.push(...axis.problems);
  const { columns, leftOut } = takeColumns(table, axis.order, form, time.index);
  const channels = buildChannels(columns, key, drive, problems);
  problems.push(...missingKeyColumns(key, form.titles));
  checkMissing(axis.timeS, channels);
  if (form.preambleLines > 0)
    problems.push({
      code: "preamble",
      message: `${form.preambleLines} lines before the header row are no part of the table.`,
    });
  return {
    format: "delimited",
    timeS: axis.timeS,
    channels,
    encoding,
    delimiter: form.delimiter,
    decimal: form.decimal,
    rowsRead: axis.timeS.length,
    rowsRefused: table.refused,
    time: {
      column: form.titles[time.index] ?? "",
      form: time.form,
      from: startText(table, axis.order?.[0] ?? 0),
      toS: axis.timeS[axis.timeS.length - 1] ?? 0,
      rateHz: axis.rateHz,
      gaps: axis.gaps,
    },
    leftOut,
    problems,
  };
}
