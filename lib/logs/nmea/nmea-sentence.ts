/** A sentence whose checksum holds: talker and type (`GPRMC`), and its fields after them. */
export interface NmeaSentence {
  talker: string;
  type: string;
  fields: string[];
}

/** Longest sentence that is looked at, characters; the standard allows 82 [from memory], some receivers exceed it. */
const LONGEST = 512;

/**
 * Reads one line. `null` when it holds no sentence at all; a text says why a sentence is not to be trusted. What stands before the
 * dollar sign (a logger's own time) is passed over.
 */
export function readSentence(line: string): NmeaSentence | string | null {
  const from = line.lastIndexOf("$");
  if (from < 0 || line.trimStart().startsWith("#")) return null;
  if (line.length - from > LONGEST) return "is longer than a sentence can be";
  const star = line.indexOf("*", from);
  if (star < 0) return "has no checksum: it is cut off or mixed up";
  const stated = /^[0-9A-F]{2}/i.exec(line.slice(star + 1));
  if (!stated) return "has a checksum that is cut off";
  let sum = 0;
  for (let i = from + 1; i < star; i++) sum ^= line.charCodeAt(i);
  if (sum !== Number.parseInt(stated[0], 16)) return "has a wrong checksum: it is cut off or mixed up";
  const fields = line.slice(from + 1, star).split(",");
  const address = fields[0];
  if (!/^[A-Z][A-Z0-9]{2,9}$/.test(address)) return "names no talker and type";
  const proprietary = address.startsWith("P");
  return {
    talker: proprietary ? "P" : address.slice(0, 2),
    type: proprietary ? address : address.slice(2),
    fields: fields.slice(1),
  };
}

/** Decimal number of a field; NaN for an empty or other one. */
export function fieldNumber(field: string | undefined): number {
  return field !== undefined && /^-?\d+(\.\d*)?$|^-?\.\d+$/.test(field) ? Number(field) : Number.NaN;
}

/** Seconds of the day from `hhmmss.sss`; NaN when empty or no time. */
export function fieldSeconds(field: string | undefined): number {
  const match = /^(\d{2})(\d{2})(\d{2}(?:\.\d*)?)$/.exec(field ?? "");
  if (!match) return Number.NaN;
  const [hour, minute, second] = [Number(match[1]), Number(match[2]), Number(match[3])];
  return hour < 24 && minute < 60 && second < 61 ? hour * 3600 + minute * 60 + second : Number.NaN;
}

/** Degrees from `ddmm.mmmm` (latitude) or `dddmm.mmmm` and a hemisphere; NaN when either is missing or out of range. */
export function fieldDegrees(field: string | undefined, hemisphere: string | undefined): number {
  const match = /^(\d{1,3})(\d{2}(?:\.\d*)?)$/.exec(field ?? "");
  if (!match || !/^[NSEW]$/.test(hemisphere ?? "")) return Number.NaN;
  const limit = hemisphere === "N" || hemisphere === "S" ? 90 : 180;
  const degrees = Number(match[1]) + Number(match[2]) / 60;
  if (degrees > limit || Number(match[2]) >= 60) return Number.NaN;
  return hemisphere === "S" || hemisphere === "W" ? -degrees : degrees;
}

/** Days since 1970 from day, month, year; NaN for a date that no calendar has. */
export function fieldDay(day: number, month: number, year: number): number {
  const ms = Date.UTC(year, month - 1, day);
  const date = new Date(ms);
  return date.getUTCDate() === day && date.getUTCMonth() === month - 1 ? ms / 86_400_000 : Number.NaN;
}
