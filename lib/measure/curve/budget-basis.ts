import { READING_LIMITS } from "@/lib/measure/air/weather-uncertainty";
import { roadSpeedUncertainty } from "@/lib/measure/curve/power-sensitivity";
import type { CampaignEstimate } from "@/lib/measure/estimate-campaign";
import { slips } from "@/lib/measure/speed/speed-model";
import type { BudgetComponent, CampaignVehicle } from "@/lib/measure/types";
import { drivelineFigures, rpmPerMps, type StatedFigure, testMass } from "@/lib/measure/vehicle/vehicle";

/** One sentence a component: where the figure in an uncertainty budget comes from. */
export type BudgetBasis = Record<Exclude<BudgetComponent, "repeatability">, string>;

/** The sentences of one run. */
export function budgetBasis(
  estimate: CampaignEstimate,
  vehicle: CampaignVehicle,
  index: number,
): BudgetBasis {
  const figures = drivelineFigures(vehicle);
  const { run } = estimate.runs[index];
  return {
    mass: stated(testMass(vehicle, estimate.drivelines[index].massKg), "kg"),
    "speed scale": scaleBasis(estimate, vehicle, index),
    ...roadBasis(estimate, index),
    "engine inertia": stated(figures.engineInertia, "kg·m²"),
    "wheel inertia": stated(figures.wheelInertia, "kg·m²"),
    "mesh efficiency": stated(figures.meshEfficiency, ""),
    weather: run.weather
      ? `Readings right to ±${READING_LIMITS.tempC} °C, ±${READING_LIMITS.pressureHpa / 10} kPa and ±${READING_LIMITS.humidityPct} % humidity, through the air's density in the drag.`
      : "No weather was read: the density of the air is taken as even over the day.",
    smoothing: "Noise of the speed channels in the mean acceleration over 0.8 s.",
  };
}

/** What the repeatability of a side rests on: `scatter` relative, of single runs, with its degrees of freedom. */
export function repeatabilityBasis(scatter: number, degrees: number, n: number): string {
  return `Single runs scatter by ${percent(scatter)} about their side's mean; over √${n}, widened by Student's t for ${degrees} degrees of freedom.`;
}

const digits = (value: number, precision: number) => String(Number(value.toPrecision(precision)));
const percent = (relative: number) => `${digits(100 * relative, 2)} %`;

function stated({ value, uncertainty, source }: StatedFigure, unit: string): string {
  const from = source === "vehicle sheet" ? "Vehicle sheet" : "Default by class (common practice, no source)";
  const figure = `${digits(value, 4)}${unit && ` ${unit}`}`;
  return `${from}: ${figure}, standard uncertainty ${digits(uncertainty, 2)}${unit && ` ${unit}`}.`;
}

function scaleBasis(estimate: CampaignEstimate, vehicle: CampaignVehicle, index: number): string {
  const { model, gearingFrom, runs } = estimate;
  const share = percent(roadSpeedUncertainty(estimate, vehicle, index));
  const gearing = rpmPerMps(vehicle, runs[index].run.gear);
  const from = {
    gps: `Road speed is scaled to GPS, right to ${share}`,
    wheel: `Without GPS the wheel speed is taken as logged, right to ${share} (common practice, no source)`,
    "engine speed": `Road speed follows from engine speed and the ${gearing?.source ?? "gearing"}, right to ${share}`,
  }[model.scaleFrom];
  const engine =
    gearingFrom === "measured" || !gearing
      ? ""
      : ` Engine speed per road speed: ${gearing.source}, right to ${percent(gearing.uncertainty / gearing.value)}.`;
  const slip = slips(model.base)
    ? " Only driven wheels tell the speed: a usual tyre's slip is taken out, and how well that is known is in the figure."
    : "";
  return `${from}; it enters twice, by speed and by acceleration.${slip}${engine}`;
}

function roadBasis(
  estimate: CampaignEstimate,
  index: number,
): Pick<BudgetBasis, "wind" | "grade" | "rolling and air resistance"> {
  const { day } = estimate.roads[index];
  const members = estimate.roads.filter((road) => road.day === day).map((road) => road.run);
  const n = `the coast-downs of ${day.coastRuns} run${day.coastRuns === 1 ? "" : "s"}`;
  const both = new Set(members.map((run) => run.track.direction)).size > 1;
  const told = [
    both ? "both directions" : null,
    members.some((run) => run.signals.acceleration) ? "the accelerometer" : null,
    members.some((run) => run.signals.altitude && run.track.located) ? "logged altitude" : null,
  ].filter((one) => one !== null);
  return {
    wind: `One mean wind a run, from ${n} ${both ? "in both directions" : "in one direction, which can hardly tell it from resistance"}.`,
    grade:
      told.length > 0
        ? `Slope of the strip from ${told.join(", ")}.`
        : "Nothing in the logs tells of slope: a nearly level strip is assumed.",
    "rolling and air resistance": `Constant, linear and square resistance from ${n}; their scatter from their own residuals.`,
  };
}
