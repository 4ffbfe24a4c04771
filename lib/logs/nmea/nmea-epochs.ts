import {
  fieldDay,
  fieldDegrees,
  fieldNumber,
  fieldSeconds,
  type NmeaSentence,
} from "@/lib/logs/nmea/nmea-sentence";

/** All that the sentences of one moment say; NaN = not said, or said without a fix. */
export interface NmeaEpoch {
  /** Seconds of the day, UTC. */
  secondS: number;
  /** Days since 1970, NaN while no sentence states a date. */
  day: number;
  speedKn: number;
  latitude: number;
  longitude: number;
  altitudeM: number;
}

/** Epochs in the order of the file, and what was met on the way. */
export interface NmeaEpochs {
  epochs: NmeaEpoch[];
  /** RMC sentences, and those of them without a fix. */
  rmc: number;
  rmcVoid: number;
  /** GGA sentences without a fix. */
  ggaVoid: number;
  /** Sentences that carry a value but no time to put it to. */
  withoutTime: number;
  /** Sentences of types that are not read, by type. */
  notRead: Map<string, number>;
}

/** Fix modes that are measured: autonomous, differential, float and fixed kinematic, precise. Estimated or simulated is not. */
const MEASURED = /^[ADFPR]$/;

/** Collects sentences into epochs; a new time of day begins a new one. The first value said of a moment counts. */
export function collectEpochs(): { add: (sentence: NmeaSentence) => void; result: NmeaEpochs } {
  const result: NmeaEpochs = {
    epochs: [],
    rmc: 0,
    rmcVoid: 0,
    ggaVoid: 0,
    withoutTime: 0,
    notRead: new Map(),
  };
  let current: NmeaEpoch | null = null;

  const at = (secondS: number): NmeaEpoch | null => {
    if (Number.isNaN(secondS)) {
      result.withoutTime++;
      return null;
    }
    if (current?.secondS !== secondS) {
      const none = Number.NaN;
      current = { secondS, day: none, speedKn: none, latitude: none, longitude: none, altitudeM: none };
      result.epochs.push(current);
    }
    return current;
  };
  const say = (
    epoch: NmeaEpoch,
    field: "speedKn" | "latitude" | "longitude" | "altitudeM" | "day",
    value: number,
  ) => {
    if (Number.isNaN(epoch[field])) epoch[field] = value;
  };
  const position = (epoch: NmeaEpoch, fields: readonly string[]) => {
    say(epoch, "latitude", fieldDegrees(fields[0], fields[1]));
    say(epoch, "longitude", fieldDegrees(fields[2], fields[3]));
  };

  const readers = new Map<string, (fields: string[]) => void>(
    Object.entries({
      rmc: (fields: string[]) => {
        result.rmc++;
        const mode = fields[11];
        const hasFix = fields[1] === "A" && (mode === undefined || mode === "" || MEASURED.test(mode));
        if (!hasFix) result.rmcVoid++;
        const epoch = at(fieldSeconds(fields[0]));
        if (!epoch) return;
        const date = /^(\d{2})(\d{2})(\d{2})$/.exec(fields[8] ?? "");
        // Two digits of a year: GPS began in 1980.
        if (date) {
          const year = Number(date[3]);
          say(
            epoch,
            "day",
            fieldDay(Number(date[1]), Number(date[2]), year < 80 ? 2000 + year : 1900 + year),
          );
        }
        if (!hasFix) return;
        say(epoch, "speedKn", fieldNumber(fields[6]));
        position(epoch, fields.slice(2, 6));
      },
      vtg: (fields: string[]) => {
        const mode = fields[8];
        if (mode !== undefined && mode !== "" && !MEASURED.test(mode)) return;
        const speed = fieldNumber(fields[4]);
        if (Number.isNaN(speed)) return;
        if (current) say(current, "speedKn", speed);
        else result.withoutTime++;
      },
      gga: (fields: string[]) => {
        const quality = fieldNumber(fields[5]);
        // 1 to 5 are fixes; 6 is dead reckoning, 7 typed in, 8 simulated.
        const hasFix = quality >= 1 && quality <= 5;
        if (!hasFix) result.ggaVoid++;
        const epoch = at(fieldSeconds(fields[0]));
        if (!epoch || !hasFix) return;
        position(epoch, fields.slice(1, 5));
        if (fields[9] === "M") say(epoch, "altitudeM", fieldNumber(fields[8]));
      },
      zda: (fields: string[]) => {
        const epoch = at(fieldSeconds(fields[0]));
        if (epoch)
          say(epoch, "day", fieldDay(fieldNumber(fields[1]), fieldNumber(fields[2]), fieldNumber(fields[3])));
      },
    }),
  );
  const add = ({ talker, type, fields }: NmeaSentence) => {
    const read = talker === "P" ? undefined : readers.get(type.toLowerCase());
    if (read) read(fields);
    else result.notRead.set(type, (result.notRead.get(type) ?? 0) + 1);
  };
  return { add, result };
}

/**
 * Seconds of each epoch from midnight of `firstDay`. A stated date counts; an epoch without one is on the day of the epoch before,
 * or on the next when its clock fell by more than half a day; those before the first date are counted back. `dated`: a date was stated.
 */
export function epochSeconds(epochs: readonly NmeaEpoch[]): {
  seconds: Float64Array;
  firstDay: number;
  dated: boolean;
} {
  const days = new Float64Array(epochs.length);
  const anchor = epochs.findIndex((epoch) => !Number.isNaN(epoch.day));
  const passes = (i: number) => epochs[i].secondS < epochs[i - 1].secondS - 43_200;
  const from = Math.max(0, anchor);
  if (epochs.length > 0) days[from] = anchor < 0 ? 0 : epochs[anchor].day;
  for (let i = from + 1; i < epochs.length; i++) {
    days[i] = Number.isNaN(epochs[i].day) ? days[i - 1] + (passes(i) ? 1 : 0) : epochs[i].day;
  }
  for (let i = from - 1; i >= 0; i--) days[i] = days[i + 1] - (passes(i + 1) ? 1 : 0);
  const firstDay = days[0] ?? 0;
  const seconds = Float64Array.from(epochs, (epoch, i) => 86_400 * (days[i] - firstDay) + epoch.secondS);
  return { seconds, firstDay, dated: anchor >= 0 };
}
