import type { LogTable } from "@/lib/logs/types";
import { runSignals } from "@/lib/measure/run/run-signals";
import {
  INITIAL_MOVEMENT_M,
  type MotionTrace,
  motionTrace,
  speedCrossingS,
  traceAt,
  trapSpeedMps,
  wayCrossingS,
} from "@/lib/measure/sprint/acceleration";
import { type SprintTrace, sprintTrace } from "@/lib/measure/sprint/sprint-trace";
import type { CampaignVehicle, Note, Span } from "@/lib/measure/types";
import { KMH_MPS, MPH_MPS } from "@/lib/units/constants";

/** Times between two speeds in m/s, by their name in the result. From rest: the first speed is 0. */
const FROM_REST: readonly [string, number][] = [
  ["0-50", 50 * KMH_MPS],
  ["0-100", 100 * KMH_MPS],
  ["0-60 mph", 60 * MPH_MPS],
];
const ROLL_ON: readonly [string, number, number][] = [
  ["60-100", 60 * KMH_MPS, 100 * KMH_MPS],
  ["80-120", 80 * KMH_MPS, 120 * KMH_MPS],
  ["100-150", 100 * KMH_MPS, 150 * KMH_MPS],
  ["100-200", 100 * KMH_MPS, 200 * KMH_MPS],
];
const DISTANCES_M = [18.288, 201.168, 402.336, 1000] as const;

/** Times of one run with their standard uncertainty, by name; a time that the run does not cover is absent. */
export interface RunTimes {
  times_s: Record<string, number>;
  times_uncertainty_s: Record<string, number>;
}

/** What a sprint gives, in the spelling of the result. */
export interface SprintResult extends RunTimes {
  segments: { sprint?: Span };
  speed_source: SprintTrace["source"] | null;
  speed_at_kmh: Record<string, number>;
  trap_kmh: Record<string, number>;
  notes: Note[];
}

/** Way between first motion and the first sound speed sample that the start may hide, m. */
const START_WAY_UNCERTAINTY_M = 0.02;

const round = (value: number) => Math.round(value * 1e6) / 1e6;

/** Acceleration around a time, from the speeds 0.15 s to each side. */
function accelerationAt(trace: MotionTrace, atS: number): number {
  const from = Math.max(trace.timeS[0], atS - 0.15);
  const to = Math.min(trace.timeS[trace.timeS.length - 1], atS + 0.15);
  return (traceAt(trace, to, "speedMps") - traceAt(trace, from, "speedMps")) / (to - from);
}

/**
 * Roll-on times ("60-100", "80-120", "100-150", "100-200") of a speed trace: also of a pull, when only its full-load
 * part in one gear is passed. `deviationMps` = standard deviation of a speed, `scaleUncertainty` relative.
 */
export function rollOnTimes(
  timeS: Float64Array,
  speedMps: Float64Array,
  deviationMps: number,
  scaleUncertainty: number,
): RunTimes {
  const result: RunTimes = { times_s: {}, times_uncertainty_s: {} };
  if (timeS.length < 2) return result;
  const trace = motionTrace(timeS, speedMps);
  for (const [name, low, high] of ROLL_ON) {
    const from = speedCrossingS(trace, low);
    const to = from === null ? null : speedCrossingS(trace, high, from);
    if (from === null || to === null) continue;
    result.times_s[name] = round(to - from);
    const ends = [from, to].map((t) => deviationMps / Math.max(0.2, accelerationAt(trace, t)));
    result.times_uncertainty_s[name] = round(Math.hypot(...ends, scaleUncertainty * (to - from)));
  }
  return result;
}

/**
 * Measures a sprint: times from rest (first motion) and with the clock started at 0.3048 m (name + " ivm"), roll-on
 * times, speed and trap speed at distances. Distances count from rest. What the run does not cover is absent; a run that
 * did not begin at rest has roll-on times only. The log must carry a road speed (requireRoadSpeed).
 */
export function measureSprint(table: LogTable, _vehicle: CampaignVehicle): SprintResult {
  const empty: SprintResult = {
    segments: {},
    speed_source: null,
    times_s: {},
    times_uncertainty_s: {},
    speed_at_kmh: {},
    trap_kmh: {},
    notes: [],
  };
  const sprint = sprintTrace(runSignals(table));
  if (!sprint) return empty;
  const { trace, launch, deviationMps, scaleUncertainty } = sprint;
  const notes = [...sprint.notes];
  const roll = rollOnTimes(trace.timeS, trace.speedMps, deviationMps, scaleUncertainty);
  const result: SprintResult = { ...empty, ...roll, speed_source: sprint.source, notes };
  let top = 0;
  for (let i = 1; i < trace.speedMps.length; i++) if (trace.speedMps[i] > trace.speedMps[top]) top = i;
  result.segments = {
    sprint: { from_s: round(launch?.restS ?? trace.timeS[0]), to_s: round(trace.timeS[top]) },
  };
  if (!launch) {
    notes.push({
      code: "not_from_rest",
      message:
        "The recording does not begin at rest, so there are no times from rest. Stand for a second before the start.",
    });
    return result;
  }
  addTimesFromRest(result, sprint, launch.restS, launch.restUncertaintyS);
  notes.push(
    launch.by === "acceleration"
      ? {
          code: "start_by_accelerometer",
          message:
            "First motion was found with the accelerometer, which sees what the speed sensor does not.",
        }
      : {
          code: "start_extrapolated",
          message:
            "First motion was drawn back from the first speeds, since no accelerometer is logged; times from rest are the less certain for it.",
        },
  );
  return result;
}

function addTimesFromRest(
  result: SprintResult,
  sprint: SprintTrace,
  restS: number,
  restUncertaintyS: number,
): void {
  const { trace, deviationMps, scaleUncertainty } = sprint;
  const movementS = wayCrossingS(trace, INITIAL_MOVEMENT_M);
  const movementUncertaintyS =
    movementS === null
      ? 0
      : START_WAY_UNCERTAINTY_M / (2 * Math.max(0.5, traceAt(trace, movementS, "speedMps")));
  const add = (name: string, atS: number, endUncertaintyS: number) => {
    const scaled = scaleUncertainty * (atS - restS);
    result.times_s[name] = round(atS - restS);
    result.times_uncertainty_s[name] = round(Math.hypot(restUncertaintyS, endUncertaintyS, scaled));
    if (movementS === null || movementS >= atS) return;
    result.times_s[`${name} ivm`] = round(atS - movementS);
    result.times_uncertainty_s[`${name} ivm`] = round(
      Math.hypot(movementUncertaintyS, endUncertaintyS, scaled),
    );
  };
  for (const [name, speed] of FROM_REST) {
    const t = speedCrossingS(trace, speed);
    if (t !== null) add(name, t, deviationMps / Math.max(0.2, accelerationAt(trace, t)));
  }
  for (const wayM of DISTANCES_M) {
    const t = wayCrossingS(trace, wayM);
    if (t === null) continue;
    const name = `${wayM} m`;
    add(name, t, START_WAY_UNCERTAINTY_M / traceAt(trace, t, "speedMps"));
    result.speed_at_kmh[name] = round(traceAt(trace, t, "speedMps") / KMH_MPS);
    const trap = trapSpeedMps(trace, wayM);
    if (trap !== null && wayM > 20.1168) result.trap_kmh[name] = round(trap / KMH_MPS);
  }
}
