import { accelerationRows } from "@/lib/measure/run/acceleration-rows";
import { findCoasts } from "@/lib/measure/run/find-coasts";
import type { RunSignals } from "@/lib/measure/run/run-signals";
import type { CampaignVehicle, Note, Span } from "@/lib/measure/types";
import { lowerBound } from "@/lib/signal/local-quadratic";
import { median, quantile } from "@/lib/signal/statistics";

/** What one log contains; `reason` says why no pull was found. */
export interface Segments {
  pull: Span | null;
  /** Steady driving just before the pull, in the same gear. */
  cruise: Span | null;
  /** All stretches of free rolling, in order of time. */
  coasts: Span[];
  /** The one of them over the widest range of speed. */
  coast: Span | null;
  /** A change of gear through which full load was held, next to the pull: only one gear's part is the pull. */
  gearChange: Span | null;
  /** Why there is no pull, with the span of what came nearest to one. */
  reason: Note | null;
}

/** Least share of the way from the start of the pull to the red line (campaign.md start value). */
const LEAST_RISE = 0.4;
const LEAST_SAMPLES = 30;

/**
 * Finds the pull (full load, one gear, rising engine speed), the steady part before it and the neutral coast-down.
 * Works from pedal or throttle where logged, else from the acceleration; from engine speed where logged, else road speed.
 */
export function findSegments(signals: RunSignals, vehicle: CampaignVehicle, perMps: number | null): Segments {
  const none = (reason: Note): Segments => ({
    pull: null,
    cruise: null,
    ...coastsOf(signals, null, perMps),
    gearChange: null,
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
      ...pull,
      message: `The pull covers ${what}. Hold full load for longer, from lower engine speed.`,
    });
  }
  const locked = lockedRatio(signals, first, last) ?? perMps;
  return {
    pull,
    cruise: findCruise(signals, first),
    ...coastsOf(signals, [first, last], locked),
    gearChange: changeBeside(signals, spans, pieces, best.span),
    reason: null,
  };
}

/** What lies between the pull and a neighbouring piece of the same stretch of full load; null where there is none. */
function changeBeside(
  { timeS }: RunSignals,
  spans: readonly [number, number][],
  pieces: readonly [number, number][],
  pull: [number, number],
): Span | null {
  const at = pieces.indexOf(pull);
  const whole = spans.find(([a, b]) => a <= pull[0] && b >= pull[1]);
  const gap = (a: [number, number] | undefined, b: [number, number] | undefined): Span | null =>
    whole && a && b && a[0] >= whole[0] && b[1] <= whole[1]
      ? { from_s: timeS[a[1]], to_s: timeS[b[0]] }
      : null;
  return gap(pieces[at - 1], pull) ?? gap(pull, pieces[at + 1]);
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

function coastsOf(
  signals: RunSignals,
  pull: [number, number] | null,
  perMps: number | null,
): Pick<Segments, "coast" | "coasts"> {
  const coasts = findCoasts(signals, pull, perMps);
  return { coasts, coast: widest(signals, coasts) };
}

/** The piece over the widest range of speed; null without any. */
function widest({ timeS, speedRows }: RunSignals, coasts: readonly Span[]): Span | null {
  const speedAt = (t: number) => speedRows[Math.min(timeS.length - 1, lowerBound(timeS, t))];
  const fall = (span: Span) => speedAt(span.from_s) - speedAt(span.to_s);
  return coasts.reduce<Span | null>(
    (best, span) => (best === null || fall(span) > fall(best) ? span : best),
    null,
  );
}
