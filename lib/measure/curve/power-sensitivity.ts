import { densityUncertainty } from "@/lib/measure/air/weather-uncertainty";
import type { GridCurve } from "@/lib/measure/curve/pull-curve";
import type { CampaignEstimate } from "@/lib/measure/estimate-campaign";
import { positionAt } from "@/lib/measure/road/road-observations";
import type { RoadVariance } from "@/lib/measure/road/road-variance";
import { PRIOR } from "@/lib/measure/speed/calibrate-speed";
import { slips } from "@/lib/measure/speed/speed-model";
import type { BudgetComponent, CampaignVehicle } from "@/lib/measure/types";
import { drivelineFigures, rollingCircumference, rpmPerMps, testMass } from "@/lib/measure/vehicle/vehicle";
import { splineVariance, splineWeights } from "@/lib/signal/penalised-spline";

/** Parts that all runs of a side share, each relative to the power. */
export type SharedComponent = Extract<
  BudgetComponent,
  "mass" | "speed scale" | "engine inertia" | "wheel inertia" | "mesh efficiency" | "weather"
>;

/** What moves the power at one point of one run, as relative standard uncertainties. */
export interface PowerSensitivity {
  shared: Record<SharedComponent, number>;
  /** The part of the speed scale in torque, which differs when the gearing is not measured. */
  torqueScale: number;
  /** Parts of this run alone: noise of the speed, and gusts around the run's mean wind. */
  noise: number;
  gust: number;
  /** Relative change of power per unit of each unknown of the run's road day. */
  road: { variance: RoadVariance; gradient: Float64Array };
}

/** The acceleration at a peak is a mean over so long, s: half the width. */
const HALF_WINDOW_S = 0.4;

/**
 * Sensitivities of one run's power at a grid point (JCGM 100:2008, 5.1). The coast-down measures resistance as (m + ΣJw/r²)
 * times deceleration, so mass and wheel inertia scale the whole wheel force, not only the accelerating one. Speed scale enters
 * speed and acceleration; mesh efficiency the wheel force; density only by the drag, as if this run's reading alone were off.
 * Null at a gap.
 */
export function powerSensitivity(
  estimate: CampaignEstimate,
  vehicle: CampaignVehicle,
  index: number,
  curve: GridCurve,
  point: number,
): PowerSensitivity | null {
  const a = curve.accelerationMps2[point] ?? null;
  const v = curve.speedMps[point] ?? null;
  const t = curve.timeS[point] ?? null;
  const kw = curve.wheelKw[point] ?? null;
  if (a === null || v === null || t === null || kw === null || !estimate.pulls[index]) return null;
  const { massKg, wheelMassKg, meshEfficiency, engineInertiaKgm2, gearingRadPerM } =
    estimate.drivelines[index];
  const engineMassKg = meshEfficiency * engineInertiaKgm2 * gearingRadPerM ** 2;
  const forceN = (1000 * kw) / v + engineMassKg * a;
  const engineShare = (engineMassKg * a) / forceN;
  const wheelShare = 1 - engineShare;
  const { day, place, run } = estimate.roads[index];
  const near = [-HALF_WINDOW_S, 0, HALF_WINDOW_S].map((dt) => ({
    speedMps: v + a * dt,
    positionM: positionAt(run, t + dt),
  }));
  const figures = drivelineFigures(vehicle);
  const relative = (figure: { value: number; uncertainty: number } | null) =>
    figure ? figure.uncertainty / figure.value : 0;
  const rotating = wheelShare / (massKg + wheelMassKg);
  const scale = scaleParts(estimate, vehicle, index, forceN, engineShare);
  const typed = estimate.runs[index].run;
  const dragShare = (day.f2NPerMps2 * run.densityRatio * v * v) / forceN;
  return {
    shared: {
      mass: testMass(vehicle, massKg).uncertainty * rotating,
      "speed scale": scale.power,
      "engine inertia": engineShare * relative(figures.engineInertia),
      "wheel inertia":
        wheelMassKg *
        rotating *
        Math.hypot(relative(figures.wheelInertia), 2 * relative(rollingCircumference(vehicle))),
      "mesh efficiency": wheelShare * relative(figures.meshEfficiency),
      weather: Math.abs(dragShare) * densityUncertainty(typed.weather),
    },
    torqueScale: scale.torque,
    noise: ((massKg + wheelMassKg + engineMassKg) * accelerationDeviation(estimate, index, t)) / forceN,
    gust: day.variance.gustN(place, v) / forceN,
    road: { variance: day.variance, gradient: day.variance.gradient(place, near).map((g) => g / forceN) },
  };
}

/** Relative standard uncertainty of road speed: the model's, or that of the gearing where engine speed tells the road speed. */
export function roadSpeedUncertainty(
  { model, runs }: CampaignEstimate,
  vehicle: CampaignVehicle,
  index: number,
): number {
  const stated = rpmPerMps(vehicle, runs[index].run.gear);
  return model.scaleFrom === "engine speed" && stated
    ? stated.uncertainty / stated.value
    : model.scaleUncertainty;
}

/**
 * What an error of the speed scale does. Gearing measured with it: force and way per turn move together, power and torque by
 * twice the error of the wheel part. Gearing typed: power by twice, torque once by the speed and once by the gearing.
 * Where only driven wheels tell the speed, how well their slip under the force is known comes on top.
 */
function scaleParts(
  estimate: CampaignEstimate,
  vehicle: CampaignVehicle,
  index: number,
  forceN: number,
  engineShare: number,
): { power: number; torque: number } {
  const { model } = estimate;
  const slip = slips(model.base) ? PRIOR.slipSd * forceN : 0;
  const scale = Math.hypot(roadSpeedUncertainty(estimate, vehicle, index), slip);
  const wheelShare = 1 - engineShare;
  if (estimate.gearingFrom === "measured" || model.scaleFrom === "engine speed") {
    return { power: 2 * wheelShare * scale, torque: 2 * wheelShare * scale };
  }
  const stated = rpmPerMps(vehicle, estimate.runs[index].run.gear);
  const gearing = stated ? stated.uncertainty / stated.value : 0;
  return {
    power: Math.hypot(2 * scale, 2 * engineShare * gearing),
    torque: Math.hypot(scale, (wheelShare - engineShare) * gearing),
  };
}

/** Standard deviation of the mean acceleration around a time, from the covariance of the speed's spline. */
function accelerationDeviation(estimate: CampaignEstimate, index: number, t: number): number {
  const fit = estimate.pulls[index]?.fit;
  if (!fit) return Number.NaN;
  const row = new Float64Array(fit.basis.count);
  const scratch = new Float64Array(4);
  const [from, to] = [Math.max(fit.basis.start, t - HALF_WINDOW_S), t + HALF_WINDOW_S];
  for (const [time, sign] of [
    [to, 1],
    [from, -1],
  ] as const) {
    const first = splineWeights(fit.basis, time, 0, scratch);
    for (let k = 0; k < 4; k++) row[first + k] += (sign * scratch[k]) / (to - from);
  }
  return Math.sqrt(splineVariance(fit, row));
}
