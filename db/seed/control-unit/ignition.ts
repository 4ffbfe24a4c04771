import {
  byPressure,
  bySpeed,
  filled,
  fixedAxis,
  type Item,
  ownAxis,
  ramp,
} from "@/db/seed/control-unit/item";

const fn = "Ignition";
const intakeAir = ownAxis(
  "intake_air_temperature",
  "Temperature_C",
  "UBYTE",
  [0, 20, 30, 40, 50, 70],
  [-40, 120],
);
const pressure = ownAxis(
  "manifold_pressure_absolute",
  "Pressure_kPa",
  "UWORD",
  [60, 120, 180, 220],
  [0, 300],
);
const battery = ownAxis("battery_voltage", "Battery_V", "UBYTE", [8, 10, 12, 14, 16], [6, 18]);
const steps = fixedAxis(
  "knock_count",
  "Number",
  "/begin FIX_AXIS_PAR_LIST 0 1 2 3 5 8 /end FIX_AXIS_PAR_LIST",
  [0, 1, 2, 3, 5, 8],
  [0, 20],
);

const base = (rpm: number, kPa: number) =>
  8 + 24 * ramp(rpm, 800, 4200) + 4 * ramp(rpm, 4200, 6600) - 0.135 * Math.max(0, kPa - 80);

export const IGNITION: readonly Item[] = [
  {
    ...{
      name: "Ignition.Base",
      text: "Ignition before top dead centre",
      fn,
      scale: "Angle_deg",
      type: "SWORD",
    },
    ...{ limits: [-20, 50], extended: [-30, 60], axes: [bySpeed, byPressure], byColumn: true },
    values: filled([bySpeed, byPressure], base, 1),
  },
  {
    ...{
      name: "Ignition.Air_correction",
      text: "Later ignition with warm air",
      fn,
      scale: "Angle_deg",
      type: "SBYTE",
    },
    ...{ limits: [-12, 0], axes: [intakeAir, pressure] },
    values: filled(
      [intakeAir, pressure],
      (celsius, kPa) => -9 * ramp(celsius, 25, 70) * ramp(kPa, 60, 220),
      1,
    ),
  },
  {
    ...{
      name: "Ignition.Knock_step",
      text: "How much later after a knock",
      fn,
      scale: "Angle_deg",
      type: "UBYTE",
    },
    ...{ limits: [0, 6], values: [0.8] },
  },
  {
    ...{
      name: "Ignition.Knock_return",
      text: "Cycles until a step is taken back",
      fn,
      scale: "Number",
      type: "UWORD",
    },
    ...{ limits: [0, 500], axes: [steps], values: [20, 40, 60, 90, 140, 220] },
  },
  {
    ...{
      name: "Ignition.Knock_most",
      text: "Latest that knock may call for",
      fn,
      scale: "Angle_deg",
      type: "SBYTE",
    },
    ...{ limits: [-12, 0], values: [-7.5] },
  },
  {
    ...{
      name: "Ignition.Knock_weight",
      text: "Weight of sensors by cylinder",
      fn,
      scale: "Share_percent",
      type: "UBYTE",
    },
    ...{ limits: [0, 100], dims: [4, 2], values: [100, 60, 40, 20, 20, 40, 60, 100], byColumn: true },
  },
  {
    ...{
      name: "Ignition.Coil_time",
      text: "Time that a coil is charged",
      fn,
      scale: "Time_ms",
      type: "UWORD",
    },
    ...{ limits: [0.5, 8], axes: [battery], values: [6.4, 4.6, 3.4, 2.6, 2.1] },
  },
  {
    ...{ name: "Ignition.Idle", text: "Ignition while idling", fn, scale: "Angle_deg", type: "SWORD" },
    ...{ limits: [-5, 20], values: [7.5] },
  },
];
