import type { KnownChannel } from "@/lib/logs/types";

/** Meanings that together, and with nothing else beside them, name a channel. */
const COMPLETE: readonly [KnownChannel, readonly string[]][] = [
  ["gps_speed", ["gps speed", "gps vehicle speed"]],
  ["engine_speed", ["engine speed", "engine rpm", "rpm"]],
  ["pedal", ["pedal", "accelerator", "accelerator pedal", "accel pedal", "gas pedal", "throttle pedal"]],
  ["throttle", ["throttle", "engine throttle"]],
  [
    "manifold_pressure",
    [
      "manifold pressure",
      "intake manifold pressure",
      "intake pressure",
      "intake air pressure",
      "boost",
      "boost pressure",
      "boost air pressure",
      "turbo pressure",
      "boost turbo pressure",
      "boost manifold pressure",
    ],
  ],
  ["lambda", ["lambda"]],
  ["ignition_advance", ["ignition advance"]],
  ["knock_retard", ["knock retard"]],
  [
    "intake_temperature",
    [
      "intake temperature",
      "intake air temperature",
      "intake manifold temperature",
      "intake manifold air temperature",
      "boost temperature",
      "boost air temperature",
    ],
  ],
  ["coolant_temperature", ["coolant", "coolant temperature", "engine coolant", "engine coolant temperature"]],
  ["exhaust_temperature", ["exhaust temperature", "exhaust gas temperature"]],
  ["gear", ["gear"]],
  [
    "longitudinal_acceleration",
    [
      "longitudinal acceleration",
      "longitudinal accel",
      "long acceleration",
      "long accel",
      "vehicle longitudinal acceleration",
    ],
  ],
  ["latitude", ["latitude", "gps latitude"]],
  ["longitude", ["longitude", "gps longitude", "long", "gps long"]],
  ["altitude", ["altitude", "gps altitude"]],
];
/** Meanings that name a channel only together with its unit: the word alone may be a switch or a counter. */
const WITH_UNIT: readonly [KnownChannel, readonly string[]][] = [
  ["ignition_advance", ["ignition"]],
  ["knock_retard", ["knock"]],
];

const inOrder = (meanings: Iterable<string>) => [...meanings].sort().join(" ");
const index = (table: typeof COMPLETE) =>
  new Map(
    table.flatMap(([channel, titles]) =>
      titles.map((title) => [inOrder(title.split(" ")), channel] as const),
    ),
  );
const BY_MEANING = index(COMPLETE);
const BY_MEANING_AND_UNIT = index(WITH_UNIT);

/** The channel that these meanings name. */
export function channelOf(
  meanings: ReadonlySet<string>,
): { channel: KnownChannel; needsUnit: boolean } | null {
  const key = inOrder(meanings);
  const channel = BY_MEANING.get(key);
  if (channel) return { channel, needsUnit: false };
  const weak = BY_MEANING_AND_UNIT.get(key);
  return weak ? { channel: weak, needsUnit: true } : null;
}
