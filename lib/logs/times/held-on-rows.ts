import type { LogChannel, LogTable } from "@/lib/logs/types";
import { median } from "@/lib/signal/statistics";

/** A sample stands for no longer than this many of its channel's usual steps. */
const LONGEST_STEPS = 2.5;

/** The newest sample at each row; NaN before the first one, beyond a gap and where the newest is missing. */
function held(
  rowS: Float64Array,
  { timeS, values }: Pick<LogChannel, "values"> & { timeS: Float64Array },
): Float64Array {
  const longestS = LONGEST_STEPS * median(timeS.subarray(1).map((t, i) => t - timeS[i]));
  let k = -1;
  return rowS.map((t) => {
    while (k + 1 < timeS.length && timeS[k + 1] <= t) k++;
    return k >= 0 && t - timeS[k] <= longestS ? values[k] : Number.NaN;
  });
}

/**
 * The table with every channel on its rows, the way a logger with one rate would have written it: a channel with times of its own
 * keeps its newest sample until the next one comes. For finding spans, judging and drawing; measuring takes the channel's own times.
 */
export function heldOnRows(table: LogTable): LogTable {
  if (table.channels.every((channel) => channel.timeS === undefined)) return table;
  const channels = table.channels.map(({ timeS, ...channel }): LogChannel => {
    return timeS ? { ...channel, values: held(table.timeS, { timeS, values: channel.values }) } : channel;
  });
  return { ...table, channels };
}
