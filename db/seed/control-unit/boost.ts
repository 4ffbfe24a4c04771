import {
  byPedal,
  byPressure,
  bySpeed,
  bySpreadSpeed,
  filled,
  fixedAxis,
  type Item,
  ownAxis,
  ramp,
} from "@/db/seed/control-unit/item";
import { AS_FOUND } from "@/db/seed/demo-effects";

const fn = "Boost";
const intakeAir = ownAxis(
  "intake_air_temperature",
  "Temperature_C",
  "UBYTE",
  [-20, 0, 20, 30, 40, 50, 60, 80],
  [-40, 120],
);
const height = ownAxis("ambient_pressure", "Pressure_kPa", "UWORD", [60, 70, 80, 90, 95, 101.3], [50, 110]);
const deviation = fixedAxis(
  "boost_deviation",
  "Difference_kPa",
  "FIX_AXIS_PAR_DIST -200 50 9",
  [-20, -15, -10, -5, 0, 5, 10, 15, 20],
  [-40, 40],
);

/** Pressure that is asked for: at full pedal what the simulated engine of the image as found builds up. */
const target = (rpm: number, pedal: number) =>
  40 + (Math.min(AS_FOUND.boostKpa(rpm), 95 + 0.055 * rpm) - 40) * ramp(pedal, 0, 100) ** 0.8;

export const BOOST: readonly Item[] = [
  {
    ...{
      name: "Boost.Target",
      text: "Manifold pressure asked for by speed and pedal",
      fn,
      scale: "Pressure_kPa",
    },
    ...{ type: "UWORD", limits: [20, 220], extended: [0, 260], axes: [bySpeed, byPedal] },
    values: filled([bySpeed, byPedal], target, 1),
  },
  {
    ...{
      name: "Boost.Target_limit",
      text: "Highest pressure asked for by intake air",
      fn,
      scale: "Pressure_kPa",
    },
    ...{ type: "UWORD", limits: [100, 260], axes: [intakeAir] },
    values: filled([intakeAir], (celsius) => 230 - 40 * ramp(celsius, 40, 80), 1),
  },
  {
    ...{
      name: "Boost.Valve_base",
      text: "Share of time that the boost valve is open",
      fn,
      scale: "Share_percent",
    },
    ...{ type: "UBYTE", limits: [0, 100], axes: [bySpeed, byPressure], byColumn: true },
    values: filled(
      [bySpeed, byPressure],
      (rpm, kPa) =>
        Math.round(2 * (90 * ramp(kPa, 90, 240) - 12 * ramp(rpm, 3000, 6600) * ramp(kPa, 90, 130))) / 2,
      1,
    ),
  },
  {
    ...{
      name: "Boost.Control_gain",
      text: "Answer to a deviation of the pressure",
      fn,
      scale: "Trim_percent",
    },
    ...{ type: "SBYTE", limits: [-30, 30], axes: [deviation] },
    values: [-12, -8, -4.5, -1.5, 0, 1.5, 4.5, 8, 12],
  },
  {
    ...{
      name: "Boost.Build_up",
      text: "How fast the pressure may be asked to rise",
      fn,
      scale: "Difference_kPa",
    },
    ...{ type: "SWORD", limits: [0, 400], axes: [bySpreadSpeed] },
    values: filled([bySpreadSpeed], (rpm) => 60 + 220 * ramp(rpm, 1000, 4000), 1),
  },
  {
    ...{ name: "Boost.Height_ratio", text: "Highest ratio of pressures by height", fn, scale: "Ratio" },
    ...{ type: "UWORD", limits: [1, 3], axes: [height] },
    values: [2.5, 2.5, 2.5, 2, 2, 2],
  },
  {
    ...{ name: "Boost.Overshoot_most", text: "Overshoot that is let pass", fn, scale: "Difference_kPa" },
    ...{ type: "UWORD", limits: [0, 40], values: [18] },
  },
  {
    ...{ name: "Boost.Control_kind", text: "How the pressure is controlled", fn, scale: "Control_word" },
    ...{ type: "UBYTE", limits: [0, 2], values: [1] },
  },
];
