import { CHANNEL_UNITS } from "@/lib/logs/channels/channel-names";
import { channelWords } from "@/lib/logs/channels/channel-words";
import { fitsByTens, rangeDoubt, type ValueRange } from "@/lib/logs/channels/range-doubt";
import type { KnownChannel } from "@/lib/logs/types";
import { KMH_MPS } from "@/lib/units/constants";

/** What a look at the range of a channel says. */
export interface Plausibility {
  looksRight: boolean;
  /** E.g. "engine speed 0 to 8,200 1/min: looks right". */
  sentence: string;
}

/** A drive whose largest value stays below this is misread or still: common practice, no source. */
const LOWEST_TOP: Partial<Record<KnownChannel, number>> = {
  engine_speed: 300,
  wheel_speed_undriven: 3,
  wheel_speed_driven: 3,
  gps_speed: 3,
  pedal: 1.5,
  throttle: 1.5,
  coolant_temperature: 5,
};

/** Canonical unit and factor that a range is told in: speeds as on the speedometer. */
export function shownUnit(unit: string): { unit: string; factor: number } {
  return unit === "m/s" ? { unit: "km/h", factor: 1 / KMH_MPS } : { unit, factor: 1 };
}

function figure(value: number): string {
  const rounded = Number(value.toPrecision(3));
  const text = String(Number(Math.abs(rounded).toFixed(6)));
  const [whole = "0", fraction] = text.split(".");
  const grouped = whole.replace(/\B(?=(\d{3})+$)/g, "\u202f");
  return `${rounded < 0 ? "\u2212" : ""}${grouped}${fraction ? `.${fraction}` : ""}`;
}

/** What may be wrong with a range that does not fit, in the few words of a line. */
function doubt(channel: KnownChannel, range: ValueRange): string {
  const { plausible, withoutUnit } = CHANNEL_UNITS[channel];
  const lowestTop = LOWEST_TOP[channel] ?? plausible[0];
  if (range.max < lowestTop && range.max >= plausible[0] && (channel === "pedal" || channel === "throttle"))
    return "a fraction instead of per cent?";
  if (!fitsByTens(channel, range, lowestTop)) return "unit?";
  return withoutUnit === null ? "unit or decimal mark?" : "decimal mark?";
}

/**
 * Whether the range of a known channel, in its canonical unit, can be that of a car on a road.
 * @param range null where the column holds no value at all
 */
export function plausibility(channel: KnownChannel, range: ValueRange | null): Plausibility {
  const words = channelWords(channel);
  if (range === null) return { looksRight: false, sentence: `${words}: the column holds no value` };
  const { min, max } = range;
  const { unit, factor } = shownUnit(CHANNEL_UNITS[channel].unit);
  const shown = unit === "1" ? "" : ` ${unit}`;
  const text = `${words} ${figure(min * factor)} to ${figure(max * factor)}${shown}`;
  const [low, high] = CHANNEL_UNITS[channel].plausible;
  if (min < low || max > high) return { looksRight: false, sentence: `${text}: ${doubt(channel, range)}` };
  if (min === max && channel !== "gear")
    return { looksRight: false, sentence: `${text}: it never changes; is the sensor connected?` };
  const lowestTop = LOWEST_TOP[channel];
  if (lowestTop !== undefined && max < lowestTop)
    return {
      looksRight: false,
      sentence: `${text}: ${max <= 0 ? "did the car move?" : doubt(channel, range)}`,
    };
  const slip = rangeDoubt(channel, range);
  if (slip) return { looksRight: false, sentence: `${text}: ${slip}` };
  return { looksRight: true, sentence: `${text}: looks right` };
}
