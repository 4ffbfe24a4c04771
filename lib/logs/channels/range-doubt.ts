import { CHANNEL_UNITS } from "@/lib/logs/channels/channel-names";
import { type KnownChannel, type LogChannel, type LogProblem, ROAD_SPEEDS } from "@/lib/logs/types";
import { KMH_MPS, KNOT_MPS, MPH_MPS } from "@/lib/units/constants";

/** Least and largest value of a channel in its canonical unit. */
export interface ValueRange {
  min: number;
  max: number;
}

const within = (value: number, [low, high]: readonly [number, number]) => value >= low && value <= high;
const MANIFOLD_KPA = CHANNEL_UNITS.manifold_pressure.plausible;
/** Coolant of a running engine, °C. Common practice, no source. */
const COOLANT_C = [40, 130] as const;
/** A mixture leaner than this over a whole run is none; petrol burns at about 14.7 parts of air to one of fuel. */
const LEANEST_OF_ALL = 5;
const SHIFTS = [10, 100, 1000, 0.1, 0.01, 0.001];

/** Slips of a unit that a range of one channel gives away; null: none known. */
function unitSlip(channel: KnownChannel, { min, max }: ValueRange): string | null {
  if (channel === "lambda" && min > LEANEST_OF_ALL && max < 40) return "an air-fuel ratio instead of lambda?";
  if (channel.startsWith("manifold_pressure")) {
    if (min >= 0 && max < 8 && within(100 * max, MANIFOLD_KPA)) return "in bar?";
    if (max > MANIFOLD_KPA[1] && within(max / 10, MANIFOLD_KPA)) return "in mbar?";
  }
  if (channel === "coolant_temperature") {
    if (max > COOLANT_C[1] && within((max - 32) / 1.8, COOLANT_C)) return "in °F?";
    if (min > 200 && within(max - 273.15, COOLANT_C)) return "in K?";
  }
  if ((channel === "throttle" || channel === "pedal") && min >= 0 && max > 0.3 && max <= 1.02)
    return "a fraction instead of per cent?";
  return null;
}

/** Whether a range would fit its channel if it were shifted by tens, the mark of a decimal sign; `lowestTop`: its max must reach this. */
export function fitsByTens(channel: KnownChannel, { min, max }: ValueRange, lowestTop = -Infinity): boolean {
  const { plausible } = CHANNEL_UNITS[channel];
  return SHIFTS.some((f) => within(min * f, plausible) && within(max * f, plausible) && max * f >= lowestTop);
}

/**
 * What speaks against the range of a channel, named: a unit, or a decimal mark where a shift by tens would make it fit.
 * Null where nothing does. `range` in the canonical unit.
 */
export function rangeDoubt(channel: KnownChannel, range: ValueRange): string | null {
  if (range.min > range.max) return null;
  const slip = unitSlip(channel, range);
  if (slip) return slip;
  const { plausible, withoutUnit } = CHANNEL_UNITS[channel];
  if (within(range.min, plausible) && within(range.max, plausible)) return null;
  if (!fitsByTens(channel, range)) return "another unit?";
  return withoutUnit === null ? "another unit, or the decimal mark?" : "the decimal mark?";
}

const SPEEDS = new Set<string>(ROAD_SPEEDS);
const SPEED_PAIRS: readonly [string, number][] = [
  ["km/h and m/s", 1 / KMH_MPS],
  ["mph and km/h", MPH_MPS / KMH_MPS],
  ["mph and m/s", 1 / MPH_MPS],
  ["knots and km/h", KNOT_MPS / KMH_MPS],
  ["knots and m/s", 1 / KNOT_MPS],
];
/** Speeds below this tell no ratio, m/s. */
const MOVING_MPS = 3;
const RATIO_TOLERANCE = 0.02;
const FEWEST_PAIRS = 20;

/** Quotient of two speeds over the rows in which both move; NaN where that are too few. */
function speedRatio(a: Float64Array, b: Float64Array): number {
  let [sumA, sumB, n] = [0, 0, 0];
  for (let i = 0; i < a.length; i++) {
    if (!(a[i] > MOVING_MPS && b[i] > MOVING_MPS)) continue;
    sumA += a[i];
    sumB += b[i];
    n++;
  }
  return n < FEWEST_PAIRS ? Number.NaN : sumA / sumB;
}

/** Two road speeds of one log that differ as two units do: one of them states the wrong unit. Problem entries. */
export function speedUnitDoubts(channels: readonly LogChannel[]): LogProblem[] {
  const speeds = channels.filter(({ channel, timeS }) => channel && SPEEDS.has(channel) && !timeS);
  return speeds.flatMap((one, k) =>
    speeds.slice(k + 1).flatMap((other) => {
      if (one.values.length !== other.values.length) return [];
      const ratio = speedRatio(one.values, other.values);
      const larger = Math.max(ratio, 1 / ratio);
      const pair = SPEED_PAIRS.find(([, factor]) => Math.abs(larger / factor - 1) < RATIO_TOLERANCE);
      if (!pair) return [];
      const message = `"${one.column}" and "${other.column}" differ by a factor of ${larger.toFixed(2)}, as ${pair[0]} do. Check the unit of both.`;
      return [{ code: "speed_units_disagree", message }];
    }),
  );
}
