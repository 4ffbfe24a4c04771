import type { PowerSensitivity, SharedComponent } from "@/lib/measure/curve/power-sensitivity";
import { ROAD_SOURCES, type RoadVariance } from "@/lib/measure/road/road-variance";
import type { BudgetComponent, UncertaintyBudget } from "@/lib/measure/types";

/** Coverage factor of every stated uncertainty: about 95 % (JCGM 100:2008, 6.3.3). */
export const COVERAGE = 2;

const SHARED: readonly SharedComponent[] = [
  "mass",
  "speed scale",
  "engine inertia",
  "wheel inertia",
  "mesh efficiency",
  "weather",
];
const ROAD_COMPONENT = {
  wind: "wind",
  grade: "grade",
  resistance: "rolling and air resistance",
} as const satisfies Record<(typeof ROAD_SOURCES)[number], BudgetComponent>;

/** Relative standard uncertainties by component; independent of each other. */
export type RelativeParts = Partial<Record<BudgetComponent, number>>;

/**
 * Parts that do not average out over the given runs of one side, for the power or the torque of their mean. What the runs have
 * in common is taken whole; wind, slope and resistance by the mean of the runs' gradients, road days being independent.
 */
export function commonParts(
  runs: readonly PowerSensitivity[],
  quantity: "power" | "torque" = "power",
): RelativeParts {
  const parts: RelativeParts = {};
  for (const component of SHARED) parts[component] = meanOf(runs, (run) => run.shared[component]);
  if (quantity === "torque") parts["speed scale"] = meanOf(runs, (run) => run.torqueScale);
  const days = [...meanGradients(runs)].map(([variance, gradient]) => variance.parts(gradient));
  for (const source of ROAD_SOURCES) {
    parts[ROAD_COMPONENT[source]] = Math.sqrt(days.reduce((sum, day) => sum + day[source], 0));
  }
  return parts;
}

/** Parts of a single run as it was driven: its own noise and gusts come on top. */
export function runParts(run: PowerSensitivity, quantity: "power" | "torque" = "power"): RelativeParts {
  const parts = commonParts([run], quantity);
  return { ...parts, wind: Math.hypot(parts.wind ?? 0, run.gust), smoothing: run.noise };
}

/** Root sum of squares of the common parts, without telling wind, slope and resistance apart. */
export function commonUncertainty(runs: readonly PowerSensitivity[]): number {
  let variance = 0;
  for (const component of SHARED) variance += meanOf(runs, (run) => run.shared[component]) ** 2;
  for (const [day, gradient] of meanGradients(runs)) variance += day.total(gradient);
  return Math.sqrt(variance);
}

function meanOf(runs: readonly PowerSensitivity[], part: (run: PowerSensitivity) => number): number {
  return runs.reduce((sum, run) => sum + part(run), 0) / runs.length;
}

function meanGradients(runs: readonly PowerSensitivity[]): Map<RoadVariance, Float64Array> {
  const days = new Map<RoadVariance, Float64Array>();
  for (const { road } of runs) {
    const sum = days.get(road.variance) ?? new Float64Array(road.gradient.length);
    for (let k = 0; k < sum.length; k++) sum[k] += road.gradient[k] / runs.length;
    days.set(road.variance, sum);
  }
  return days;
}

/** Relative standard uncertainty of independent parts (JCGM 100:2008, 5.1.2). */
export function combined(parts: RelativeParts): number {
  return Math.hypot(...Object.values(parts));
}

/** The budget of a peak power in kW. `basis` says of each component where its figure comes from. */
export function uncertaintyBudget(
  parts: RelativeParts,
  basis: (component: BudgetComponent) => string,
  peakKw: number,
): UncertaintyBudget {
  const expanded = COVERAGE * combined(parts);
  return {
    coverage_factor: COVERAGE,
    parts: (Object.entries(parts) as [BudgetComponent, number][]).map(([component, relative]) => ({
      component,
      standard_pct: 100 * relative,
      standard_kw: relative * peakKw,
      basis: basis(component),
    })),
    expanded_pct: 100 * expanded,
    expanded_kw: expanded * peakKw,
  };
}
