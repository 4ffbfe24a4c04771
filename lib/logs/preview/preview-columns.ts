import { readTitle } from "@/lib/logs/channels/channel-names";
import { channelReport } from "@/lib/logs/log-report";
import { type Plausibility, plausibility, shownUnit } from "@/lib/logs/preview/plausibility";
import type { LogChannel, LogTable } from "@/lib/logs/types";

/** One column of the file, in its order, with what it was read as. */
export interface PreviewColumn {
  title: string;
  /** `free`: values without a meaning the analysis knows. `text`: no number in it. `unread`: the log could not be read. */
  role: "time" | "channel" | "free" | "text" | "unread";
  /** Known channel, or the free name that a key gives; null = left out. */
  channel: string | null;
  unitFound: string | null;
  /** Unit of min, median and max. */
  unit: string;
  /** A wheel speed named by its axle: driven or not depends on the car. */
  axle: boolean;
  /** First cells that hold something, as written. */
  samples: string[];
  /** Some sixty values over the part that was read; gaps null. */
  spark: (number | null)[];
  min: number | null;
  median: number | null;
  max: number | null;
  plausible: Plausibility | null;
}

const SAMPLES = 4;
const SPARK_POINTS = 60;

function samplesOf(rows: readonly (readonly string[])[], index: number): string[] {
  return rows
    .map((cells) => (cells[index] ?? "").trim().slice(0, 40))
    .filter((cell) => cell !== "")
    .slice(0, SAMPLES);
}

function sparkOf(values: Float64Array): (number | null)[] {
  const count = Math.min(SPARK_POINTS, values.length);
  return Array.from({ length: count }, (_, i) => {
    const value = values[Math.floor((i * values.length) / count)];
    return Number.isFinite(value) ? Number(value.toPrecision(5)) : null;
  });
}

const bare = (title: string): Omit<PreviewColumn, "role" | "samples"> => ({
  title,
  channel: null,
  unitFound: null,
  unit: "",
  axle: false,
  spark: [],
  min: null,
  median: null,
  max: null,
  plausible: null,
});

function channelColumn(channel: LogChannel, table: LogTable, samples: string[]): PreviewColumn {
  const report = channelReport(channel, table);
  const { unit, factor } = shownUnit(channel.unit);
  const shown = (value: number | null) => (value === null ? null : Number((value * factor).toPrecision(6)));
  const { min, max } = report;
  const range = min === null || max === null ? null : { min, max };
  return {
    ...bare(channel.column),
    role: channel.channel === null ? "free" : "channel",
    channel: channel.channel ?? channel.name ?? null,
    unitFound: channel.unitFound,
    unit,
    axle: readTitle(channel.column).axle !== null,
    samples,
    spark: sparkOf(channel.values),
    min: shown(min),
    median: shown(report.median),
    max: shown(max),
    plausible: channel.channel === null ? null : plausibility(channel.channel, range),
  };
}

/**
 * Columns of a log that was read.
 * @param titles all columns of a text table in their order; null where the format has none beside its channels
 * @param rows first cells, in the order of the columns
 */
export function previewColumns(
  table: LogTable,
  titles: readonly string[] | null,
  rows: readonly (readonly string[])[],
): PreviewColumn[] {
  const all = titles ?? [table.time.column, ...table.channels.map((channel) => channel.column)];
  const open = [...table.channels];
  let timeSeen = false;
  return all.map((title, index) => {
    const samples = samplesOf(rows, index);
    if (!timeSeen && title === table.time.column) {
      timeSeen = true;
      return { ...bare(title), role: "time", channel: "time", unit: "s", samples };
    }
    const at = open.findIndex((channel) => channel.column === title);
    if (at < 0) return { ...bare(title), role: "text", samples };
    const [channel] = open.splice(at, 1);
    return channelColumn(channel, table, samples);
  });
}

/** Columns of a log that could not be read: what a person needs to see to say how it is. */
export function unreadColumns(
  titles: readonly string[],
  unitRow: readonly string[] | null,
  rows: readonly (readonly string[])[],
): PreviewColumn[] {
  return titles.map((title, index) => {
    const reading = readTitle(title);
    return {
      ...bare(title),
      role: "unread",
      channel: reading.channel,
      unitFound: unitRow?.[index] || reading.unitText,
      axle: reading.axle !== null,
      samples: samplesOf(rows, index),
    };
  });
}
