import type { GateEvidence } from "@/lib/gates/evidence";
import type { ChannelLimitGate, LimitedQuantity } from "@/lib/gates/plan";
import type { RunFullLoad } from "@/lib/measure/engine/full-load-types";

/** How a limited quantity is called, its unit and digits, and where a pull tells it. */
export interface QuantityWords {
  name: string;
  unit: string;
  digits: number;
  /** Lowest and highest value of one pull; null = not recorded or not told. */
  extremes: (pull: RunFullLoad) => { low: number; high: number } | null;
}

const one = (value: number | null | undefined) =>
  value === null || value === undefined ? null : { low: value, high: value };

const channel =
  (
    name: Exclude<LimitedQuantity, "boost_overshoot" | "intake_temperature_rise">,
  ): QuantityWords["extremes"] =>
  ({ channels }) => {
    const found = channels[name];
    return found ? { low: found.min.value, high: found.max.value } : null;
  };

/** The quantities that a limit can be set on, in the order that pages list them. */
export const QUANTITIES: Readonly<Record<LimitedQuantity, QuantityWords>> = {
  lambda: { name: "Lambda", unit: "", digits: 3, extremes: channel("lambda") },
  knock_retard: { name: "Knock retard", unit: "°", digits: 1, extremes: channel("knock_retard") },
  exhaust_temperature: {
    name: "Exhaust temperature",
    unit: " °C",
    digits: 0,
    extremes: channel("exhaust_temperature"),
  },
  boost_overshoot: {
    name: "Boost overshoot",
    unit: " kPa",
    digits: 1,
    extremes: ({ boost }) => one(boost?.overshoot_kpa),
  },
  intake_temperature: {
    name: "Intake temperature",
    unit: " °C",
    digits: 1,
    extremes: channel("intake_temperature"),
  },
  intake_temperature_rise: {
    name: "Rise of the intake temperature in a pull",
    unit: " K",
    digits: 1,
    extremes: ({ channels }) => one(channels.intake_temperature?.rise),
  },
  coolant_temperature: {
    name: "Coolant temperature",
    unit: " °C",
    digits: 0,
    extremes: channel("coolant_temperature"),
  },
  injector_duty: { name: "Injector duty", unit: " %", digits: 0, extremes: channel("injector_duty") },
};

/** Why a limit makes no sense for this engine; null where it does. */
export function senseless(
  { quantity }: Pick<ChannelLimitGate, "quantity">,
  { engine, aspiration }: Pick<GateEvidence, "engine" | "aspiration">,
): string | null {
  if (quantity === "knock_retard" && engine === "compression ignition")
    return "A compression-ignition engine has no knock control.";
  if (quantity === "boost_overshoot" && aspiration === "natural")
    return "A naturally aspirated engine has no boost.";
  return null;
}
