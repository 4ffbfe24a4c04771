import { airDensityKgm3 } from "@/lib/measure/air-density";
import { calibrateSpeed } from "@/lib/measure/calibrate-speed";
import type { Segments } from "@/lib/measure/find-segments";
import type { Driveline } from "@/lib/measure/pull-curve";
import { findSlipping, type PullSpeed, pullSpeeds } from "@/lib/measure/pull-speed";
import { estimateRoadDay, type RoadDay } from "@/lib/measure/road-day";
import { positionAt, type RoadRun, roadObservations } from "@/lib/measure/road-observations";
import type { RunSignals } from "@/lib/measure/run-signals";
import type { Smoothing } from "@/lib/measure/smooth-speed";
import type { SpeedModel } from "@/lib/measure/speed-model";
import { type StripTrack, stripTracks } from "@/lib/measure/strip-position";
import type { CampaignRun, CampaignVehicle } from "@/lib/measure/types";
import { drivelineFigures, rollingCircumference, rpmPerMps } from "@/lib/measure/vehicle";
import { RPM_RADPS } from "@/lib/units/constants";

/** A run that carries something to estimate from. */
export interface ReadyRun {
  run: CampaignRun;
  signals: RunSignals;
  segments: Segments;
}

/** Everything estimated over the runs of one gear: speeds, resistance, gearing. */
export interface CampaignEstimate {
  runs: readonly ReadyRun[];
  model: SpeedModel;
  pulls: (PullSpeed | null)[];
  smoothing: Smoothing | null;
  tracks: StripTrack[];
  driveline: Driveline;
  /** Where the engine speed per road speed comes from. */
  gearingFrom: "measured" | "stated" | "tyre";
  gearingUncertainty: number;
  roadDays: { day: RoadDay; members: number[] }[];
  /** Resistance of one run at a time of its pull, N. */
  resistanceN: (run: number, speedMps: number, t: number) => number;
}

function densityOf(run: CampaignRun): number {
  const w = run.weather;
  return w ? airDensityKgm3(w.pressure_hpa * 100, w.temp_c, w.rh_pct / 100) : 1.2;
}

/**
 * Estimates speed model, pulls, road days and gearing together, in rounds: slip and lag need forces, forces need resistance,
 * resistance needs speeds. Three rounds settle it. All runs must share one gear.
 */
export function estimateCampaign(
  runs: readonly ReadyRun[],
  vehicle: CampaignVehicle,
  gear: number | null,
): CampaignEstimate {
  const figures = drivelineFigures(vehicle);
  const stated = rpmPerMps(vehicle, gear);
  const radiusM = (rollingCircumference(vehicle)?.value ?? 1.95) / (2 * Math.PI);
  const wheelMassKg = figures.wheelInertia.value / radiusM ** 2;
  const density = runs.map(({ run }) => densityOf(run));
  const meanDensity = density.reduce((sum, x) => sum + x, 0) / density.length;
  const legDirection = runs.map(({ run }): 1 | -1 | 0 =>
    run.leg === "out" ? 1 : run.leg === "back" ? -1 : 0,
  );
  const days = [...new Set(runs.map(({ run }) => run.road_day ?? ""))];

  const sides = [...new Set(runs.map(({ run }) => run.side ?? ""))];
  const sharing = Math.max(
    1,
    Math.min(
      ...sides.map(
        (side) => runs.filter(({ run, segments }) => segments.pull && (run.side ?? "") === side).length,
      ),
    ),
  );

  let driveline: Driveline = {
    massKg: vehicle.mass_kg,
    wheelMassKg,
    engineInertiaKgm2: figures.engineInertia.value,
    meshEfficiency: figures.meshEfficiency.value,
    gearingRadPerM: (stated?.value ?? 100) * RPM_RADPS,
  };
  const inertiaKg = () =>
    driveline.massKg +
    wheelMassKg +
    driveline.meshEfficiency * driveline.engineInertiaKgm2 * driveline.gearingRadPerM ** 2;
  // Before any coast-down is evaluated: a usual passenger car, good to a few per cent of the drive force.
  let resistanceN = (_run: number, v: number, _t: number) =>
    0.012 * vehicle.mass_kg * 9.80665 + 0.4 * v + 0.42 * v * v;
  let model: SpeedModel | null = null;
  let pulls: (PullSpeed | null)[] = runs.map(() => null);
  let smoothing: Smoothing | null = null;
  let tracks: StripTrack[] = [];
  let roadDays: CampaignEstimate["roadDays"] = [];
  let gearingFrom: CampaignEstimate["gearingFrom"] = "stated";
  for (let round = 0; round < 3; round++) {
    const forceN = (run: number, v: number, a: number, t: number) => inertiaKg() * a + resistanceN(run, v, t);
    model = calibrateSpeed(
      runs,
      (v, a) =>
        inertiaKg() * a +
        resistanceN(0, v, 0) * 0 +
        0.012 * vehicle.mass_kg * 9.80665 +
        0.4 * v +
        0.42 * v * v,
      stated?.value ?? null,
      (run, t) =>
        pulls[runs.indexOf(run as ReadyRun)]?.slipping.some((s) => t >= s.from_s && t <= s.to_s) ?? false,
    );
    const engine = model.channels.get("engineSpeed");
    if (engine && engine.scaleUncertainty < 0.005) {
      driveline = { ...driveline, gearingRadPerM: engine.scale * RPM_RADPS };
      gearingFrom = "measured";
    } else gearingFrom = stated?.source === "tyre marking" ? "tyre" : "stated";
    if (round === 0) ({ pulls } = pullSpeeds(runs, model, forceN, null, null));
    const current = model;
    pulls = pulls.map(
      (pull, k) =>
        pull && { ...pull, slipping: findSlipping(runs[k], current, pull, (v, a, t) => forceN(k, v, a, t)) },
    );
    ({ pulls, smoothing } = pullSpeeds(runs, model, forceN, pulls, round === 2 ? sharing : null));
    const speedName = model.channels.get(
      runs[0].signals.speedName === "undriven wheel"
        ? "undriven"
        : runs[0].signals.speedName === "gps"
          ? "gps"
          : "driven",
    );
    tracks = stripTracks(
      runs.map(({ signals }, k) => ({ signals, legDirection: legDirection[k] })),
      1 / (speedName?.scale ?? 1),
    );
    roadDays = days.map((name) => {
      const members = runs.flatMap(({ run }, k) => ((run.road_day ?? "") === name ? [k] : []));
      const roadRuns = members.map(
        (k): RoadRun => ({
          signals: runs[k].signals,
          segments: runs[k].segments,
          track: tracks[k],
          densityRatio: density[k] / meanDensity,
          pullFit: pulls[k]?.fit ?? null,
        }),
      );
      const day = estimateRoadDay(
        roadRuns,
        roadObservations(roadRuns, current),
        vehicle.mass_kg,
        vehicle.mass_kg + wheelMassKg,
      );
      return { day, members, roadRuns };
    });
    const placed = new Map(
      roadDays.flatMap((entry) => entry.members.map((k, position) => [k, { ...entry, position }] as const)),
    );
    const roadRunOf = (k: number): RoadRun => ({
      signals: runs[k].signals,
      segments: runs[k].segments,
      track: tracks[k],
      densityRatio: 1,
      pullFit: null,
    });
    resistanceN = (k, v, t) => {
      const entry = placed.get(k);
      return entry ? entry.day.resistanceN(entry.position, v, positionAt(roadRunOf(k), t)) : 0;
    };
  }
  if (!model) throw new Error("no round was made");
  return {
    runs,
    model,
    pulls,
    smoothing,
    tracks,
    driveline,
    gearingFrom,
    gearingUncertainty:
      gearingFrom === "measured" ? 0.001 : stated ? stated.uncertainty / stated.value : 0.02,
    roadDays,
    resistanceN,
  };
}
