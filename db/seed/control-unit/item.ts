import type { ScaleName } from "@/db/seed/control-unit/scales";
import type { DataType } from "@/lib/calibration/a2l/types";
import { cellCount, cellIndex } from "@/lib/calibration/values/cells";

export type FunctionName = "Boost" | "Fuel" | "Ignition" | "Torque" | "Limiter";

interface AxisFacts {
  /** What moves along the axis; named so that it can be told in a log. */
  quantity: string;
  scale: ScaleName;
  limits: readonly [number, number];
}
/** An axis by where its points come from; physical numbers throughout. */
export type Axis = AxisFacts &
  (
    | { kind: "own"; type: DataType; points: readonly number[] }
    | { kind: "shared"; name: SharedAxisName }
    | { kind: "fixed"; rule: string; points: readonly number[] }
    | { kind: "rescaled"; name: "Axis.Speed_spread"; points: readonly number[] }
    | { kind: "curve"; name: string; points: readonly number[] }
  );

/** One characteristic of the invented control unit, in physical numbers. */
export interface Item {
  name: string;
  text: string;
  /** None for what belongs to the data set as a whole. */
  fn?: FunctionName;
  scale: ScaleName;
  type: DataType;
  limits: readonly [number, number];
  extended?: readonly [number, number];
  axes?: readonly Axis[];
  /** Sizes of a block of values. */
  dims?: readonly number[];
  /** Cells with x fastest; one for a single value. */
  values?: readonly number[];
  /** A text of so many bytes. */
  characters?: { text: string; bytes: number };
  derived?: { kind: "virtual" | "dependent"; formula: string; inputs: readonly string[] };
  bitMask?: number;
  /** Cells lie column by column. */
  byColumn?: boolean;
  readOnly?: boolean;
}

const SPEEDS = [
  800, 1000, 1300, 1600, 1900, 2200, 2500, 2800, 3200, 3600, 4000, 4500, 5000, 5500, 6000, 6600,
];
const PRESSURES = [30, 45, 60, 80, 100, 120, 140, 160, 180, 200, 220, 240];
const PEDALS = [0, 10, 25, 40, 55, 70, 85, 100];

/** Axes that several characteristics share. */
export const SHARED_AXES = {
  "Axis.Speed": {
    ...{
      text: "engine speed of the large maps",
      quantity: "engine_speed",
      scale: "Speed_rpm",
      type: "UWORD",
    },
    ...{ points: SPEEDS, most: 18, limits: [0, 8000] },
  },
  "Axis.Pressure": {
    ...{ text: "manifold pressure of the large maps", quantity: "manifold_pressure_absolute" },
    ...{ scale: "Pressure_kPa", type: "UWORD", points: PRESSURES, most: 12, limits: [0, 300] },
  },
  "Axis.Pedal": {
    ...{ text: "pedal position of the driver's maps", quantity: "pedal_position", scale: "Share_percent" },
    ...{ type: "UBYTE", points: PEDALS, most: 10, limits: [0, 100] },
  },
} as const satisfies Record<
  string,
  AxisFacts & { text: string; type: DataType; points: readonly number[]; most: number }
>;
export type SharedAxisName = keyof typeof SHARED_AXES;

/** Pairs of engine speed and place in the curve: few cells where little happens. */
export const SPREAD_PAIRS: readonly (readonly [number, number])[] = [
  [1000, 0],
  [3000, 4],
  [4000, 5],
  [6000, 9],
];
export const SPREAD_MOST_PAIRS = 6;
/** Engine speed at each place, straight lines between the pairs. */
const SPREAD_POINTS = [1000, 1500, 2000, 2500, 3000, 4000, 4500, 5000, 5500, 6000];

export const bySpeed: Axis = { kind: "shared", name: "Axis.Speed", ...factsOf("Axis.Speed") };
export const byPressure: Axis = { kind: "shared", name: "Axis.Pressure", ...factsOf("Axis.Pressure") };
export const byPedal: Axis = { kind: "shared", name: "Axis.Pedal", ...factsOf("Axis.Pedal") };
export const bySpreadSpeed: Axis = {
  ...{ kind: "rescaled", name: "Axis.Speed_spread", points: SPREAD_POINTS },
  ...{ quantity: "engine_speed", scale: "Speed_rpm", limits: [0, 8000] },
};

function factsOf(name: SharedAxisName): AxisFacts {
  const { quantity, scale, limits } = SHARED_AXES[name];
  return { quantity, scale, limits };
}

/** An axis with points of its own. */
export const ownAxis = (
  quantity: string,
  scale: ScaleName,
  type: DataType,
  points: readonly number[],
  limits: readonly [number, number],
): Axis => ({ kind: "own", quantity, scale, type, points, limits });

/** An axis whose points follow a rule of the description; `points` are what comes out, in physical numbers. */
export const fixedAxis = (
  quantity: string,
  scale: ScaleName,
  rule: string,
  points: readonly number[],
  limits: readonly [number, number],
): Axis => ({ kind: "fixed", quantity, scale, rule, points, limits });

/** Physical points of any axis. */
export const pointsOf = (axis: Axis): readonly number[] =>
  axis.kind === "shared" ? SHARED_AXES[axis.name].points : axis.points;

/** Sizes of an item's cells, x first; [] for one value. */
export const dimsOf = ({ axes, dims }: Item): readonly number[] =>
  dims ?? (axes ?? []).map((axis) => pointsOf(axis).length);

/** Where a cell lies on the axes, in physical numbers; x fastest. */
export function placeOfCell(axes: readonly Axis[], cell: number): number[] {
  const points = axes.map(pointsOf);
  const dims = points.map((axis) => axis.length);
  return cellIndex(cell, dims).map((index, axis) => points[axis][index]);
}

/** The value of each cell by a rule of its axis points, x fastest; `decimals` as a workshop would type them. */
export function filled(
  axes: readonly Axis[],
  rule: (...point: number[]) => number,
  decimals: number,
): readonly number[] {
  const cells = cellCount(axes.map((axis) => pointsOf(axis).length));
  return Array.from({ length: cells }, (_, cell) =>
    Number(rule(...placeOfCell(axes, cell)).toFixed(decimals)),
  );
}

/** Rises from 0 to 1 between two numbers, straight. */
export const ramp = (value: number, from: number, to: number): number =>
  Math.min(1, Math.max(0, (value - from) / (to - from)));
