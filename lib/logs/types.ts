/** Channels that the computation knows by name; any other column keeps a free name. */
export const KNOWN_CHANNELS = [
  "time",
  "wheel_speed_undriven",
  "wheel_speed_driven",
  "gps_speed",
  "engine_speed",
  "pedal",
  "throttle",
  "manifold_pressure",
  "manifold_pressure_gauge",
  "lambda",
  "ignition_advance",
  "knock_retard",
  "intake_temperature",
  "coolant_temperature",
  "exhaust_temperature",
  "gear",
  "latitude",
  "longitude",
  "altitude",
  "longitudinal_acceleration",
] as const;
export type KnownChannel = (typeof KNOWN_CHANNELS)[number];

/** Channels that hold a road speed, best first. */
export const ROAD_SPEEDS = ["wheel_speed_undriven", "gps_speed", "wheel_speed_driven"] as const;

/** One column of a log, converted to its canonical unit (m/s, 1/min, %, kPa, °C, °, m, m/s², deg, or as found). */
export interface LogChannel {
  /** A known channel, or null for a free one. */
  channel: KnownChannel | null;
  /** Column title as written in the file. */
  column: string;
  /** Unit text found in the file, or null. */
  unitFound: string | null;
  /** Canonical unit of `values`. */
  unit: string;
  /** One value a row of the table, or one a time of `timeS`; NaN = missing. Never interpolated. */
  values: Float64Array;
  /** Own times of a channel that was recorded at another rate, s from the table's zero, strictly rising; absent: the rows'. */
  timeS?: Float64Array;
  /** Free name given by a channel key. */
  name?: string;
  /** A wheel speed named by its axle while the driven axle is not known. */
  axle?: "front" | "rear";
}

/** Refused rows that are listed unless more are asked for. */
export const MOST_REFUSED_LISTED = 1000;

export interface RefusedRow {
  /** Line number in the file, first line = 1. */
  row: number;
  column?: string;
  raw?: string;
  reason: string;
}

/** A gap or any other finding about the file, told in a sentence. */
export interface LogProblem {
  code: string;
  message: string;
}

/** File formats that the log reader knows. */
export type LogFormat = "delimited" | "mdf4" | "nmea0183" | "gpx";

/** What the log reader understood. Rows are in strictly rising time. */
export interface LogTable {
  format: LogFormat;
  /** Seconds from the first kept sample, strictly rising. */
  timeS: Float64Array;
  channels: LogChannel[];
  /** Character encoding, or null for a binary file. */
  encoding: string | null;
  delimiter: string | null;
  decimal: "." | "," | null;
  rowsRead: number;
  rowsRefused: RefusedRow[];
  time: {
    column: string;
    form: string;
    /** The first time as written, or the date and time that the file states for its first sample. */
    from: string;
    toS: number;
    rateHz: number;
    gaps: { fromS: number; toS: number }[];
  };
  /** Columns that carry no channel, named. */
  leftOut: string[];
  problems: LogProblem[];
}

/** A saved mapping from a logger's columns to channels and units; all members optional (campaign.md form). */
export interface ChannelKey {
  delimiter?: string;
  decimal?: "." | ",";
  header_rows?: number;
  unit_row?: boolean;
  encoding?: string;
  time?: { column: string; form?: string };
  columns?: Record<string, { channel: string | null; unit?: string }>;
}
