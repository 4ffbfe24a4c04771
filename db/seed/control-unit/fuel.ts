import {
  byPressure,
  bySpeed,
  filled,
  fixedAxis,
  type Item,
  ownAxis,
  ramp,
} from "@/db/seed/control-unit/item";
import { AS_FOUND } from "@/db/seed/demo-effects";

const fn = "Fuel";
const battery = ownAxis("battery_voltage", "Battery_V", "UBYTE", [8, 9.5, 11, 12.5, 14, 15.5], [6, 18]);
const coolant = ownAxis(
  "coolant_temperature",
  "Temperature_C",
  "UBYTE",
  [-30, -10, 0, 20, 40, 60, 80, 100],
  [-40, 140],
);
const coarseSpeed = ownAxis("engine_speed", "Speed_rpm", "UWORD", [1000, 2500, 4000, 5500], [0, 8000]);
const coarsePressure = ownAxis(
  "manifold_pressure_absolute",
  "Pressure_kPa",
  "UWORD",
  [50, 120, 200],
  [0, 300],
);
const coarseCoolant = ownAxis("coolant_temperature", "Temperature_C", "UBYTE", [0, 90], [-40, 140]);
const exhaust = ownAxis(
  "exhaust_gas_temperature",
  "Hot_C",
  "UBYTE",
  [750, 800, 850, 900, 950, 1000],
  [0, 1200],
);
const lift = fixedAxis(
  "injection_time",
  "Time_ms",
  "FIX_AXIS_PAR 0 9 6",
  [0, 2.048, 4.096, 6.144, 8.192, 10.24],
  [0, 20],
);

/** As the simulated engine runs at full load; leaner where there is little pressure. */
const lambda = (rpm: number, kPa: number) => 1 + (AS_FOUND.lambda(rpm) - 1) * ramp(kPa, 100, 160);

export const FUEL: readonly Item[] = [
  {
    ...{ name: "Fuel.Lambda_target", text: "Air ratio asked for", fn, scale: "Lambda", type: "UWORD" },
    ...{ limits: [0.7, 1.1], extended: [0.65, 1.3], axes: [bySpeed, byPressure] },
    values: filled([bySpeed, byPressure], lambda, 3),
  },
  {
    ...{
      name: "Fuel.Injector_dead_time",
      text: "Time until an injector opens",
      fn,
      scale: "Time_ms",
      type: "UWORD",
    },
    ...{ limits: [0, 6], axes: [battery], values: [3.2, 2.4, 1.8, 1.4, 1.1, 0.9] },
  },
  {
    ...{ name: "Fuel.Injector_flow", text: "Flow of one injector, held open", fn, scale: "Flow_g_per_s" },
    ...{ type: "FLOAT32_IEEE", limits: [0.5, 20], values: [6.25] },
  },
  {
    ...{
      name: "Fuel.Amount_by_time",
      text: "Amount by time of injection",
      fn,
      scale: "Amount_mg",
      type: "FLOAT32_IEEE",
    },
    ...{ limits: [0, 120], axes: [lift], values: [0, 11.5, 24.25, 37.5, 50.75, 64] },
  },
  {
    ...{
      name: "Fuel.Wall_film",
      text: "Share that stays on the wall",
      fn,
      scale: "Share_percent",
      type: "UBYTE",
    },
    ...{ limits: [0, 60], axes: [coarseSpeed, coarsePressure, coarseCoolant] },
    values: filled(
      [coarseSpeed, coarsePressure, coarseCoolant],
      (rpm, kPa, celsius) =>
        Math.round(2 * (8 + 0.08 * kPa - 0.001 * rpm + 14 * (1 - ramp(celsius, 0, 90)))) / 2,
      1,
    ),
  },
  {
    ...{
      name: "Fuel.Start_amount",
      text: "Amount for the first injections",
      fn,
      scale: "Amount_mg",
      type: "UBYTE",
    },
    ...{ limits: [0, 200], axes: [coolant], values: [160, 120, 95, 62, 48, 40, 34, 30] },
  },
  {
    ...{
      name: "Fuel.Cylinder_trim",
      text: "Correction of each cylinder",
      fn,
      scale: "Trim_percent",
      type: "SBYTE",
    },
    ...{ limits: [-5, 5], dims: [4], values: [0.25, -0.5, 0, 0.25] },
  },
  {
    ...{
      name: "Fuel.Exhaust_protection",
      text: "Enrichment against hot exhaust gas",
      fn,
      scale: "Share_percent",
    },
    ...{ type: "UBYTE", limits: [0, 30], axes: [exhaust], values: [0, 0, 1.5, 5, 9, 14] },
  },
  {
    ...{ name: "Fuel.Lambda_control", text: "Whether the air ratio is controlled", fn, scale: "Switch_word" },
    ...{ type: "UBYTE", limits: [0, 1], bitMask: 0x10, values: [1] },
  },
  {
    ...{
      name: "Fuel.Reserve_from",
      text: "Contents from which the reserve is told",
      fn,
      scale: "Tank_litres",
    },
    ...{ type: "UBYTE", limits: [0, 50], values: [6] },
  },
  {
    ...{ name: "Fuel.Flow_of_all", text: "Flow of all injectors together", fn, scale: "Flow_g_per_s" },
    ...{ type: "FLOAT32_IEEE", limits: [0, 80] },
    derived: { kind: "virtual", formula: "X1*4", inputs: ["Fuel.Injector_flow"] },
  },
];
