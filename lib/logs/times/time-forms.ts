import { isMissingMark, parseNumber } from "@/lib/logs/parse-number";

/** Ways in which logs write time; a channel key may state one. */
export const TIME_FORMS = [
  "s",
  "ms",
  "us",
  "ns",
  "min",
  "h",
  "clock",
  "iso",
  "epoch_s",
  "epoch_ms",
  "epoch_us",
  "epoch_ns",
] as const;
export type TimeForm = (typeof TIME_FORMS)[number];

/** How many of a form's own counts make one second. */
const COUNTS_PER_S: Readonly<Record<TimeForm, number>> = {
  s: 1,
  ms: 1000,
  us: 1e6,
  ns: 1e9,
  min: 1 / 60,
  h: 1 / 3600,
  clock: 1,
  iso: 1000,
  epoch_s: 1,
  epoch_ms: 1000,
  epoch_us: 1e6,
  epoch_ns: 1e9,
};
const CLOCK = /^(\d{1,2}):(\d{2}):(\d{2})(?:[.,:](\d{1,9}))?\s*([AP]M)?$/i;
const SHORT_CLOCK = /^(\d{1,3}):(\d{2})(?:[.,](\d{1,9}))?$/;
const YEAR_FIRST = /^(?<y>\d{4})[-/._](?<m>\d{1,2})[-/._](?<d>\d{1,2})[T _](?<rest>.+)$/i;
const DAY_FIRST = /^(?<d>\d{1,2})\.(?<m>\d{1,2})\.(?<y>\d{4})[T _,]+(?<rest>.+)$/;
const DAY_NAME = /^(?<d>\d{1,2})[- ](?<name>[a-z]{3})[a-z]*\.?[- ](?<y>\d{4})[T _,]+(?<rest>.+)$/i;
const SLASHES = /^(?<m>\d{1,2})\/(?<d>\d{1,2})\/(?<y>\d{4})[T _,]+(?<rest>.+)$/;
const ZONE = /\s*(Z|UTC|[+-]\d{2}:?\d{2})$/i;
const MONTHS = ["jan", "feb", "mar", "apr", "may", "jun", "jul", "aug", "sep", "oct", "nov", "dec"];

const fraction = (digits: string | undefined) => (digits ? Number(`0.${digits}`) : 0);

function clockSeconds(cell: string): number | null {
  const long = CLOCK.exec(cell);
  if (long) {
    let hour = Number(long[1]);
    if (Number(long[2]) > 59 || Number(long[3]) > 60 || hour > 24) return null;
    if (long[5]) hour = (hour % 12) + (long[5].toUpperCase() === "PM" ? 12 : 0);
    return hour * 3600 + Number(long[2]) * 60 + Number(long[3]) + fraction(long[4]);
  }
  const short = SHORT_CLOCK.exec(cell);
  if (short)
    return Number(short[2]) > 59 ? null : Number(short[1]) * 60 + Number(short[2]) + fraction(short[3]);
  return null;
}

/**
 * Milliseconds since 1970: whole numbers stay exact, which seconds with a fraction would not. Slashes are month first
 * unless that is no date; only differences are used, so the order matters only where the day changes.
 */
function isoMilliseconds(cell: string): number | null {
  const parts = (YEAR_FIRST.exec(cell) ?? DAY_FIRST.exec(cell) ?? DAY_NAME.exec(cell) ?? SLASHES.exec(cell))
    ?.groups;
  if (!parts) return null;
  let [year, month, day] = [Number(parts.y), Number(parts.m), Number(parts.d)];
  if (parts.name) month = MONTHS.indexOf(parts.name.toLowerCase()) + 1;
  if (month > 12 && day <= 12) [month, day] = [day, month];
  if (month < 1 || month > 12 || day < 1 || day > 31) return null;
  const zone = ZONE.exec(parts.rest)?.[1] ?? "";
  const clock = parts.rest
    .replace(ZONE, "")
    .replace(
      /^(\d{1,2})_(\d{2})_(\d{2})(?:_(\d+))?$/,
      (_, h, m, s, f) => `${h}:${m}:${s}${f ? `.${f}` : ""}`,
    );
  const long = CLOCK.exec(clock);
  const seconds = long === null ? null : clockSeconds(clock);
  if (long === null || seconds === null) return null;
  const offset = /^([+-])(\d{2}):?(\d{2})$/.exec(zone);
  const shiftS = offset
    ? (offset[1] === "-" ? -1 : 1) * (Number(offset[2]) * 3600 + Number(offset[3]) * 60)
    : 0;
  const wholeS = Math.floor(seconds) - shiftS;
  return Date.UTC(year, month - 1, day) + wholeS * 1000 + fraction(long[4]) * 1000;
}

/** One time cell in the counts of its form; NaN when it is missing or not of this form. `clock` counts from midnight. */
export function readTimeCell(cell: string, form: TimeForm, decimal: "." | ","): number {
  const text = cell.trim();
  if (form === "clock") return clockSeconds(text) ?? Number.NaN;
  if (form === "iso") return isoMilliseconds(text) ?? Number.NaN;
  return parseNumber(text, decimal) ?? Number.NaN;
}

/**
 * Turns counts into seconds, in place. Dates and epoch counts are taken from the first value before scaling, since
 * 1.9e9 s leaves only 0.2 µs of resolution; a plain time keeps its own zero.
 */
export function countsToSeconds(counts: Float64Array, form: TimeForm): void {
  const zero = form === "iso" || form.startsWith("epoch") ? (counts[0] ?? 0) : 0;
  const perSecond = COUNTS_PER_S[form];
  for (let i = 0; i < counts.length; i++) counts[i] = ((counts[i] ?? Number.NaN) - zero) / perSecond;
}

/** What `findTimeForm` decided; `assumed` says so when the file does not state the unit. */
export interface TimeFormFinding {
  form: TimeForm;
  assumed: string | null;
}

function numericForm(values: readonly number[], unitText: string | null): TimeFormFinding | null {
  const first = Math.abs(values[0] ?? 0);
  const unit = (unitText ?? "").normalize("NFKC").trim().toLowerCase();
  if (first > 1e11 && first < 1e13 && (unit === "" || unit === "ms"))
    return { form: "epoch_ms", assumed: null };
  if (first > 1e14 && first < 1e16 && (unit === "" || unit === "us" || unit === "μs"))
    return { form: "epoch_us", assumed: null };
  if (first > 1e17 && (unit === "" || unit === "ns")) return { form: "epoch_ns", assumed: null };
  if (first > 5e8 && first < 5e9 && (unit === "" || unit.startsWith("s")))
    return { form: "epoch_s", assumed: null };
  if (/^(s|sec|secs|second|seconds|sek|sekunden)$/.test(unit)) return { form: "s", assumed: null };
  if (/^(ms|msec|millis|millisecond|milliseconds)$/.test(unit)) return { form: "ms", assumed: null };
  if (/^(us|μs|usec|microseconds)$/.test(unit)) return { form: "us", assumed: null };
  if (/^(ns|nanoseconds)$/.test(unit)) return { form: "ns", assumed: null };
  if (/^(min|minutes|minuten)$/.test(unit)) return { form: "min", assumed: null };
  if (/^(h|hours|stunden)$/.test(unit)) return { form: "h", assumed: null };
  const steps = values
    .slice(1)
    .map((value, i) => value - (values[i] ?? 0))
    .filter((step) => step > 0)
    .sort((a, b) => a - b);
  const step = steps[Math.floor(steps.length / 2)] ?? 0;
  const whole = values.every((value) => Number.isInteger(value));
  if (whole && step >= 2 && step <= 2000) {
    return {
      form: "ms",
      assumed: `The time column states no unit; steps of ${step} in whole numbers are taken as milliseconds.`,
    };
  }
  return { form: "s", assumed: "The time column states no unit; it is taken as seconds." };
}

/** Finds the form of a time column from its first cells and its unit text; null when they are no time. */
export function findTimeForm(
  cells: readonly string[],
  unitText: string | null,
  decimal: "." | ",",
): TimeFormFinding | null {
  const filled = cells.map((cell) => cell.trim()).filter((cell) => !isMissingMark(cell));
  if (filled.length === 0) return null;
  const enough = (count: number) => count >= 0.8 * filled.length;
  if (enough(filled.filter((cell) => clockSeconds(cell) !== null).length)) {
    const open = filled.every((cell) => /^\d{1,3}:\d{2}$/.test(cell));
    const assumed = `Times like "${filled[0]}" can be hours and minutes; they are taken as minutes and seconds. Record the time with seconds.`;
    return { form: "clock", assumed: open ? assumed : null };
  }
  if (enough(filled.filter((cell) => isoMilliseconds(cell) !== null).length))
    return { form: "iso", assumed: null };
  const numbers = filled
    .map((cell) => parseNumber(cell, decimal))
    .filter((value): value is number => value !== null);
  return enough(numbers.length) ? numericForm(numbers, unitText) : null;
}
