import { splitTitle } from "@/lib/logs/channels/channel-names";
import type { LogChannel, LogFormat, LogProblem, LogTable, RefusedRow } from "@/lib/logs/types";

/** What was understood of one column; min, median, max are null when every value is missing. */
export interface ChannelReport {
  column: string;
  name: string;
  channel: string | null;
  unit_found: string | null;
  unit: string;
  min: number | null;
  median: number | null;
  max: number | null;
  missing: number;
  /** Samples, missing ones included: those of the table, or of the channel's own times. */
  rows: number;
  /** Samples a second by the usual step. */
  rate_hz: number;
}

/** What the log reader understood, in the spelling that `read-log` prints. */
export interface LogReport {
  format: LogFormat;
  encoding: string | null;
  delimiter: string | null;
  decimal: "." | "," | null;
  rows_read: number;
  rows_refused: RefusedRow[];
  time: {
    column: string;
    form: string;
    from: string;
    to_s: number;
    rate_hz: number;
    gaps: { from_s: number; to_s: number }[];
  };
  channels: ChannelReport[];
  left_out: string[];
  problems: LogProblem[];
}

const tidy = (value: number | undefined) => (value === undefined ? null : Number(value.toPrecision(12)));

/** Samples a second by the median of the steps. */
function usualRate(timeS: Float64Array): number {
  const steps = timeS.subarray(1).map((t, i) => t - timeS[i]);
  const step = steps.sort()[steps.length >> 1];
  return step > 0 ? Math.round(1e6 / step) / 1e6 : 0;
}

/** What was understood of one channel. */
export function channelReport(channel: LogChannel, table: LogTable): ChannelReport {
  const present = channel.values.filter((value) => !Number.isNaN(value)).sort();
  return {
    column: channel.column,
    name: channel.name ?? channel.channel ?? splitTitle(channel.column).name,
    channel: channel.channel,
    unit_found: channel.unitFound,
    unit: channel.unit,
    min: tidy(present[0]),
    median: tidy(present[present.length >> 1]),
    max: tidy(present[present.length - 1]),
    missing: channel.values.length - present.length,
    rows: channel.values.length,
    rate_hz: channel.timeS ? usualRate(channel.timeS) : table.time.rateHz,
  };
}

/** Summarises a log table: columns, units, ranges, rates, problems. Medians are of the values that are there. */
export function logReport(table: LogTable): LogReport {
  return {
    format: table.format,
    encoding: table.encoding,
    delimiter: table.delimiter,
    decimal: table.decimal,
    rows_read: table.rowsRead,
    rows_refused: table.rowsRefused,
    time: {
      column: table.time.column,
      form: table.time.form,
      from: table.time.from,
      to_s: table.time.toS,
      rate_hz: table.time.rateHz,
      gaps: table.time.gaps.map((gap) => ({ from_s: gap.fromS, to_s: gap.toS })),
    },
    channels: table.channels.map((channel) => channelReport(channel, table)),
    left_out: table.leftOut,
    problems: table.problems,
  };
}
