import type { CampaignSettings } from "@/lib/measure/types";
import { KMH_MPS, MPH_MPS } from "@/lib/units/constants";

/** A range between two speeds by its name in the result, e.g. "60-100" (km/h) or "0-60 mph"; from rest when `fromMps` is 0. */
export interface SpeedPair {
  name: string;
  fromMps: number;
  toMps: number;
}

/** A distance from rest by its name in the result, e.g. "402.336 m". */
export interface TimedDistance {
  name: string;
  wayM: number;
}

/** What is timed. */
export interface Timings {
  pairs: readonly SpeedPair[];
  distances: readonly TimedDistance[];
}

const inKmh = (from: number, to: number): SpeedPair => ({
  name: `${from}-${to}`,
  fromMps: from * KMH_MPS,
  toMps: to * KMH_MPS,
});
const inMph = (from: number, to: number): SpeedPair => ({
  name: `${from}-${to} mph`,
  fromMps: from * MPH_MPS,
  toMps: to * MPH_MPS,
});
const inM = (wayM: number): TimedDistance => ({ name: `${wayM} m`, wayM });

/** Always timed: usual ranges, and distances that are whole by definition of the foot (60 ft, 1/8 mile, 1/4 mile) or the metre. */
export const STANDARD_TIMINGS: Timings = {
  pairs: [
    inKmh(0, 50),
    inKmh(0, 100),
    inMph(0, 60),
    inKmh(60, 100),
    inKmh(80, 120),
    inKmh(100, 150),
    inKmh(100, 200),
  ],
  distances: [18.288, 201.168, 402.336, 1000].map(inM),
};

/** The usual timings and the programme's own; what is named twice is timed once. */
export function timingsOf(settings: Pick<CampaignSettings, "speed_pairs" | "distances_m">): Timings {
  const own = (settings.speed_pairs ?? []).map((pair) =>
    "from_kmh" in pair ? inKmh(pair.from_kmh, pair.to_kmh) : inMph(pair.from_mph, pair.to_mph),
  );
  const once = <T extends { name: string }>(list: readonly T[]) => [
    ...new Map(list.map((one) => [one.name, one])).values(),
  ];
  return {
    pairs: once([...STANDARD_TIMINGS.pairs, ...own]),
    distances: once([...STANDARD_TIMINGS.distances, ...(settings.distances_m ?? []).map(inM)]),
  };
}
