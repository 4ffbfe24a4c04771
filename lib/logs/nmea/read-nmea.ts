import { FileRefusedError } from "@/lib/errors";
import type { RawColumn } from "@/lib/logs/channels/channel-values";
import { joinGroups } from "@/lib/logs/join-groups";
import { collectEpochs, epochSeconds, type NmeaEpoch, type NmeaEpochs } from "@/lib/logs/nmea/nmea-epochs";
import { readSentence } from "@/lib/logs/nmea/nmea-sentence";
import {
  type ChannelKey,
  type LogProblem,
  type LogTable,
  MOST_REFUSED_LISTED,
  type RefusedRow,
} from "@/lib/logs/types";

/** Moments that are held at once: ten hours at 25 a second. */
const MOST_EPOCHS = 1_000_000;
const DAY_MS = 86_400_000;

interface SentenceCounts {
  good: number;
  refused: number;
  firstRefused: RefusedRow[];
  /** Lines that are neither sentence nor comment. */
  otherLines: number;
}

/** One text line after the other; bytes beyond ASCII (a receiver's binary messages) become single characters. */
function* lines(bytes: Uint8Array): Generator<string> {
  const decoder = new TextDecoder("latin1");
  for (let from = 0; from < bytes.length; ) {
    const end = bytes.indexOf(10, from);
    yield decoder.decode(bytes.subarray(from, end < 0 ? bytes.length : end));
    if (end < 0) return;
    from = end + 1;
  }
}

/**
 * Reads the log of a satellite receiver (NMEA 0183): RMC, VTG, GGA and ZDA of any talker, one row a moment. A sentence counts only
 * when its checksum holds; the others are listed, `listAtMost` of them. Without a fix a value is missing, never 0. Throws FileRefusedError; see readLog.
 */
export function readNmea(bytes: Uint8Array, key: ChannelKey, listAtMost = MOST_REFUSED_LISTED): LogTable {
  const counts: SentenceCounts = { good: 0, refused: 0, firstRefused: [], otherLines: 0 };
  const { add, result } = collectEpochs();
  let row = 0;
  for (const line of lines(bytes)) {
    row++;
    const read = readSentence(line);
    if (read === null) {
      if (line.trim() !== "" && !line.startsWith("#")) counts.otherLines++;
    } else if (typeof read === "string") {
      counts.refused++;
      if (counts.firstRefused.length < listAtMost)
        counts.firstRefused.push({ row, raw: line.trim().slice(0, 100), reason: read });
    } else {
      counts.good++;
      add(read);
      if (result.epochs.length > MOST_EPOCHS)
        throw new FileRefusedError(
          "too_many_values",
          `The receiver log holds more than ${MOST_EPOCHS} moments; a log of one run has far fewer. Export only the time that is needed.`,
        );
    }
  }
  const { epochs } = result;
  if (epochs.length === 0) {
    throw new FileRefusedError(
      "no_data_rows",
      `None of the ${counts.good} sentences of this receiver log states a time (RMC, GGA or ZDA are needed). Switch them on in the receiver and record again.`,
    );
  }
  const { seconds, firstDay, dated } = epochSeconds(epochs);
  const columns = columnsOf(epochs);
  const problems = tell(counts, result, dated);
  if (seconds.length > 1 && new Set(seconds.map((s) => Math.floor(s / 86_400))).size > 1)
    problems.push({
      code: "midnight_passed",
      message: "The clock passes midnight; time was carried on into the next day.",
    });
  const from = (startS: number) =>
    dated
      ? new Date(firstDay * DAY_MS + Math.round(1000 * startS)).toISOString()
      : new Date(Math.round(1000 * startS)).toISOString().slice(11, -1);
  return joinGroups([{ name: "the receiver log", timeColumn: "UTC", timeS: seconds, columns }], {
    format: "nmea0183",
    encoding: "ascii",
    rowsRefused: counts.firstRefused,
    leftOut: Array.from(result.notRead, ([type, count]) => `${type} (${count} sentences)`),
    problems,
    timeForm: dated ? "iso" : "clock",
    from,
    key,
  });
}

function columnsOf(epochs: readonly NmeaEpoch[]): RawColumn[] {
  const column = (title: string, unit: string, field: keyof NmeaEpoch): RawColumn => ({
    title,
    unitRowText: unit,
    values: Float64Array.from(epochs, (epoch) => epoch[field]),
  });
  const all = [
    column("GPS speed", "kn", "speedKn"),
    column("latitude", "deg", "latitude"),
    column("longitude", "deg", "longitude"),
    column("altitude", "m", "altitudeM"),
  ];
  return all.filter(({ values }) => values.some((value) => !Number.isNaN(value)));
}

function tell(counts: SentenceCounts, result: NmeaEpochs, dated: boolean): LogProblem[] {
  const problems: LogProblem[] = [];
  if (counts.refused > 0) {
    const [first] = counts.firstRefused;
    problems.push({
      code: "rows_refused",
      message: `${counts.refused} of ${counts.good + counts.refused} sentences were refused, the first in line ${first.row}: it ${first.reason}.`,
    });
  }
  if (result.rmcVoid + result.ggaVoid > 0) {
    problems.push({
      code: "fix_missing",
      message: `The receiver had no fix in ${result.rmcVoid} of ${result.rmc} RMC sentences and in ${result.ggaVoid} GGA sentences; their values are missing.`,
    });
  }
  if (result.withoutTime > 0)
    problems.push({
      code: "sentences_without_time",
      message: `${result.withoutTime} sentences belong to no stated time and were left out.`,
    });
  if (counts.otherLines > 0)
    problems.push({
      code: "other_lines",
      message: `${counts.otherLines} lines hold no sentence and were passed over.`,
    });
  if (!dated)
    problems.push({
      code: "date_unknown",
      message: "No sentence states a date (RMC or ZDA); the time is that of the day, UTC.",
    });
  return problems;
}
