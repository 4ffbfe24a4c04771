import type { GridCurve } from "@/lib/measure/curve/pull-curve";
import type { CampaignEstimate } from "@/lib/measure/estimate-campaign";
import { positionAt } from "@/lib/measure/road/road-observations";
import type { CampaignVehicle } from "@/lib/measure/types";
import { drivelineFigures } from "@/lib/measure/vehicle/vehicle";
import { bandedSolve } from "@/lib/signal/banded-cholesky";
import { splineWeights } from "@/lib/signal/penalised-spline";

/** Parts of the standard uncertainty of power at one point, each relative to the power. */
export interface PowerBudget {
  mass: number;
  scale: number;
  driveline: number;
  resistance: number;
  noise: number;
}

/** Coverage factor of every stated uncertainty_kw: about 95 %. */
export const COVERAGE = 2;
/** A mass that nobody weighed: 1.5 % [common practice, no source]. */
const MASS_SHARE = 0.015;

/**
 * Uncertainty budget of one run's power at a grid point (GUM, JCGM 100:2008, 5.1): mass and inertias by their share of the
 * drive force, speed scale twice (speed and acceleration), mesh efficiency whole, resistance from the road day's covariance,
 * noise from the spline's covariance averaged over ±200 1/min.
 */
export function powerBudget(
  estimate: CampaignEstimate,
  vehicle: CampaignVehicle,
  index: number,
  curve: GridCurve,
  point: number,
): PowerBudget | null {
  const a = curve.accelerationMps2[point];
  const v = curve.speedMps[point];
  const t = curve.timeS[point];
  const kw = curve.wheelKw[point];
  const pull = estimate.pulls[index];
  if (a === null || v === null || t === null || kw === null || !pull) return null;
  const figures = drivelineFigures(vehicle);
  const driveline = estimate.drivelines[index];
  const engineMass = driveline.meshEfficiency * driveline.engineInertiaKgm2 * driveline.gearingRadPerM ** 2;
  const forceN = (1000 * kw) / v + engineMass * a;
  const share = (massKg: number, relative: number) => (massKg * a * relative) / forceN;
  const massUncertainty = vehicle.mass_uncertainty_kg ?? MASS_SHARE * vehicle.mass_kg;
  const { day, place, run } = estimate.roads[index];
  const near = [-0.4, 0, 0.4].map((dt) => ({ speedMps: v + a * dt, positionM: positionAt(run, t + dt) }));
  const resistance = day.uncertaintyN(place, near) / forceN;
  const relative = (figure: { value: number; uncertainty: number }) => figure.uncertainty / figure.value;
  return {
    mass: share(massUncertainty, 1),
    scale: 2 * estimate.model.scaleUncertainty,
    driveline: Math.hypot(
      relative(figures.meshEfficiency),
      share(driveline.wheelMassKg, relative(figures.wheelInertia)),
      share(engineMass, relative(figures.engineInertia)),
    ),
    resistance,
    noise: share(
      driveline.massKg + driveline.wheelMassKg + engineMass,
      accelerationDeviation(estimate, index, t) / a,
    ),
  };
}

/** Relative standard uncertainty of a budget. */
export function combined(budget: PowerBudget): number {
  return Math.hypot(budget.mass, budget.scale, budget.driveline, budget.resistance, budget.noise);
}

/** Standard deviation of the mean acceleration over 0.8 s around a time, from the spline's covariance. */
function accelerationDeviation(estimate: CampaignEstimate, index: number, t: number): number {
  const fit = estimate.pulls[index]?.fit;
  if (!fit) return Number.NaN;
  const row = new Float64Array(fit.basis.count);
  const scratch = new Float64Array(4);
  const [from, to] = [Math.max(fit.basis.start, t - 0.4), t + 0.4];
  for (const [time, sign] of [
    [to, 1],
    [from, -1],
  ] as const) {
    const first = splineWeights(fit.basis, time, 0, scratch);
    for (let k = 0; k < 4; k++) row[first + k] += (sign * scratch[k]) / (to - from);
  }
  const solved = bandedSolve(fit.factor, row);
  let variance = 0;
  for (let k = 0; k < row.length; k++) variance += row[k] * solved[k];
  return Math.sqrt(Math.max(0, variance));
}
