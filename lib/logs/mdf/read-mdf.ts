import { FileRefusedError } from "@/lib/errors";
import type { RawColumn } from "@/lib/logs/channels/channel-values";
import { joinGroups, type SampledGroup } from "@/lib/logs/join-groups";
import { type MdfFile, openMdf } from "@/lib/logs/mdf/mdf-blocks";
import { applyConversion, conversionReader, type MdfConversion } from "@/lib/logs/mdf/mdf-conversion";
import { type InflateBudget, readStream } from "@/lib/logs/mdf/mdf-data";
import { type GroupRecords, sortRecords, VLSD_GROUP } from "@/lib/logs/mdf/mdf-records";
import { textEnds } from "@/lib/logs/mdf/mdf-text";
import { type MdfChannel, type MdfChannelGroup, type MdfDataGroup, readTree } from "@/lib/logs/mdf/mdf-tree";
import { isText, type RecordRows, readNumbers, whyNoNumbers } from "@/lib/logs/mdf/mdf-values";
import { checkFinished, type Unfinished } from "@/lib/logs/mdf/unfinished";
import type { ChannelKey, LogProblem, LogTable } from "@/lib/logs/types";
import { parseUnit } from "@/lib/units/unit-text";

const BUS_GROUP = 2 | 4;
const REMOTE_MASTER = 8;
/** Values of a log that are held at once; a run of an hour with 100 channels at 100 Hz has 36 million. */
const MOST_VALUES = 64 * 1024 * 1024;
/** A made-up file may point many channels at the same bytes; this many values a byte of records are more than any logger packs. */
const VALUES_PER_BYTE = 16;
const FEWEST_VALUES_REFUSED = 1 << 20;

interface Reading {
  file: MdfFile;
  budget: InflateBudget;
  conversions: (at: number, whole: boolean) => MdfConversion;
  key: ChannelKey;
  problems: LogProblem[];
  leftOut: string[];
  /** Titles of channels whose numbers stand for words: no known channel may be made of them. */
  words: Set<string>;
  texts: string[];
  values: { taken: number; allowed: number; most: number };
}

/**
 * Reads an MDF 4 measurement file: sorted and unsorted records, plain, deflated and transposed data, groups with times of their own.
 * Text channels, arrays and raw bus frames are left out by name. Throws FileRefusedError; see readLog.
 */
export function readMdf(
  bytes: Uint8Array,
  options: { key?: ChannelKey; drive?: "FWD" | "RWD" | "AWD"; maxInflatedBytes: number; maxValues?: number },
): LogTable {
  const file = openMdf(bytes);
  const key = options.key ?? {};
  const unfinished = checkFinished(file);
  const tree = readTree(file);
  const reading: Reading = {
    file,
    budget: { left: options.maxInflatedBytes, limit: options.maxInflatedBytes },
    conversions: conversionReader(file),
    key,
    problems: [],
    leftOut: [],
    words: new Set(),
    texts: [],
    values: { taken: 0, allowed: 0, most: options.maxValues ?? MOST_VALUES },
  };
  unfinished.settle(tree);
  if (unfinished.problem) reading.problems.push(unfinished.problem);
  const groups: SampledGroup[] = [];
  let number = 0;
  for (const dataGroup of tree.dataGroups) {
    for (const { group, bytes: records, grouped } of recordsOf(reading, dataGroup, unfinished)) {
      number += 1;
      const name = `group ${number}${group.name ? ` "${group.name}"` : ""}`;
      const sampled = readGroup(reading, name, group, records, grouped, unfinished);
      if (sampled) groups.push(sampled);
    }
  }
  tellTexts(reading);
  if (groups.length === 0) {
    throw new FileRefusedError(
      number === 0 ? "no_data_rows" : "no_time_column",
      number === 0
        ? "The MDF file holds no group of channels. Check that the logger was recording."
        : `No group of this MDF file has a time channel and numbers.${reading.problems.length > 0 ? ` ${reading.problems[0].message}` : ""}`,
    );
  }
  const columns: NonNullable<ChannelKey["columns"]> = Object.fromEntries(
    [...reading.words].map((title) => [title, { channel: null }]),
  );
  return joinGroups(groups, {
    format: "mdf4",
    encoding: null,
    rowsRefused: [],
    leftOut: reading.leftOut,
    problems: reading.problems,
    timeForm: "s",
    from: (startS) => isoText(tree.startMs + 1000 * startS, tree.startIsLocal),
    key: { ...key, columns: { ...columns, ...key.columns } },
    drive: options.drive,
  });
}

/** ISO 8601 date and time to the millisecond; a local one has no zone. A moment that no calendar has is an empty text. */
function isoText(ms: number, isLocal: boolean): string {
  if (!(Math.abs(ms) < 8.64e15)) return "";
  const text = new Date(ms).toISOString();
  return isLocal ? text.slice(0, -1) : text;
}

interface ReadRecords extends GroupRecords {
  grouped: ReadonlyMap<number, Uint8Array>;
}

/** Takes the records of a data group apart; groups of variable length are the values of other groups' channels. */
function recordsOf(reading: Reading, dataGroup: MdfDataGroup, unfinished: Unfinished): ReadRecords[] {
  const { file, budget, problems } = reading;
  const { groups, idBytes, dataLink } = dataGroup;
  if (groups.length === 0) return [];
  const stream = readStream(file, dataLink, "DT", budget);
  reading.values.allowed += VALUES_PER_BYTE * stream.length;
  if (idBytes === 0) {
    const [group, ...others] = groups;
    if (others.length > 0) {
      throw new FileRefusedError(
        "file_damaged",
        "The MDF file puts several kinds of records into one stream without telling them apart. Save it again, sorted.",
      );
    }
    return [{ group, bytes: stream, grouped: new Map() }];
  }
  unfinished.demandSorted();
  const { records, cutBytes } = sortRecords(stream, dataGroup);
  if (cutBytes > 0) {
    problems.push({
      code: "records_cut_off",
      message: `The last ${cutBytes} bytes of the data are no whole record and were left out.`,
    });
  }
  const isValues = ({ group }: GroupRecords) => (group.flags & VLSD_GROUP) !== 0;
  const grouped = new Map(records.filter(isValues).map(({ group, bytes }) => [group.at, bytes]));
  return records.filter((each) => !isValues(each)).map((each) => ({ ...each, grouped }));
}

/** How many records there are, with a problem entry where the file says another number than it holds. */
function countRows(
  reading: Reading,
  name: string,
  group: MdfChannelGroup,
  bytes: Uint8Array,
  unfinished: Unfinished,
): RecordRows {
  const stride = group.dataBytes + group.invalidationBytes;
  const whole = stride === 0 ? 0 : Math.floor(bytes.length / stride);
  const rows = unfinished.countsMissing ? whole : Math.min(group.cycles, whole);
  if (!unfinished.countsMissing && group.cycles !== whole && (stride > 0 || group.cycles > 0)) {
    reading.problems.push({
      code: group.cycles > whole ? "records_missing" : "records_not_counted",
      message:
        group.cycles > whole
          ? `The file says that ${name} has ${group.cycles} records, but holds ${whole}; those were read.`
          : `The file holds ${whole} records of ${name} but counts ${group.cycles} of them; only those were read.`,
    });
  }
  return { bytes, stride, rows, dataBytes: group.dataBytes };
}

/** Numbers of one group with its times, or null with the reason told. */
function readGroup(
  reading: Reading,
  name: string,
  group: MdfChannelGroup,
  bytes: Uint8Array,
  grouped: ReadonlyMap<number, Uint8Array>,
  unfinished: Unfinished,
): SampledGroup | null {
  const { problems, leftOut } = reading;
  const master = group.channels.find((c) => (c.type === 2 || c.type === 3) && c.sync === 1);
  const drop = (code: string, why: string) => {
    leftOut.push(...group.channels.map((channel) => channel.name));
    problems.push({ code, message: `${name} is left out: ${why}.` });
    return null;
  };
  if (group.flags & BUS_GROUP)
    return drop("bus_frames_left_out", "it holds raw bus frames, which are not decoded");
  if (!master)
    return drop(
      "group_without_time",
      group.flags & REMOTE_MASTER ? "its time lies in another group" : "it has no time channel",
    );
  const why = whyNoNumbers(master, group.dataBytes);
  if (why) return drop("group_without_time", `its time channel ${why}`);
  const records = countRows(reading, name, group, bytes, unfinished);
  const wanted = group.channels.filter((c) => !isText(c) && !whyNoNumbers(c, group.dataBytes));
  claim(reading, records.rows * wanted.length);
  const timeS = readTime(reading, records, master);
  if (!timeS) return drop("group_without_time", "its time channel can't be converted");
  const columns: RawColumn[] = [];
  for (const channel of group.channels) {
    if (channel === master) continue;
    const column = readColumn(reading, records, channel, grouped);
    if (column) columns.push(column);
  }
  return { name, timeColumn: master.name, timeS, columns };
}

/** Claims room for the values of a group before any of it is taken. */
function claim({ values }: Reading, count: number): void {
  values.taken += count;
  const limit = Math.min(values.most, Math.max(FEWEST_VALUES_REFUSED, values.allowed));
  if (values.taken <= limit) return;
  throw new FileRefusedError(
    "too_many_values",
    `The MDF file holds more than ${limit} values; a log of one run has far fewer. Export only the channels and the time that are needed.`,
  );
}

const isWhole = (channel: MdfChannel) => channel.dataType < 4;

function readTime(reading: Reading, records: RecordRows, master: MdfChannel): Float64Array | null {
  const conversion = reading.conversions(master.conversionAt, isWhole(master));
  if (conversion.problem || conversion.hasWords) return null;
  const timeS = readNumbers(records, master);
  applyConversion(timeS, conversion);
  const unit = parseUnit(master.unit ?? conversion.unit);
  if (unit?.dimension === "time" && unit.factor !== 1) {
    for (let i = 0; i < timeS.length; i++) timeS[i] *= unit.factor;
    reading.problems.push({
      code: "time_unit_stated",
      message: `The time "${master.name}" is stated in ${master.unit ?? conversion.unit}, where MDF 4 asks for seconds; it was converted.`,
    });
  }
  return timeS;
}

function readColumn(
  reading: Reading,
  records: RecordRows,
  channel: MdfChannel,
  grouped: ReadonlyMap<number, Uint8Array>,
): RawColumn | null {
  const { file, budget, problems, leftOut } = reading;
  const { name } = channel;
  if (!channel.isArray && isText(channel)) {
    leftOut.push(name);
    const ends = textEnds(file, records, channel, grouped, budget);
    reading.texts.push(`"${name}"${ends ? ` (first "${ends[0]}", last "${ends[1]}")` : ""}`);
    return null;
  }
  const conversion = reading.conversions(channel.conversionAt, isWhole(channel));
  const why = whyNoNumbers(channel, records.dataBytes) ?? conversion.problem;
  if (why) {
    leftOut.push(name);
    problems.push({ code: "channel_left_out", message: `"${name}" ${why}; it is left out.` });
    return null;
  }
  let values = readNumbers(records, channel);
  const raw = conversion.hasWords ? values.slice() : values;
  applyConversion(values, conversion);
  if (conversion.hasWords) values = withoutWords(reading, name, raw, values);
  return { title: name, unitRowText: channel.unit ?? conversion.unit, values };
}

/** Where every value is a word the numbers behind the words are kept as a free channel; where some are, those are missing. */
function withoutWords(reading: Reading, name: string, raw: Float64Array, values: Float64Array): Float64Array {
  let words = 0;
  let numbers = 0;
  for (let i = 0; i < values.length; i++) {
    if (!Number.isNaN(values[i])) numbers++;
    else if (!Number.isNaN(raw[i])) words++;
  }
  if (words === 0) return values;
  if (numbers === 0) reading.words.add(name);
  reading.problems.push({
    code: numbers === 0 ? "words_kept_as_numbers" : "words_count_as_missing",
    message:
      numbers === 0
        ? `"${name}" stands for words; the numbers behind them are kept as a free channel. Say in a channel key what they mean.`
        : `"${name}" is a word instead of a number in ${words} of ${values.length} samples; those count as missing.`,
  });
  return numbers === 0 ? raw : values;
}

function tellTexts({ texts, problems }: Reading): void {
  if (texts.length === 0) return;
  problems.push({
    code: "text_channels_left_out",
    message: `Text is not read: ${texts.slice(0, 20).join(", ")}.`,
  });
}
