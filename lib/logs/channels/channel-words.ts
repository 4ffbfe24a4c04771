import type { KnownChannel } from "@/lib/logs/types";

const WORDS: Partial<Record<KnownChannel, string>> = {
  wheel_speed_undriven: "undriven wheel speed",
  wheel_speed_driven: "driven wheel speed",
  gps_speed: "GPS speed",
  manifold_pressure: "manifold pressure, absolute",
  manifold_pressure_gauge: "manifold pressure, gauge",
};

/** How people call a channel, e.g. "engine speed"; a free name stays as it was given. */
export function channelWords(channel: string): string {
  return WORDS[channel as KnownChannel] ?? channel.replaceAll("_", " ");
}
