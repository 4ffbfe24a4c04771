import { CHANNEL_UNITS, readTitle } from "@/lib/logs/channels/channel-names";
import { channelWords } from "@/lib/logs/channels/channel-words";
import { rangeDoubt, speedUnitDoubts } from "@/lib/logs/channels/range-doubt";
import type { ChannelKey, KnownChannel, LogChannel, LogProblem } from "@/lib/logs/types";
import { KNOWN_CHANNELS } from "@/lib/logs/types";
import { type ParsedUnit, parseUnit, toCanonical } from "@/lib/units/unit-text";

/** A column as read: title, unit row cell, raw values in file order of kept rows (NaN = missing); no other column shares them. */
export interface RawColumn {
  title: string;
  unitRowText: string | null;
  values: Float64Array;
}

/** An engine turns at no manifold pressure below this: such a reading is not an absolute one. */
const LOWEST_ABSOLUTE_KPA = 12;

function isKnown(name: string | null): name is KnownChannel {
  return name !== null && (KNOWN_CHANNELS as readonly string[]).includes(name);
}

/** Least of the values that are no gap. Nothing follows the hot loop: the engine would compile it unseen and fall back at each call. */
function least(values: Float64Array): number {
  let min = Number.POSITIVE_INFINITY;
  for (let i = 0; i < values.length; i++) if (values[i] < min) min = values[i];
  return min;
}

function greatest(values: Float64Array): number {
  let max = Number.NEGATIVE_INFINITY;
  for (let i = 0; i < values.length; i++) if (values[i] > max) max = values[i];
  return max;
}

function asFound(column: RawColumn, unitFound: string | null, extra: Partial<LogChannel> = {}): LogChannel {
  return {
    channel: null,
    column: column.title,
    unitFound,
    unit: unitFound ?? "",
    values: column.values,
    ...extra,
  };
}

/** Decides absolute or gauge: the unit text, then the title, then the values; doubt is told. */
function pressureChannel(
  stated: "absolute" | "gauge" | null,
  boostWord: boolean,
  values: Float64Array,
  title: string,
  problems: LogProblem[],
): "manifold_pressure" | "manifold_pressure_gauge" {
  const min = least(values);
  if (stated === "absolute" && min >= 0) return "manifold_pressure";
  if (stated === "gauge") return "manifold_pressure_gauge";
  if (min < LOWEST_ABSOLUTE_KPA) {
    problems.push({
      code: "pressure_taken_as_gauge",
      message: `"${title}" falls to ${min.toFixed(1)} kPa, too low for an absolute manifold pressure; it is taken as gauge pressure.`,
    });
    return "manifold_pressure_gauge";
  }
  if (boostWord) {
    problems.push({
      code: "pressure_taken_as_absolute",
      message: `"${title}" does not say whether it is absolute or gauge; it never falls below ${min.toFixed(1)} kPa and is taken as absolute. State it in a channel key if that is wrong.`,
    });
  }
  return "manifold_pressure";
}

/**
 * Turns raw columns into channels in canonical units. A known quantity whose unit is missing or does not fit keeps
 * its raw values as a free channel with a problem entry. The first of two columns of one channel wins.
 * Values are converted in place. `drive` tells which axle is driven; without it front and rear wheel speeds stay free channels.
 */
export function buildChannels(
  columns: readonly RawColumn[],
  key: ChannelKey,
  drive: "FWD" | "RWD" | "AWD" | undefined,
  problems: LogProblem[],
): LogChannel[] {
  const taken = new Set<string>();
  const channels = columns.map((column) => {
    const built = buildChannel(column, key, drive, problems);
    if (built.channel === null) return built;
    if (taken.has(built.channel)) {
      problems.push({
        code: "second_column_of_channel",
        message: `"${column.title}" is a second column of ${built.channel}; the first one is used. Choose with a channel key.`,
      });
      return { ...built, channel: null };
    }
    taken.add(built.channel);
    return built;
  });
  for (const { title } of columns) {
    if (key.columns?.[title]) continue;
    const { channel, unknownWord, choice } = readTitle(title);
    if (choice)
      problems.push({
        code: "title_ambiguous",
        message: `"${title}" can be ${choice}; it is kept as a free channel. Choose in a channel key.`,
      });
    else if (unknownWord && channel && !taken.has(channel))
      problems.push({
        code: "title_in_doubt",
        message: `"${title}" looks like ${channel}, but "${unknownWord}" in it is not understood; it is kept as a free channel. Choose in a channel key.`,
      });
  }
  problems.push(...speedUnitDoubts(channels));
  return channels;
}

/** Problem entries for the columns that a channel key names and a log with these titles does not have. */
export function missingKeyColumns(key: ChannelKey, titles: readonly string[]): LogProblem[] {
  const named = Object.keys(key.columns ?? {}).filter((name) => !titles.includes(name));
  return named.map((name) => ({
    code: "key_column_not_found",
    message: `The channel key names a column "${name}" that this log does not have.`,
  }));
}

function buildChannel(
  column: RawColumn,
  key: ChannelKey,
  drive: "FWD" | "RWD" | "AWD" | undefined,
  problems: LogProblem[],
): LogChannel {
  const { title } = column;
  const reading = readTitle(title);
  const stated = key.columns?.[title];
  const unitText = stated?.unit ?? (column.unitRowText || reading.unitText);
  let unitFound = unitText || null;
  let channel: KnownChannel | null = reading.channel;
  if (stated) {
    if (!isKnown(stated.channel))
      return asFound(column, unitFound, stated.channel ? { name: stated.channel } : {});
    channel = stated.channel;
  } else if (reading.axle) {
    if (!drive || drive === "AWD") {
      if (drive === "AWD") channel = "wheel_speed_driven";
      else {
        problems.push({
          code: "axle_drive_unknown",
          message: `"${title}" is a ${reading.axle} wheel speed; whether that axle is driven is stated on the vehicle sheet or in a channel key.`,
        });
        return asFound(column, unitFound, { axle: reading.axle });
      }
    } else
      channel =
        (drive === "FWD") === (reading.axle === "front") ? "wheel_speed_driven" : "wheel_speed_undriven";
  }
  if (channel === null || (reading.unknownWord && !stated)) return asFound(column, unitFound);
  const expected = CHANNEL_UNITS[channel];
  let parsed: ParsedUnit | null = parseUnit(unitFound);
  const fits =
    parsed !== null &&
    (parsed.dimension === expected.dimension ||
      (parsed.dimension === "number" && expected.withoutUnit !== null));
  if (!fits && unitFound !== null && !stated?.unit && !column.unitRowText && !/[[({]/.test(title))
    unitFound = null;
  if (!fits) {
    if (unitFound === null && expected.withoutUnit !== null && !reading.needsUnit)
      parsed = parseUnit(expected.withoutUnit);
    else {
      problems.push({
        code: unitFound === null ? "unit_unknown" : "unit_does_not_fit",
        message: `"${title}" looks like ${channel}, but ${unitFound === null ? "states no unit" : `its unit "${unitFound}" does not fit`}; it is kept as a free channel. State its unit in a channel key.`,
      });
      return asFound(column, unitFound);
    }
  }
  if (parsed === null) return asFound(column, unitFound);
  const from = parsed;
  const { values } = column;
  if (from.factor !== 1 || from.offset !== 0)
    for (let i = 0; i < values.length; i++) values[i] = toCanonical(values[i], from);
  if (channel === "manifold_pressure" && !stated) {
    channel = pressureChannel(
      from.reference ?? reading.pressureReference,
      reading.boostWord,
      values,
      title,
      problems,
    );
  } else if (from.reference && (from.reference === "gauge") !== (channel === "manifold_pressure_gauge"))
    problems.push({
      code: "pressure_reference_disagrees",
      message: `"${title}" is taken as ${channelWords(channel)} as the channel key says, but its unit "${unitFound}" says ${from.reference}. Check both in the channel key.`,
    });
  if (reading.speedKindOpen && !stated) {
    problems.push({
      code: "speed_kind_assumed",
      message: `"${title}" does not say where the speed comes from; it is taken as driven wheel speed, so slip is not excluded.`,
    });
  }
  const [min, max] = [least(values), greatest(values)];
  const doubt = rangeDoubt(channel, { min, max });
  if (doubt)
    problems.push({
      code: "implausible_values",
      message: `"${title}" runs from ${min.toPrecision(4)} to ${max.toPrecision(4)} ${expected.unit === "1" ? "" : `${expected.unit} `}as ${channelWords(channel)}: ${doubt} Check the column, or state its unit in a channel key.`,
    });
  return { channel, column: title, unitFound, unit: expected.unit, values };
}
