import { airDensityKgm3 } from "@/lib/measure/air/air-density";
import type { Driveline } from "@/lib/measure/curve/pull-curve";
import { estimateRoadDay, type RoadDay } from "@/lib/measure/road/road-day";
import { positionAt, type RoadRun, roadObservations } from "@/lib/measure/road/road-observations";
import { stripTracks } from "@/lib/measure/road/strip-position";
import type { RunSignals } from "@/lib/measure/run/run-signals";
import { calibrateSpeed } from "@/lib/measure/speed/calibrate-speed";
import { findSlipping, type PullSpeed, pullSpeeds } from "@/lib/measure/speed/pull-speed";
import type { SpeedModel, SpeedRun, SpeedSource } from "@/lib/measure/speed/speed-model";
import type { CampaignRun, CampaignVehicle } from "@/lib/measure/types";
import {
  drivelineFigures,
  rollingCircumference,
  rpmPerMps,
  type StatedFigure,
} from "@/lib/measure/vehicle/vehicle";
import { RPM_RADPS, STANDARD_GRAVITY_MPS2 } from "@/lib/units/constants";

/** A run that carries something to estimate from. */
export interface ReadyRun extends SpeedRun {
  run: CampaignRun;
}

/** Everything estimated over the runs of one gear: speeds, resistance, gearing. Arrays have one element a run. */
export interface CampaignEstimate {
  runs: readonly ReadyRun[];
  model: SpeedModel;
  pulls: (PullSpeed | null)[];
  drivelines: Driveline[];
  /** Where the engine speed per road speed comes from. */
  gearingFrom: "measured" | "stated" | "tyre";
  roads: RunRoad[];
}

/** The road of one run: its road day, its place in it, and the resistance at a time of its pull, N. */
export interface RunRoad {
  day: RoadDay;
  place: number;
  run: RoadRun;
  resistanceN: (speedMps: number, t: number) => number;
}

/** Rounds of estimating by turns; the third moves no figure by more than its rounding. */
const ROUNDS = 3;
/** Rolling radius when the sheet tells nothing, m: it only turns wheel inertia into mass. */
const USUAL_RADIUS_M = 0.31;

/** Test mass of a run, kg: its own where typed, else the vehicle's. */
function massOf(run: CampaignRun, vehicle: CampaignVehicle): number {
  return run.mass_kg ?? vehicle.mass_kg;
}

/** Before any coast-down is evaluated: a usual passenger car, good to a few per cent of the drive force. */
function usualResistanceN(massKg: number, v: number): number {
  return 0.012 * massKg * STANDARD_GRAVITY_MPS2 + 0.4 * v + 0.42 * v * v;
}

/**
 * Estimates speed model, pulls, road days and gearing together, in rounds: slip and lag need forces, forces need resistance,
 * resistance needs speeds. All runs must share one gear; runs without a pull give their coast-down.
 */
export function estimateCampaign(
  runs: readonly ReadyRun[],
  vehicle: CampaignVehicle,
  gear: number | null,
): CampaignEstimate {
  const stated = rpmPerMps(vehicle, gear);
  let drivelines = runs.map(({ run }) => startDriveline(run, vehicle, stated));
  const placeOf = new Map<SpeedRun, number>(runs.map((run, k) => [run, k]));
  const sharing = runsPerSide(runs);
  let roads: RunRoad[] | null = null;
  let model: SpeedModel | null = null;
  let pulls: (PullSpeed | null)[] | null = null;
  let gearingFrom: CampaignEstimate["gearingFrom"] = stated?.source === "tyre marking" ? "tyre" : "stated";
  for (let round = 0; round < ROUNDS; round++) {
    const forceN = (k: number, v: number, a: number, t: number) => {
      const { massKg, wheelMassKg, meshEfficiency, engineInertiaKgm2, gearingRadPerM } = drivelines[k];
      const inertiaKg = massKg + wheelMassKg + meshEfficiency * engineInertiaKgm2 * gearingRadPerM ** 2;
      return inertiaKg * a + (roads ? roads[k].resistanceN(v, t) : usualResistanceN(massKg, v));
    };
    const known = pulls;
    const current: SpeedModel = calibrateSpeed(
      runs,
      (run, v, a, t) => forceN(placeOf.get(run) ?? 0, v, a, t),
      stated?.value ?? null,
      (run, t) => known?.[placeOf.get(run) ?? 0]?.slipping.some((s) => t >= s.from_s && t <= s.to_s) ?? false,
      model,
    );
    model = current;
    const engine = model.channels.get("engineSpeed");
    if (engine && engine.scaleUncertainty < 0.005) {
      drivelines = drivelines.map((one) => ({ ...one, gearingRadPerM: engine.scale * RPM_RADPS }));
      gearingFrom = "measured";
    }
    const before = pulls ?? pullSpeeds(runs, model, forceN, null, null);
    const checked = before.map(
      (pull, k) =>
        pull && { ...pull, slipping: findSlipping(runs[k], current, pull, (v, a, t) => forceN(k, v, a, t)) },
    );
    pulls = pullSpeeds(runs, model, forceN, checked, round === ROUNDS - 1 ? sharing : null);
    roads = estimateRoads(runs, model, pulls, drivelines);
  }
  if (!model || !pulls || !roads) throw new Error("Nothing was estimated.");
  return { runs, model, pulls, drivelines, gearingFrom, roads };
}

function startDriveline(run: CampaignRun, vehicle: CampaignVehicle, stated: StatedFigure | null): Driveline {
  const figures = drivelineFigures(vehicle);
  const circumference = rollingCircumference(vehicle)?.value;
  const radiusM = circumference ? circumference / (2 * Math.PI) : USUAL_RADIUS_M;
  return {
    massKg: massOf(run, vehicle),
    wheelMassKg: figures.wheelInertia.value / radiusM ** 2,
    engineInertiaKgm2: figures.engineInertia.value,
    meshEfficiency: figures.meshEfficiency.value,
    gearingRadPerM: (stated?.value ?? 100) * RPM_RADPS,
  };
}

/** How many pulls the smaller side has: its mean is what detail is wanted in. */
function runsPerSide(runs: readonly ReadyRun[]): number {
  const counts = new Map<string, number>();
  for (const { run, segments } of runs) {
    if (segments.pull) counts.set(run.side ?? "", (counts.get(run.side ?? "") ?? 0) + 1);
  }
  return Math.max(1, Math.min(...counts.values()));
}

function densityOf({ weather }: CampaignRun): number {
  return weather ? airDensityKgm3(weather.pressure_hpa * 100, weather.temp_c, weather.rh_pct / 100) : 1.2;
}

function estimateRoads(
  runs: readonly ReadyRun[],
  model: SpeedModel,
  pulls: readonly (PullSpeed | null)[],
  drivelines: readonly Driveline[],
): RunRoad[] {
  const density = runs.map(({ run }) => densityOf(run));
  const meanDensity = density.reduce((sum, x) => sum + x, 0) / density.length;
  const tracks = stripTracks(
    runs.map(({ signals, run }) => ({
      signals,
      legDirection: run.leg === "out" ? 1 : run.leg === "back" ? -1 : 0,
      speedFactor: 1 / (model.channels.get(findingSource(signals))?.scale ?? 1),
    })),
  );
  const roadRuns = runs.map(
    ({ signals, segments }, k): RoadRun => ({
      signals,
      segments,
      track: tracks[k],
      densityRatio: density[k] / meanDensity,
      massKg: drivelines[k].massKg,
      neutralMassKg: drivelines[k].massKg + drivelines[k].wheelMassKg,
      pullFit: pulls[k]?.fit ?? null,
    }),
  );
  const roads = new Array<RunRoad>(runs.length);
  for (const name of new Set(runs.map(({ run }) => run.road_day ?? ""))) {
    const members = runs.flatMap(({ run }, k) => ((run.road_day ?? "") === name ? [k] : []));
    const own = members.map((k) => roadRuns[k]);
    const day = estimateRoadDay(own, roadObservations(own, model));
    members.forEach((k, place) => {
      const run = roadRuns[k];
      roads[k] = { day, place, run, resistanceN: (v, t) => day.resistanceN(place, v, positionAt(run, t)) };
    });
  }
  return roads;
}

/** The speed source that `speedRows` was made of. */
function findingSource(signals: RunSignals): SpeedSource {
  return signals.undriven ? "undriven" : signals.gps ? "gps" : "driven";
}
