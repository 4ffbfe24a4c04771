import {
  type Axis,
  byPedal,
  bySpeed,
  filled,
  fixedAxis,
  type Item,
  ownAxis,
  ramp,
} from "@/db/seed/control-unit/item";

const fn = "Torque";
const pedal = ownAxis("pedal_position", "Share_percent", "UBYTE", [0, 8, 20, 45, 75, 100], [0, 100]);
const oil = ownAxis("oil_temperature", "Temperature_C", "UBYTE", [-10, 20, 60, 100], [-40, 160]);
const coarseSpeed = ownAxis("engine_speed", "Speed_rpm", "UWORD", [800, 2000, 4000, 6500], [0, 8000]);
const gear = fixedAxis("gear", "Number", "FIX_AXIS_PAR_DIST 1 1 6", [1, 2, 3, 4, 5, 6], [1, 6]);
/** Places 0 to 5 of the pedal's own shape: where Torque.Pedal_shape gives a whole number. */
const shaped: Axis = {
  ...{ kind: "curve", name: "Torque.Pedal_shape", quantity: "pedal_position", scale: "Share_percent" },
  ...{ limits: [0, 100], points: [0, 8, 20, 45, 75, 100] },
};

export const TORQUE: readonly Item[] = [
  {
    ...{
      name: "Torque.Pedal_shape",
      text: "Place in the driver's curve by pedal",
      fn,
      scale: "Number",
      type: "UBYTE",
    },
    ...{ limits: [0, 5], axes: [pedal], values: [0, 1, 2, 3, 4, 5] },
  },
  {
    ...{
      name: "Torque.Driver_curve",
      text: "Share of the torque that the driver asks for",
      fn,
      scale: "Share_percent",
    },
    ...{ type: "UBYTE", limits: [0, 100], axes: [shaped], values: [0, 6, 16, 48, 82, 100] },
  },
  {
    ...{
      name: "Torque.Driver_map",
      text: "Torque asked for by pedal and speed",
      fn,
      scale: "Torque_Nm",
      type: "SWORD",
    },
    ...{ limits: [-80, 420], axes: [byPedal, bySpeed] },
    values: filled(
      [byPedal, bySpeed],
      (percent, rpm) =>
        -25 * ramp(rpm, 800, 6600) + 400 * ramp(percent, 0, 100) * (1 - 0.3 * ramp(rpm, 4500, 6600)),
      1,
    ),
  },
  {
    ...{ name: "Torque.Gear_limit", text: "Most torque in each gear", fn, scale: "Torque_Nm", type: "SWORD" },
    ...{ limits: [0, 450], axes: [gear], values: [290, 360, 400, 400, 400, 380] },
  },
  {
    ...{
      name: "Torque.Friction",
      text: "Torque lost inside of the engine",
      fn,
      scale: "Torque_Nm",
      type: "SWORD",
    },
    ...{ limits: [0, 90], axes: [coarseSpeed, oil] },
    values: filled(
      [coarseSpeed, oil],
      (rpm, celsius) => 12 + 0.0028 * rpm + 22 * (1 - ramp(celsius, -10, 100)),
      1,
    ),
  },
  {
    ...{ name: "Torque.Inertia", text: "Moment of inertia of the engine", fn, scale: "Inertia_kgm2" },
    ...{ type: "FLOAT32_IEEE", limits: [0, 1], values: [0.171875] },
  },
  {
    ...{
      name: "Torque.Most",
      text: "Most torque that the gearbox takes",
      fn,
      scale: "Torque_Nm",
      type: "SWORD",
    },
    ...{ limits: [0, 450], values: [400], readOnly: true },
  },
  {
    ...{
      name: "Torque.Warn_from",
      text: "Torque from which the driver is warned",
      fn,
      scale: "Torque_Nm",
      type: "SWORD",
    },
    ...{ limits: [0, 450], values: [380] },
    derived: { kind: "dependent", formula: "X1-20", inputs: ["Torque.Most"] },
  },
];
