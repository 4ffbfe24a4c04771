import type { RunSignals } from "@/lib/measure/run/run-signals";
import type { CampaignVehicle, Reason, Span } from "@/lib/measure/types";
import { median, quantile } from "@/lib/signal/statistics";

/** What one log contains; `reason` says why no pull was found. */
export interface Segments {
  pull: Span | null;
  /** Steady driving just before the pull, in the same gear. */
  cruise: Span | null;
  coast: Span | null;
  /** True when full load was held through a change of gear: only one gear's part is the pull. */
  gearChange: boolean;
  reason: Reason | null;
}

/** Least share of the way from the start of the pull to the red line (campaign.md start value). */
const LEAST_RISE = 0.4;
const LEAST_SAMPLES = 30;
/** A coast-down of less is no basis for losses: 20 km/h. */
const LEAST_COAST_FALL_MPS = 20 / 3.6;

/**
 * Finds the pull (full load, one gear, rising engine speed), the steady part before it and the neutral coast-down.
 * Works from pedal or throttle where logged, else from the acceleration; from engine speed where logged, else road speed.
 */
export function findSegments(signals: RunSignals, vehicle: CampaignVehicle, perMps: number | null): Segments {
  const none = (reason: Reason): Segments => ({
    pull: null,
    cruise: null,
    coast: findCoast(signals, 0, perMps),
    gearChange: false,
    reason,
  });
  const spans = signals.loadRows ? fullLoadSpans(signals, signals.loadRows) : risingSpans(signals);
  if (spans.length === 0) {
    const reason = signals.loadRows
      ? {
          code: "no_full_load",
          message:
            "The pedal or throttle never stays fully open. Drive the pull at full load and log the pedal.",
        }
      : {
          code: "no_pull_found",
          message:
            "The log has no stretch of steady hard acceleration in one gear. Check that the pull is in the recording.",
        };
    return none(reason);
  }
  const pieces = spans.flatMap((span) => oneGear(signals, span));
  let best: { span: [number, number]; from: number; to: number } | null = null;
  for (const span of pieces) {
    const [from, to] = riseOf(signals, span, perMps);
    if (to - from > 0 && (!best || to - from > best.to - best.from)) best = { span, from, to };
  }
  if (!best) {
    return none({
      code: "no_pull_found",
      message: "Full load was found, but the engine speed does not rise through it in one gear.",
    });
  }
  const [first, last] = best.span;
  const pull = { from_s: signals.timeS[first], to_s: signals.timeS[last] };
  const knowsRpm = signals.engineRows !== null || perMps !== null;
  const rise = (best.to - best.from) / Math.max(1, vehicle.redline_rpm - best.from);
  if (last - first + 1 < LEAST_SAMPLES || (knowsRpm && rise < LEAST_RISE)) {
    const what =
      last - first + 1 < LEAST_SAMPLES
        ? `only ${last - first + 1} samples (at least ${LEAST_SAMPLES})`
        : `${Math.round(best.from)} to ${Math.round(best.to)} 1/min, ${Math.round(100 * rise)} % of the way to the red line (at least ${100 * LEAST_RISE} %)`;
    return none({
      code: "pull_too_short",
      message: `The pull covers ${what}. Hold full load for longer, from lower engine speed.`,
    });
  }
  const locked = lockedRatio(signals, first, last) ?? perMps;
  return {
    pull,
    cruise: findCruise(signals, first),
    coast: findCoast(signals, last, locked),
    gearChange: pieces.length > spans.length,
    reason: null,
  };
}

/** Engine speed per finding speed in the pull, as logged: what the coast-down's engine speed must part from. */
function lockedRatio(signals: RunSignals, first: number, last: number): number | null {
  const { engineRows, speedRows } = signals;
  if (!engineRows) return null;
  const ratios: number[] = [];
  for (let i = first; i <= last; i++) if (speedRows[i] > 3) ratios.push(engineRows[i] / speedRows[i]);
  const ratio = median(ratios);
  return Number.isFinite(ratio) ? ratio : null;
}

/** A recording gap of up to this is bridged when full load stands on both sides of it, s; what lies in it is masked. */
const LONGEST_GAP_S = 2;

/** True when row `i` continues a span that ended at row `end`: after a short dip, or right after a gap in the recording. */
function joins({ timeS }: RunSignals, end: number, i: number, bridgeS: number): boolean {
  const pause = timeS[i] - timeS[end];
  return pause <= bridgeS || (i === end + 1 && pause <= LONGEST_GAP_S);
}

/** Row spans in which the load stays at its full value; dips of up to 0.15 s are bridged. */
function fullLoadSpans(signals: RunSignals, load: Float64Array): [number, number][] {
  const top = quantile(load, 0.995);
  if (!(top >= 60)) return [];
  const limit = Math.max(55, 0.93 * top);
  const spans: [number, number][] = [];
  for (let i = 0; i < load.length; i++) {
    if (!(load[i] >= limit)) continue;
    const previous = spans[spans.length - 1];
    if (previous && joins(signals, previous[1], i, Math.max(0.15, 2.5 / signals.rateHz))) previous[1] = i;
    else spans.push([i, i]);
  }
  return spans.filter(([a, b]) => signals.timeS[b] - signals.timeS[a] >= 0.8);
}

/** Without a load channel: spans of acceleration above 40 % of the hardest and 0.6 m/s². */
function risingSpans(signals: RunSignals): [number, number][] {
  const acceleration = accelerationRows(signals, 0.5);
  const limit = Math.max(0.6, 0.4 * quantile(acceleration, 0.995));
  const spans: [number, number][] = [];
  for (let i = 0; i < acceleration.length; i++) {
    if (!(acceleration[i] >= limit)) continue;
    const previous = spans[spans.length - 1];
    if (previous && joins(signals, previous[1], i, 0.2 + 2 / signals.rateHz)) previous[1] = i;
    else spans.push([i, i]);
  }
  return spans.filter(([a, b]) => signals.timeS[b] - signals.timeS[a] >= 1.5);
}

/**
 * Acceleration a row: difference of the mean finding speeds of the `widthS` after and before it; O(rows). Rough on purpose,
 * for finding segments only.
 */
function accelerationRows(signals: RunSignals, widthS: number): Float64Array {
  const { timeS, speedRows } = signals;
  const n = timeS.length;
  const width = Math.max(1, Math.round(widthS * signals.rateHz));
  const sum = new Float64Array(n + 1);
  const timeSum = new Float64Array(n + 1);
  for (let i = 0; i < n; i++) {
    sum[i + 1] = sum[i] + speedRows[i];
    timeSum[i + 1] = timeSum[i] + timeS[i];
  }
  return timeS.map((_, i) => {
    const a = Math.max(0, i - width);
    const b = Math.min(n, i + width);
    if (i - a < 1 || b - i < 1) return Number.NaN;
    const rise = (sum[b] - sum[i]) / (b - i) - (sum[i] - sum[a]) / (i - a);
    return rise / ((timeSum[b] - timeSum[i]) / (b - i) - (timeSum[i] - timeSum[a]) / (i - a));
  });
}

/** Splits a span where the gear channel changes or the ratio of engine to road speed jumps. */
function oneGear(signals: RunSignals, [first, last]: [number, number]): [number, number][] {
  const { gearRows, engineRows, speedRows } = signals;
  const cuts: number[] = [];
  if (gearRows) {
    for (let i = first + 1; i <= last; i++) {
      if (Math.round(gearRows[i]) !== Math.round(gearRows[i - 1]) && !Number.isNaN(gearRows[i])) cuts.push(i);
    }
  } else if (engineRows) {
    const width = Math.max(2, Math.round(0.2 * signals.rateHz));
    const ratio = (from: number, to: number) =>
      median(
        Array.from(
          { length: Math.max(0, to - from) },
          (_, k) => engineRows[from + k] / Math.max(1, speedRows[from + k]),
        ),
      );
    for (let i = first + width; i + width <= last; i++) {
      const before = ratio(i - width, i);
      const after = ratio(i, i + width);
      // Neighbouring gears differ by more than 12 % [common practice, no source]; wheel spin stays below.
      if (Math.abs(after / before - 1) > 0.12 && i - (cuts[cuts.length - 1] ?? -width) > width) cuts.push(i);
    }
  }
  const edges = [first, ...cuts, last + 1];
  const margin = cuts.length > 0 ? Math.round(0.4 * signals.rateHz) : 0;
  return edges
    .slice(1)
    .map((end, k): [number, number] => [
      edges[k] + (k > 0 ? margin : 0),
      end - 1 - (k < edges.length - 2 ? margin : 0),
    ])
    .filter(([a, b]) => b > a);
}

function riseOf(
  signals: RunSignals,
  [first, last]: [number, number],
  perMps: number | null,
): [number, number] {
  const rows = signals.engineRows ?? signals.speedRows.map((v) => v * (perMps ?? 1));
  const end = Math.max(2, Math.round(0.1 * signals.rateHz));
  const low = median(rows.subarray(first, first + end));
  const high = median(rows.subarray(Math.max(first, last + 1 - end), last + 1));
  return [low, high];
}

/** Up to 4 s of nearly constant speed right before the pull. */
function findCruise(signals: RunSignals, pullRow: number): Span | null {
  const { timeS, speedRows } = signals;
  const end = timeS[pullRow] - 0.15;
  let i = pullRow;
  while (i > 0 && timeS[i] > end) i--;
  const stop = i;
  while (i > 0 && timeS[stop] - timeS[i - 1] <= 4 && Math.abs(speedRows[i - 1] - speedRows[stop]) < 0.3) i--;
  return timeS[stop] - timeS[i] >= 0.6 ? { from_s: timeS[i], to_s: timeS[stop] } : null;
}

/** The longest coast-down after row `after`: load closed, engine off the wheels, speed falling gently. */
function findCoast(signals: RunSignals, after: number, perMps: number | null): Span | null {
  const { timeS, speedRows, loadRows, engineRows, gearRows } = signals;
  const acceleration = accelerationRows(signals, 0.8);
  const closed = loadRows ? Math.min(quantile(loadRows, 0.02) + 5, 20) : 0;
  const free = (i: number): boolean => {
    if (loadRows && !(loadRows[i] <= closed)) return false;
    if (!(acceleration[i] < 0.3 && acceleration[i] > -1.8) || speedRows[i] < 4) return false;
    if (gearRows && Number.isFinite(gearRows[i]) && Math.round(gearRows[i]) === 0) return true;
    if (engineRows && perMps) return Math.abs(engineRows[i] / (speedRows[i] * perMps) - 1) > 0.15;
    return !engineRows && !gearRows;
  };
  let best: [number, number] | null = null;
  let start = -1;
  let misses = 0;
  for (let i = after; i <= timeS.length; i++) {
    const is = i < timeS.length && free(i);
    if (is) {
      if (start < 0) start = i;
      misses = 0;
    } else if (start >= 0 && (i === timeS.length || ++misses > 0.3 * signals.rateHz)) {
      const end = i - misses - (i === timeS.length ? 1 : 0);
      if (!best || speedRows[start] - speedRows[end] > speedRows[best[0]] - speedRows[best[1]])
        best = [start, end];
      start = -1;
      misses = 0;
    }
  }
  if (!best) return null;
  // The driveline needs a moment to come to rest after the gear goes out; a braked or re-engaged end is cut as well.
  const from = timeS[best[0]] + 0.6;
  const to = timeS[best[1]] - 0.5;
  let i = best[0];
  while (i < best[1] && timeS[i] < from) i++;
  let j = best[1];
  while (j > i && timeS[j] > to) j--;
  return speedRows[i] - speedRows[j] >= LEAST_COAST_FALL_MPS ? { from_s: timeS[i], to_s: timeS[j] } : null;
}
