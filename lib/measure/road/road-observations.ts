import { coastBlocks, type SpeedBlock } from "@/lib/measure/road/road-blocks";
import { type StripTrack, wayAt } from "@/lib/measure/road/strip-position";
import type { Segments } from "@/lib/measure/run/find-segments";
import type { RunSignals, SampledChannel } from "@/lib/measure/run/run-signals";
import { between, type SpeedModel, tipInS } from "@/lib/measure/speed/speed-model";
import type { SplineFit } from "@/lib/signal/penalised-spline";
import { splineAt } from "@/lib/signal/penalised-spline";

/** One run as the road-day estimate sees it. */
export interface RoadRun {
  signals: RunSignals;
  segments: Segments;
  track: StripTrack;
  /** Air density over the day's mean. */
  densityRatio: number;
  /** Test mass, and with the inertia of the wheels, kg. */
  massKg: number;
  neutralMassKg: number;
  /** Smoothed speed of the pull, where there is one. */
  pullFit: SplineFit | null;
}

/** A block of coasting: what slows the car, as mass-free deceleration. */
export interface CoastObservation {
  run: number;
  speedMps: number;
  accelerationMps2: number;
  accelerationVariance: number;
  positionM: number;
}

/** A block of accelerometer readings with the true acceleration of the same time. */
export interface TiltObservation {
  run: number;
  readingMps2: number;
  accelerationMps2: number;
  positionM: number;
  seconds: number;
}

/** A difference of logged altitude between two positions. */
export interface ClimbObservation {
  run: number;
  climbM: number;
  fromM: number;
  toM: number;
}

/** Road speeds that one stretch of coasting covers. */
export interface CoastWindow {
  lowMps: number;
  highMps: number;
}

export interface RoadObservations {
  coasts: CoastObservation[];
  windows: CoastWindow[];
  tilts: TiltObservation[];
  climbs: ClimbObservation[];
}

const COAST_BLOCK_S = 2;
const TILT_BLOCK_S = 1;
const CLIMB_STEP_S = 4;

/** Position on the strip's axis; without GPS the way from tip-in, so that runs of one leg lie over each other. */
export function positionAt(run: RoadRun, t: number): number {
  const way = wayAt(run.signals, run.track.wayM, t);
  if (run.track.located) return run.track.originM + run.track.direction * way;
  return (
    way -
    wayAt(
      run.signals,
      run.track.wayM,
      run.segments.pull ? tipInS(run.segments) : (run.segments.coasts[0]?.from_s ?? 0),
    )
  );
}

/** Gathers everything in the logs of a road day that tells of resistance, wind and slope. */
export function roadObservations(runs: readonly RoadRun[], model: SpeedModel): RoadObservations {
  const out: RoadObservations = { coasts: [], windows: [], tilts: [], climbs: [] };
  runs.forEach((run, index) => {
    const { coasts, cruise, pull } = run.segments;
    for (const coast of coasts) {
      const blocks = coastBlocks(run.signals, model, coast.from_s, coast.to_s, COAST_BLOCK_S);
      if (blocks.length > 0) out.windows.push(windowOf(blocks));
      for (const block of blocks) {
        out.coasts.push({
          run: index,
          speedMps: block.speedMps,
          accelerationMps2: block.accelerationMps2,
          accelerationVariance: block.accelerationVariance,
          positionM: positionAt(run, (block.fromS + block.toS) / 2),
        });
      }
    }
    const { acceleration, altitude } = run.signals;
    if (acceleration) {
      for (const span of [cruise, ...coasts]) {
        if (!span) continue;
        for (const block of coastBlocks(run.signals, model, span.from_s, span.to_s, TILT_BLOCK_S)) {
          addTilt(out.tilts, run, index, acceleration, block.fromS, block.toS, block.accelerationMps2);
        }
      }
      if (pull && run.pullFit)
        tiltsOfPull(
          out.tilts,
          run,
          index,
          acceleration,
          run.pullFit,
          tipInS(run.segments) + 0.8,
          pull.to_s - 0.1,
        );
    }
    if (altitude && run.track.located) climbsOf(out.climbs, run, index, altitude);
  });
  return out;
}

function windowOf(blocks: readonly SpeedBlock[]): CoastWindow {
  let lowMps = Number.POSITIVE_INFINITY;
  let highMps = 0;
  for (const { speedMps, accelerationMps2, fromS, toS } of blocks) {
    const half = (Math.abs(accelerationMps2) * (toS - fromS)) / 2;
    lowMps = Math.min(lowMps, speedMps - half);
    highMps = Math.max(highMps, speedMps + half);
  }
  return { lowMps, highMps };
}

function meanBetween(channel: SampledChannel, fromS: number, toS: number): number {
  const [a, b] = between(channel, fromS, toS);
  if (b - a < 1) return Number.NaN;
  let sum = 0;
  for (let i = a; i < b; i++) sum += channel.values[i];
  return sum / (b - a);
}

function addTilt(
  tilts: TiltObservation[],
  run: RoadRun,
  index: number,
  acceleration: SampledChannel,
  fromS: number,
  toS: number,
  trueMps2: number,
): void {
  const reading = meanBetween(acceleration, fromS, toS);
  if (Number.isNaN(reading)) return;
  tilts.push({
    run: index,
    readingMps2: reading,
    accelerationMps2: trueMps2,
    positionM: positionAt(run, (fromS + toS) / 2),
    seconds: toS - fromS,
  });
}

function tiltsOfPull(
  tilts: TiltObservation[],
  run: RoadRun,
  index: number,
  acceleration: SampledChannel,
  fit: SplineFit,
  fromS: number,
  toS: number,
): void {
  const scratch = new Float64Array(4);
  const speed = (t: number) => splineAt(fit.basis, fit.coefficients, t, 0, scratch);
  const count = Math.floor((toS - fromS) / TILT_BLOCK_S);
  for (let k = 0; k < count; k++) {
    const start = fromS + (k * (toS - fromS)) / count;
    const end = fromS + ((k + 1) * (toS - fromS)) / count;
    addTilt(tilts, run, index, acceleration, start, end, (speed(end) - speed(start)) / (end - start));
  }
}

function climbsOf(climbs: ClimbObservation[], run: RoadRun, index: number, altitude: SampledChannel): void {
  const first = altitude.times[0] + 0.5;
  const last = altitude.times[altitude.times.length - 1] - 0.5;
  let before: { height: number; position: number } | null = null;
  for (let t = first; t <= last; t += CLIMB_STEP_S) {
    const height = meanBetween(altitude, t - 0.5, t + 0.5);
    if (Number.isNaN(height)) continue;
    const here = { height, position: positionAt(run, t) };
    if (before && Math.abs(here.position - before.position) > 5) {
      climbs.push({
        run: index,
        climbM: here.height - before.height,
        fromM: before.position,
        toM: here.position,
      });
    }
    before = here;
  }
}
