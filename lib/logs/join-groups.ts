import { FileRefusedError } from "@/lib/errors";
import { buildChannels, missingKeyColumns, type RawColumn } from "@/lib/logs/channels/channel-values";
import { checkMissing } from "@/lib/logs/channels/missing-values";
import { buildTimeAxis, type TimeAxis } from "@/lib/logs/times/time-axis";
import {
  type ChannelKey,
  type LogChannel,
  type LogProblem,
  type LogTable,
  ROAD_SPEEDS,
} from "@/lib/logs/types";

/** Columns that were sampled together, with the time of each sample. */
export interface SampledGroup {
  /** Name for messages, e.g. `group 2 "CAN"`. */
  name: string;
  timeColumn: string;
  /** Seconds from a zero that all groups of the file share, in file order; NaN = the sample has no time. */
  timeS: Float64Array;
  columns: RawColumn[];
}

/** Fewer samples than this are no recording. */
const LEAST_SAMPLES = 3;
/** The table's rows are those of the group that holds the first of these: the road speed is what a run is found by. */
const ROW_CHANNELS = [...ROAD_SPEEDS, "engine_speed"] as const;

interface TimedGroup {
  group: SampledGroup;
  axis: TimeAxis;
  /** Time of the first kept sample on the shared zero, s. */
  startS: number;
}

/** Brings a group into rising time, or says why it can't be used. */
function timed(group: SampledGroup): TimedGroup | FileRefusedError {
  const samples = group.timeS.length;
  const few = (n: number) =>
    new FileRefusedError(
      n === 0 ? "no_data_rows" : "too_few_samples",
      `${n === 0 ? "No sample" : `${n} ${n === 1 ? "sample" : "samples"}`} in ${group.name}; at least ${LEAST_SAMPLES} are needed. Check that the logger was recording.`,
    );
  if (samples < LEAST_SAMPLES) return few(samples);
  try {
    const axis = buildTimeAxis(group.timeS);
    if (axis.timeS.length < LEAST_SAMPLES) return few(axis.timeS.length);
    return { group, axis, startS: group.timeS[axis.order ? axis.order[0] : 0] };
  } catch (error) {
    if (error instanceof FileRefusedError) return error;
    throw error;
  }
}

function ordered(values: Float64Array, order: Uint32Array | null): Float64Array {
  if (!order) return values;
  const kept = new Float64Array(order.length);
  for (let i = 0; i < order.length; i++) kept[i] = values[order[i]];
  return kept;
}

function sameTimes(a: Float64Array, b: Float64Array): boolean {
  return a.length === b.length && a.every((t, i) => t === b[i]);
}

/** Position of the group whose times become the rows: the one with the best road speed, else with the most samples. */
function rowGroup(groupOf: readonly number[], channels: readonly LogChannel[]): number {
  for (const name of ROW_CHANNELS) {
    const at = channels.findIndex((channel) => channel.channel === name);
    if (at >= 0) return groupOf[at];
  }
  return 0;
}

/**
 * Makes one table of groups that may have times of their own. The group with the best road speed gives the rows; a channel of
 * another group keeps its times in `timeS`, on the same zero. A group without usable times is left out with a problem entry.
 * Of two columns of one channel the one with more samples wins. Throws FileRefusedError when no group can be used.
 */
export function joinGroups(
  groups: readonly SampledGroup[],
  about: Pick<LogTable, "format" | "encoding" | "rowsRefused" | "leftOut" | "problems"> & {
    timeForm: string;
    /** The date and time of the first row as text, from its seconds on the shared zero. */
    from: (startS: number) => string;
    key: ChannelKey;
    drive?: "FWD" | "RWD" | "AWD";
  },
): LogTable {
  const { problems, leftOut } = about;
  const usable: TimedGroup[] = [];
  let refusal = new FileRefusedError(
    "no_data_rows",
    "The file holds no sample. Check that the logger was recording.",
  );
  for (const group of groups) {
    const result = timed(group);
    if (!(result instanceof FileRefusedError)) {
      usable.push(result);
      continue;
    }
    refusal = result;
    leftOut.push(...group.columns.map((column) => column.title));
    problems.push({ code: "group_left_out", message: `${group.name} is left out. ${result.message}` });
  }
  if (usable.length === 0) throw refusal;
  usable.sort((a, b) => b.axis.timeS.length - a.axis.timeS.length);
  const groupOf: number[] = [];
  const columns = usable.flatMap(({ group, axis }, k) =>
    group.columns.map((column): RawColumn => {
      groupOf.push(k);
      return { ...column, values: ordered(column.values, axis.order) };
    }),
  );
  const channels = buildChannels(columns, about.key, about.drive, problems);
  const titles = columns.map(({ title }) => title);
  problems.push(...missingKeyColumns(about.key, titles));
  const base = usable[rowGroup(groupOf, channels)];
  const times = usable.map((each) => {
    if (each === base) return undefined;
    const shiftS = Math.round((each.startS - base.startS) * 1e9) / 1e9;
    const own = each.axis.timeS.map((t) => Math.round((t + shiftS) * 1e9) / 1e9);
    return sameTimes(own, base.axis.timeS) ? undefined : own;
  });
  const placed = channels.map((channel, k): LogChannel => {
    const timeS = times[groupOf[k]];
    return timeS ? { ...channel, timeS } : channel;
  });
  problems.push(...timeProblems(usable));
  checkMissing(base.axis.timeS, placed);
  const { timeS, rateHz, gaps } = base.axis;
  return {
    format: about.format,
    timeS,
    channels: placed,
    encoding: about.encoding,
    delimiter: null,
    decimal: null,
    rowsRead: timeS.length,
    rowsRefused: about.rowsRefused,
    time: {
      column: base.group.timeColumn,
      form: about.timeForm,
      from: about.from(base.startS),
      toS: timeS[timeS.length - 1],
      rateHz,
      gaps,
    },
    leftOut,
    problems,
  };
}

/** Findings about the times of each group, named where there are several. */
function timeProblems(usable: readonly TimedGroup[]): LogProblem[] {
  return usable.flatMap(({ group, axis }) =>
    axis.problems.map(({ code, message }) => ({
      code,
      message: usable.length > 1 ? `${group.name}: ${message}` : message,
    })),
  );
}
