import type { EngineChannel } from "@/lib/measure/engine/full-load-types";

/** How an engine channel is printed; `differenceUnit` where a difference has another unit. */
export interface ChannelWords {
  name: string;
  unit: string;
  differenceUnit?: string;
  decimals: number;
}

export const CHANNEL_WORDS: Readonly<Record<EngineChannel, ChannelWords>> = {
  lambda: { name: "Lambda", unit: "", decimals: 3 },
  knock_retard: { name: "Knock retard", unit: "°", decimals: 1 },
  exhaust_temperature: { name: "Exhaust temperature", unit: "°C", differenceUnit: "K", decimals: 0 },
  manifold_pressure: { name: "Manifold pressure, absolute", unit: "kPa", decimals: 1 },
  manifold_pressure_gauge: { name: "Manifold pressure, gauge", unit: "kPa", decimals: 1 },
  intake_temperature: { name: "Intake temperature", unit: "°C", differenceUnit: "K", decimals: 1 },
  coolant_temperature: { name: "Coolant temperature", unit: "°C", differenceUnit: "K", decimals: 1 },
  injector_duty: { name: "Injector duty", unit: "%", decimals: 0 },
};
