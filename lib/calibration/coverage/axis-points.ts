import type { AxisLink } from "@/lib/calibration/coverage/types";
import { AXIS_NAMES } from "@/lib/calibration/values/cells";
import type { ReadAxis } from "@/lib/calibration/values/types";
import { CHANNEL_UNITS } from "@/lib/logs/channels/channel-names";
import { KNOWN_CHANNELS, type KnownChannel } from "@/lib/logs/types";
import { parseUnit, toCanonical } from "@/lib/units/unit-text";

/** What a link is made by: the input quantity, or `NAME/x` where the description names none. */
export function quantityOf(name: string, axis: Pick<ReadAxis, "inputQuantity">, place: number): string {
  return axis.inputQuantity ?? `${name}/${AXIS_NAMES[place] ?? place + 1}`;
}

/** Points as numbers, or null where one is none or they do not rise strictly: a sample can't be placed between them. */
export function risingPoints({ points }: Pick<ReadAxis, "points">): Float64Array | null {
  const found = new Float64Array(points.length);
  for (let k = 0; k < points.length; k++) {
    const point = points[k];
    if (typeof point !== "number" || !Number.isFinite(point) || (k > 0 && point <= found[k - 1])) return null;
    found[k] = point;
  }
  return found.length > 0 ? found : null;
}

function isKnown(channel: string): channel is KnownChannel {
  return (KNOWN_CHANNELS as readonly string[]).includes(channel);
}

/** Zero point of a pressure that its channel's name tells where its unit does not. */
function zeroPoint(channel: string): "absolute" | "gauge" | null {
  if (channel === "manifold_pressure") return "absolute";
  return channel === "manifold_pressure_gauge" ? "gauge" : null;
}

const plain = (unit: string) => unit.trim().toLowerCase();

/**
 * Axis points in the unit of a channel, or null where the two can't be converted. Equal texts need no conversion. An axis without
 * a unit is taken as the reader takes a column without one: engine speed per minute, pedal in %, and so on; else it is refused.
 */
export function pointsIn(
  points: Float64Array,
  axisUnit: string,
  { channel }: Pick<AxisLink, "channel">,
  channelUnit: string,
): Float64Array | null {
  if (plain(axisUnit) === plain(channelUnit)) return points;
  const assumed = isKnown(channel) ? CHANNEL_UNITS[channel].withoutUnit : null;
  const [from, to] = [parseUnit(plain(axisUnit) === "" ? assumed : axisUnit), parseUnit(channelUnit)];
  if (!from || !to || from.dimension !== to.dimension) return null;
  const channelZero = to.reference ?? zeroPoint(channel);
  if (from.reference && channelZero && from.reference !== channelZero) return null;
  return points.map((point) => (toCanonical(point, from) - to.offset) / to.factor);
}
