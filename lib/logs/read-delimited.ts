import { FileRefusedError } from "@/lib/errors";
import { isTimeTitle, splitTitle } from "@/lib/logs/channel-names";
import { buildChannels, type RawColumn } from "@/lib/logs/channel-values";
import { type CollectedTable, collectValues } from "@/lib/logs/collect-values";
import { decodeText } from "@/lib/logs/decode-text";
import { firstRows } from "@/lib/logs/delimited-rows";
import { checkMissing } from "@/lib/logs/missing-values";
import { findTableForm, type TableForm } from "@/lib/logs/table-form";
import { buildTimeAxis, unwrapMidnight } from "@/lib/logs/time-axis";
import { findTimeForm, TIME_FORMS, type TimeForm } from "@/lib/logs/time-forms";
import type { ChannelKey, LogProblem, LogTable } from "@/lib/logs/types";

/** Fewer rows than this carry no run. */
const MIN_ROWS = 10;
const PROBE_ROWS = 200;

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
  let numbers = 0;
  let texts = 0;
  for (let c = 0; c < table.numeric.length; c++) {
    if (c === time.index) continue;
    numbers += table.numeric[c] ?? 0;
    texts += table.text[c] ?? 0;
  }
  if (numbers === 0 && texts > 0) {
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

/** Reads a delimited text log (CSV and its relatives) into a table. Throws FileRefusedError; see readLog. */
export function readDelimited(bytes: Uint8Array, key: ChannelKey, drive?: "FWD" | "RWD" | "AWD"): LogTable {
  const { text, encoding } = decodeText(bytes, key.encoding);
  if (text.trim() === "")
    throw new FileRefusedError("empty_file", "The file is empty. Export the log again.");
  const problems: LogProblem[] = [];
  const form = findTableForm(text, key);
  const time = findTimeColumn(text, form, key, problems);
  const table = collectValues(text, form, time.index, time.form, problems);
  refuseUnusable(table, time);
  const rawS = table.columns[time.index] ?? new Float64Array();
  if (time.form === "clock" && unwrapMidnight(rawS) > 0) {
    problems.push({
      code: "midnight_passed",
      message: "The clock passes midnight; time was carried on into the next day.",
    });
  }
  const axis = buildTimeAxis(rawS);
  problems.push(...axis.problems);
  const columns: RawColumn[] = [];
  const leftOut: string[] = [];
  form.titles.forEach((title, index) => {
    if (index === time.index) return;
    if ((table.numeric[index] ?? 0) === 0 && ((table.text[index] ?? 0) > 0 || title === "")) {
      leftOut.push(title === "" ? `column ${index + 1}` : title);
      return;
    }
    const values = table.columns[index] ?? new Float64Array();
    columns.push({
      title,
      unitRowText: form.unitRow?.[index] ?? null,
      values: Float64Array.from(axis.order, (row) => values[row] ?? Number.NaN),
    });
  });
  const channels = buildChannels(columns, key, drive, problems);
  for (const name of Object.keys(key.columns ?? {})) {
    if (!form.titles.includes(name))
      problems.push({
        code: "key_column_not_found",
        message: `The channel key names a column "${name}" that this log does not have.`,
      });
  }
  checkMissing(axis.timeS, channels);
  if (form.preambleLines > 0)
    problems.push({
      code: "preamble",
      message: `${form.preambleLines} lines before the header row are no part of the table.`,
    });
  return {
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
      from: table.timeText[axis.order[0] ?? 0] ?? "",
      toS: axis.timeS[axis.timeS.length - 1] ?? 0,
      rateHz: axis.rateHz,
      gaps: axis.gaps,
    },
    leftOut,
    problems,
  };
}
