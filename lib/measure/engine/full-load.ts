import type { LogTable } from "@/lib/logs/types";
import type { GridCurve } from "@/lib/measure/curve/pull-curve";
import { boostAtLoad } from "@/lib/measure/engine/boost";
import { findEngineChannels } from "@/lib/measure/engine/find-channels";
import {
  type ChannelAtLoad,
  ENGINE_CHANNELS,
  type EngineChannel,
  type Extreme,
  type RunFullLoad,
} from "@/lib/measure/engine/full-load-types";
import { type TimedChannel, timedChannel } from "@/lib/measure/engine/timed-channel";
import { spanWithout } from "@/lib/measure/run/span-without";
import type { CampaignVehicle, Series, Span } from "@/lib/measure/types";

/** Engine channels change slowly and are noisy: their grid is no finer than this, 1/min; extremes are told apart from it. */
const LEAST_STEP_RPM = 200;
/** Sensors and control follow the step of load within this, s; extremes and means are read after it [common practice, no source]. */
const FOLLOW_S = 1;
/** A value counts as lowest or highest when it holds this long, s [common practice, no source]. */
const HOLD_S = 0.3;
/** Start and end of a pull are means over this, s. */
const ENDS_S = 0.5;

/**
 * Engine channels of one pull: mean over engine speed, extremes that held, rise, time at load. `grid` tells when which engine
 * speed was passed (null inside masked spans), `pull` is tip-in to lift. What is not in the log is listed, never taken as fine;
 * knock retard is not asked of a compression-ignition engine. `broken`: spans of the pull that are not full load (a lift) or not
 * recorded; nothing extreme is read there.
 */
export function runFullLoad(
  table: LogTable,
  grid: Pick<GridCurve, "rpm" | "timeS">,
  pull: Span,
  vehicle: Pick<CampaignVehicle, "engine" | "aspiration">,
  broken: readonly Span[] = [],
): RunFullLoad {
  const rows = findEngineChannels(table);
  const step = stepOf(grid.rpm);
  const rpm = grid.rpm.filter((x) => x % step === 0);
  const edges = rpm.map((x) => [timeAt(grid, x - step / 2), timeAt(grid, x), timeAt(grid, x + step / 2)]);
  const held = spanWithout(pull, broken);
  const channels: RunFullLoad["channels"] = {};
  for (const [name, values] of rows.channels) {
    const channel = timedChannel(table.timeS, values);
    const found = channel && channelAtLoad(channel, edges, grid, { pull, held });
    if (found) channels[name] = found;
  }
  const boost = vehicle.aspiration === "natural" ? null : boostAtLoad(table.timeS, rows, held, HOLD_S);
  return {
    load_s: pull.to_s - pull.from_s,
    rpm,
    channels,
    ...(boost && { boost: { ...boost.found, at_rpm: speedAt(grid, boost.atS) } }),
    not_recorded: notRecorded(channels, vehicle),
  };
}

/** Channels that a log of this engine could carry and does not; one manifold pressure is enough. */
function notRecorded(
  channels: RunFullLoad["channels"],
  { engine }: Pick<CampaignVehicle, "engine">,
): EngineChannel[] {
  return ENGINE_CHANNELS.filter(
    (name) =>
      !channels[name] &&
      !(name === "knock_retard" && engine === "compression ignition") &&
      !(name === "manifold_pressure" && channels.manifold_pressure_gauge) &&
      name !== "manifold_pressure_gauge",
  );
}

function channelAtLoad(
  channel: TimedChannel,
  edges: readonly (number | null)[][],
  grid: Pick<GridCurve, "rpm" | "timeS">,
  { pull, held: stretches }: { pull: Span; held: readonly Span[] },
): ChannelAtLoad | null {
  const values: Series = edges.map(([before, at, after]) => {
    const from = before ?? at;
    const to = after ?? at;
    return from === null || to === null || to <= from ? null : channel.meanBetween(from, to);
  });
  const from = pull.from_s + FOLLOW_S;
  const held = channel.heldMeans(
    stretches.map((span) => ({ ...span, from_s: Math.max(from, span.from_s) })),
    HOLD_S,
  );
  const mean = channel.meanBetween(from, pull.to_s);
  if (held.length === 0 || mean === null) return null;
  const extreme = (sign: 1 | -1): Extreme => {
    const { t, value } = held.reduce((best, one) => (sign * one.value > sign * best.value ? one : best));
    return { value, rpm: speedAt(grid, t), at_s: t };
  };
  const start = channel.meanBetween(pull.from_s - ENDS_S, pull.from_s);
  const end = channel.meanBetween(pull.to_s - ENDS_S, pull.to_s);
  const rise = start === null || end === null ? null : end - start;
  return { values, mean, min: extreme(-1), max: extreme(1), start, end, rise };
}

/** The smallest multiple of the curve's own step that is no finer than `LEAST_STEP_RPM`. */
function stepOf(rpm: readonly number[]): number {
  const own = rpm.length > 1 ? rpm[1] - rpm[0] : LEAST_STEP_RPM;
  return own * Math.ceil(LEAST_STEP_RPM / own);
}

/** When an engine speed was passed, s; null outside the curve and next to a masked point. */
function timeAt({ rpm, timeS }: Pick<GridCurve, "rpm" | "timeS">, x: number): number | null {
  const step = rpm.length > 1 ? rpm[1] - rpm[0] : 1;
  const place = (x - rpm[0]) / step;
  const low = Math.floor(place);
  const before = timeS[low] ?? null;
  if (place === low) return before;
  const after = timeS[low + 1] ?? null;
  return before === null || after === null ? null : before + (place - low) * (after - before);
}

/** Engine speed at a time, 1/min; that of the curve's end before and after it, null inside masked spans. */
function speedAt({ rpm, timeS }: Pick<GridCurve, "rpm" | "timeS">, t: number): number | null {
  const last = rpm.length - 1;
  if (t <= (timeS[0] ?? Number.NEGATIVE_INFINITY)) return rpm[0];
  if (t >= (timeS[last] ?? Number.POSITIVE_INFINITY)) return rpm[last];
  for (let k = 1; k < rpm.length; k++) {
    const [a, b] = [timeS[k - 1], timeS[k]];
    if (a === null || b === null || t < a || t > b || b === a) continue;
    return rpm[k - 1] + ((t - a) / (b - a)) * (rpm[k] - rpm[k - 1]);
  }
  return null;
}
