import type { ChannelAtLoad, RunFullLoad } from "@/lib/measure/engine/full-load-types";

/** A channel that stays between two values, 22 s of full load. */
export function channelBetween(low: number, high: number, rise = 0): ChannelAtLoad {
  return {
    values: [],
    mean: (low + high) / 2,
    min: { value: low, rpm: 3000, at_s: 5 },
    max: { value: high, rpm: 5000, at_s: 12 },
    start: low,
    end: low + rise,
    rise,
  };
}

/** Engine channels of one pull, well inside the starting limits of a turbo petrol engine. */
export function fullLoad(changes: Partial<RunFullLoad> = {}): RunFullLoad {
  return {
    load_s: 22,
    rpm: [],
    channels: {
      lambda: channelBetween(0.84, 0.88),
      knock_retard: channelBetween(0, 1),
      exhaust_temperature: channelBetween(700, 900),
      manifold_pressure: channelBetween(180, 205),
      intake_temperature: channelBetween(28, 42, 14),
      coolant_temperature: channelBetween(88, 92, 2),
    },
    boost: {
      channel: "manifold_pressure",
      overshoot_kpa: 8,
      reference: "plateau",
      peak_kpa: 205,
      against_kpa: 197,
      at_rpm: 2400,
    },
    not_recorded: ["injector_duty"],
    ...changes,
  };
}
