import type { LogProblem } from "@/lib/logs/types";

/** Below this share of rows that repeat the time before, repeats are slips and the last row of each is kept. */
const COARSE_SHARE = 0.4;
/** A logger that holds values between samples repeats rows; another sample differs in some channel. Common practice, no source. */
const OTHER_SAMPLE_SHARE = 0.1;

/** Rows of one written time: [first, end). */
interface Tick {
  first: number;
  end: number;
}

function ticksOf(timeS: Float64Array): Tick[] {
  const ticks: Tick[] = [];
  for (let i = 0; i < timeS.length; i++) {
    const last = ticks[ticks.length - 1];
    if (last && timeS[i] === timeS[last.first]) last.end = i + 1;
    else ticks.push({ first: i, end: i + 1 });
  }
  return ticks;
}

function differs(columns: readonly Float64Array[], a: number, b: number): boolean {
  return columns.some((column) => Math.abs(column[a] - column[b]) > 0);
}

/** Cells that only an earlier row of the same time holds go into its last row, which is the one that stays. */
function fillLast(timeS: Float64Array, columns: readonly Float64Array[]): void {
  for (let i = 1; i < timeS.length; i++) {
    if (timeS[i] !== timeS[i - 1]) continue;
    for (const column of columns) if (Number.isNaN(column[i])) column[i] = column[i - 1];
  }
}

/** Step of the clock: the most frequent one between written times. */
function clockStep(timeS: Float64Array, ticks: readonly Tick[]): number {
  const counts = new Map<number, number>();
  for (let k = 1; k < ticks.length; k++) {
    const step = Math.round((timeS[ticks[k].first] - timeS[ticks[k - 1].first]) * 1e6) / 1e6;
    counts.set(step, (counts.get(step) ?? 0) + 1);
  }
  let best = 0;
  for (const [step, count] of counts) if (step > 0 && count > (counts.get(best) ?? 0)) best = step;
  return best;
}

/** Times on a line through a stretch of ticks without a gap; null where a row would lie further than one sample outside its tick. */
function lineThrough(timeS: Float64Array, ticks: readonly Tick[], stepS: number): Float64Array | null {
  const inner = ticks.length - 2;
  if (inner < 2) return null;
  // The first tick may begin before the recording and the last one end after it: whole are those between.
  const from = ticks[1].first;
  const to = ticks[ticks.length - 1].first;
  const sampleS = (inner * stepS) / (to - from);
  const first = ticks[0].first;
  const spread = new Float64Array(ticks[ticks.length - 1].end - first);
  for (const tick of ticks)
    for (let i = tick.first; i < tick.end; i++) {
      const t = timeS[from] + (i - from) * sampleS;
      if (t < timeS[i] - sampleS || t > timeS[i] + stepS + sampleS) return null;
      spread[i - first] = t;
    }
  return spread;
}

function stretches(timeS: Float64Array, ticks: readonly Tick[], stepS: number): Tick[][] {
  const all: Tick[][] = [];
  let last: Tick | null = null;
  for (const tick of ticks) {
    const stretch = all[all.length - 1];
    if (last && Math.abs(timeS[tick.first] - timeS[last.first] - stepS) < 0.01 * stepS) stretch.push(tick);
    else all.push([tick]);
    last = tick;
  }
  return all;
}

const figure = (value: number) => String(Number(value.toPrecision(3)));

/**
 * Times of a clock that is coarser than the sampling: where most rows repeat the time before and yet are other samples, they are
 * spread evenly between the ticks, in place, if they come at a steady rate; else the time stays as written and that is told.
 * True repeats stay. `columns`: the other columns, one value a row.
 */
export function spreadTimes(
  timeS: Float64Array,
  columns: readonly Float64Array[],
  problems: LogProblem[],
): void {
  let repeats = 0;
  let others = 0;
  for (let i = 1; i < timeS.length; i++) {
    if (timeS[i] !== timeS[i - 1]) continue;
    repeats++;
    if (differs(columns, i - 1, i)) others++;
  }
  if (repeats === 0) return;
  if (repeats < COARSE_SHARE * timeS.length || others < OTHER_SAMPLE_SHARE * repeats) {
    fillLast(timeS, columns);
    return;
  }
  const ticks = ticksOf(timeS);
  const stepS = clockStep(timeS, ticks);
  const runs = stepS > 0 ? stretches(timeS, ticks, stepS) : [];
  const long = runs.filter((run) => run.length >= 4);
  const lines = long.map((run) => lineThrough(timeS, run, stepS));
  const spreadRows = lines.reduce((sum, line) => sum + (line?.length ?? 0), 0);
  if (spreadRows < 0.8 * timeS.length) {
    fillLast(timeS, columns);
    const most = ticks.reduce((max, { first, end }) => Math.max(max, end - first), 0);
    problems.push({
      code: "clock_too_coarse",
      message: `The clock of this log goes on in steps of ${figure(stepS)} s while up to ${most} rows come between two of them, at no steady rate; only the last row of each time is kept. Record the time with more places.`,
    });
    return;
  }
  long.forEach((run, k) => {
    const line = lines[k];
    if (line) timeS.set(line, run[0].first);
  });
  problems.push({
    code: "times_spread",
    message: `The clock of this log goes on in steps of ${figure(stepS)} s with about ${figure(timeS.length / ticks.length)} rows each, at a steady rate; their times were spread evenly in between. Record the time with more places if that is wrong.`,
  });
}
