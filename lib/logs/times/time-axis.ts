import { FileRefusedError } from "@/lib/errors";
import type { LogProblem } from "@/lib/logs/types";
import { quantile } from "@/lib/signal/statistics";

/** Rows to keep, in rising time, with their time from the first kept sample. */
export interface TimeAxis {
  /** Index of the row in the file order of data rows; null when every row is kept in its place. */
  order: Uint32Array | null;
  /** Seconds from the first kept sample, strictly rising. */
  timeS: Float64Array;
  rateHz: number;
  gaps: { fromS: number; toS: number }[];
  problems: LogProblem[];
}

const DAY_S = 86_400;
/** A row may arrive this many places late and still count as a short swap. */
const MAX_SWAP_ROWS = 5;
/** A step longer than this many usual steps is a gap. */
const GAP_STEPS = 2.5;

/** Adds a day at each fall of more than half a day: a wall clock that passed midnight. Changes `timeS` in place. */
export function unwrapMidnight(timeS: Float64Array): number {
  let days = 0;
  let previous = Number.NaN;
  for (let i = 0; i < timeS.length; i++) {
    const raw = timeS[i] ?? Number.NaN;
    if (Number.isNaN(raw)) continue;
    if (raw < previous - DAY_S / 2) days++;
    previous = raw;
    timeS[i] = raw + days * DAY_S;
  }
  return days;
}

function longestPiece(
  rows: readonly number[],
  timeS: Float64Array,
): { piece: number[]; pieces: number; swapped: number } {
  const pieces: number[][] = [];
  let piece: number[] = [];
  let swapped = 0;
  for (const row of rows) {
    const t = timeS[row] ?? 0;
    let at = piece.length;
    while (at > 0 && piece.length - at <= MAX_SWAP_ROWS && (timeS[piece[at - 1] ?? 0] ?? 0) > t) at--;
    const late = piece.length - at;
    if (late > MAX_SWAP_ROWS) {
      pieces.push(piece);
      piece = [row];
      continue;
    }
    if (late > 0) swapped++;
    if (late === 0) piece.push(row);
    else piece.splice(at, 0, row);
  }
  pieces.push(piece);
  let best = pieces[0] ?? [];
  for (const candidate of pieces) if (candidate.length > best.length) best = candidate;
  return { piece: best, pieces: pieces.length, swapped };
}

/** A time further off than this (30,000 years) is none: its nanoseconds would be lost in the number. */
const FURTHEST_S = 1e12;

function isTime(t: number): boolean {
  return Math.abs(t) <= FURTHEST_S;
}

function isRising(timeS: Float64Array): boolean {
  for (let i = 1; i < timeS.length; i++) if (!(timeS[i] > timeS[i - 1])) return false;
  return timeS.length > 0;
}

/** Times from the first one, to the nanosecond: what lies below is rounding of the file's own numbers. */
function fromFirst(count: number, timeAt: (i: number) => number, t0: number): Float64Array {
  const timeS = new Float64Array(count);
  for (let i = 0; i < count; i++) timeS[i] = Math.round((timeAt(i) - t0) * 1e9) / 1e9;
  return timeS;
}

/**
 * Brings rows into strictly rising time. Short swaps are sorted, equal times keep the last row, a longer jump back
 * splits the log and the longest piece is kept, rows without a time are left out: each with a problem entry. Times are equal
 * when no whole nanosecond lies between them.
 * Throws FileRefusedError `time_not_increasing`.
 */
export function buildTimeAxis(rawS: Float64Array): TimeAxis {
  const problems: LogProblem[] = [];
  if (rawS.length > 0 && isTime(rawS[0]) && isTime(rawS[rawS.length - 1])) {
    const timeS = fromFirst(rawS.length, (i) => rawS[i], rawS[0]);
    if (isRising(timeS)) return { order: null, timeS, ...ratesAndGaps(timeS, problems), problems };
  }
  const rows: number[] = [];
  for (let i = 0; i < rawS.length; i++) if (isTime(rawS[i])) rows.push(i);
  const { piece, pieces, swapped } = longestPiece(rows, rawS);
  const kept: number[] = [];
  let repeated = 0;
  const t0 = rawS[piece[0] ?? 0];
  const nanoseconds = (row: number) => Math.round((rawS[row] - t0) * 1e9);
  for (const row of piece) {
    const last = kept[kept.length - 1];
    if (last !== undefined && nanoseconds(last) === nanoseconds(row)) {
      kept[kept.length - 1] = row;
      repeated++;
    } else kept.push(row);
  }
  if (kept.length < 2 && rows.length >= 2) {
    throw new FileRefusedError(
      "time_not_increasing",
      "The time column does not rise: every row carries the same time. Export the log with the time of each sample.",
    );
  }
  if (rows.length < rawS.length)
    problems.push({
      code: "rows_without_time",
      message: `${rawS.length - rows.length} rows have no time and were left out.`,
    });
  if (swapped > 0)
    problems.push({
      code: "rows_out_of_order",
      message: `${swapped} rows stood up to ${MAX_SWAP_ROWS} places too late in time and were sorted.`,
    });
  if (repeated > 0)
    problems.push({
      code: "repeated_time",
      message: `${repeated} rows repeat the time of another row; the last of each was kept.`,
    });
  if (pieces > 1) {
    problems.push({
      code: "time_jumps_back",
      message: `The time jumps back ${pieces - 1} times; the longest of the ${pieces} pieces was kept (${piece.length} of ${rows.length} rows).`,
    });
  }
  const timeS = fromFirst(kept.length, (i) => rawS[kept[i]], t0);
  return { order: Uint32Array.from(kept), timeS, ...ratesAndGaps(timeS, problems), problems };
}

function ratesAndGaps(timeS: Float64Array, problems: LogProblem[]): Pick<TimeAxis, "rateHz" | "gaps"> {
  const steps = new Float64Array(Math.max(0, timeS.length - 1));
  for (let i = 0; i < steps.length; i++) steps[i] = timeS[i + 1] - timeS[i];
  const step = steps.length > 0 ? quantile(steps, 0.5) : 0;
  const gaps: { fromS: number; toS: number }[] = [];
  for (let i = 0; i < steps.length; i++) {
    if ((steps[i] ?? 0) > GAP_STEPS * step) gaps.push({ fromS: timeS[i] ?? 0, toS: timeS[i + 1] ?? 0 });
  }
  const longest = gaps.reduce((max, gap) => Math.max(max, gap.toS - gap.fromS), 0);
  if (gaps.length > 0) {
    problems.push({
      code: "gaps",
      message: `${gaps.length} gaps in the samples, the longest ${longest.toFixed(2)} s; nothing is filled in.`,
    });
  }
  return { rateHz: step > 0 ? Math.round(1e6 / step) / 1e6 : 0, gaps };
}
