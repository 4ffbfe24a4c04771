import type { Segments } from "@/lib/measure/run/find-segments";
import type { RunSignals, SampledChannel } from "@/lib/measure/run/run-signals";

/** The channels that tell how fast the car goes. */
export const SPEED_SOURCES = ["undriven", "gps", "driven", "engineSpeed"] as const;
export type SpeedSource = (typeof SPEED_SOURCES)[number];

/**
 * How one channel reads the road speed v: value(t) = scale · v(t − lag) · (1 + slip · F(t)), slip only for driven channels.
 * `scale` in channel unit per m/s, `lagS` against the base channel, `deviationMps` the white noise as a speed.
 */
export interface ChannelModel {
  source: SpeedSource;
  scale: number;
  scaleUncertainty: number;
  lagS: number;
  slips: boolean;
  deviationMps: number;
}

/** The speed model of a campaign: one car, one set of sensors. */
export interface SpeedModel {
  base: SpeedSource;
  /** Drive slip per newton of drive force. */
  slipPerN: number;
  channels: ReadonlyMap<SpeedSource, ChannelModel>;
  /** Relative standard uncertainty of road speed, and where its scale comes from. */
  scaleUncertainty: number;
  scaleFrom: "gps" | "wheel" | "engine speed";
}

/** A run with a pull or a coast-down, ready for the speed model. */
export interface SpeedRun {
  signals: RunSignals;
  segments: Segments;
}

/** True for channels that turn with the driven wheels. */
export function slips(source: SpeedSource): boolean {
  return source === "driven" || source === "engineSpeed";
}

/** Time of tip-in: when the load was stepped up; the pull span starts when it is fully open. */
export function tipInS(segments: Segments): number {
  const pull = segments.pull?.from_s ?? 0;
  return segments.cruise ? Math.max(segments.cruise.to_s, pull - 0.3) : pull;
}

/** The samples of a channel between two times. */
export function between(channel: SampledChannel, fromS: number, toS: number): [number, number] {
  const { times } = channel;
  let low = 0;
  let high = times.length;
  while (low < high) {
    const middle = (low + high) >>> 1;
    if (times[middle] < fromS) low = middle + 1;
    else high = middle;
  }
  let end = low;
  while (end < times.length && times[end] <= toS) end++;
  return [low, end];
}
