import type { LogTable } from "@/lib/logs/types";
import { runSignals } from "@/lib/measure/run/run-signals";
import {
  INITIAL_MOVEMENT_M,
  speedCrossingS,
  traceAt,
  trapSpeedMps,
  wayCrossingS,
} from "@/lib/measure/sprint/acceleration";
import type { FallInput } from "@/lib/measure/sprint/add-falls";
import { fallSensitivity } from "@/lib/measure/sprint/fall-sensitivity";
import type { Launch } from "@/lib/measure/sprint/launch";
import { ownFall } from "@/lib/measure/sprint/net-fall";
import { type RunTimes, rollOnTimes } from "@/lib/measure/sprint/roll-on";
import { type SprintTrace, sprintTrace } from "@/lib/measure/sprint/sprint-trace";
import {
  clockStart,
  speedAtWayUncertaintyMps,
  speedEnd,
  timeUncertaintyS,
  wayEnd,
} from "@/lib/measure/sprint/timing-uncertainty";
import { STANDARD_TIMINGS, type Timings } from "@/lib/measure/sprint/timings";
import type { Note, Span } from "@/lib/measure/types";
import { KMH_MPS } from "@/lib/units/constants";

/** What a sprint gives, in the spelling of the result. */
export interface SprintResult extends RunTimes {
  segments: { sprint?: Span };
  speed_source: SprintTrace["source"] | null;
  speed_at_kmh: Record<string, number>;
  speed_uncertainty_kmh: Record<string, number>;
  trap_kmh: Record<string, number>;
  trap_uncertainty_kmh: Record<string, number>;
  notes: Note[];
}

/** A sprint with what is needed to tell the effect of its fall. */
export interface MeasuredSprint extends FallInput {
  result: SprintResult;
  sensitivityS: Record<string, number>;
}

/** Standard uncertainty of the way from rest that the start hides, m, by how first motion was found; from simulated launches. */
const START_WAY_M: Record<Launch["by"], number> = { acceleration: 0.003, extrapolated: 0.01 };
/** Noise of the first speeds becomes noise of the way up to 0.3048 m over about this long, s; from the same launches. */
const START_NOISE_S = 0.3;
/** Trap speed is a mean: this share of a single speed's noise is left. */
const TRAP_NOISE_SHARE = Math.SQRT1_2;

/**
 * Measures a sprint: times from rest (first motion) and with the clock started at 0.3048 m (name + " ivm"), roll-on
 * times, speed and trap speed at distances, each with its standard uncertainty. Distances count from rest. What the run does
 * not cover is absent; a run that did not begin at rest has roll-on times only. The log must carry a road speed.
 */
export function measureSprint(table: LogTable, timings: Timings = STANDARD_TIMINGS): MeasuredSprint {
  const result: SprintResult = {
    segments: {},
    speed_source: null,
    times_s: {},
    times_uncertainty_s: {},
    speed_at_kmh: {},
    speed_uncertainty_kmh: {},
    trap_kmh: {},
    trap_uncertainty_kmh: {},
    notes: [],
  };
  const signals = runSignals(table);
  const sprint = sprintTrace(signals);
  if (!sprint) return { result, fall: null, sensitivityS: {} };
  const { trace, launch } = sprint;
  const roll = rollOnTimes(trace.timeS, trace.speedMps, sprint.uncertainty, timings.pairs);
  Object.assign(result.times_s, roll.times_s);
  Object.assign(result.times_uncertainty_s, roll.times_uncertainty_s);
  result.speed_source = sprint.source;
  let top = 0;
  for (let i = 1; i < trace.speedMps.length; i++) if (trace.speedMps[i] > trace.speedMps[top]) top = i;
  const fromS = launch?.restS ?? trace.timeS[0];
  result.segments = { sprint: { from_s: fromS, to_s: trace.timeS[top] } };
  const measured: MeasuredSprint = {
    result,
    fall: ownFall(signals.altitude, trace, fromS, trace.timeS[top]),
    sensitivityS: roll.sensitivityS,
  };
  if (launch) addTimesFromRest(measured, sprint, launch, timings);
  result.notes.push(...sprint.notes, startNote(launch));
  return measured;
}

function startNote(launch: Launch | null): Note {
  if (!launch) {
    return {
      code: "not_from_rest",
      message:
        "The recording does not begin at rest, so there are no times from rest. Stand for a second before the start.",
    };
  }
  const half = (2 * launch.restUncertaintyS).toFixed(2);
  return launch.by === "acceleration"
    ? {
        code: "start_by_accelerometer",
        message: `First motion was found with the accelerometer, which sees what the speed sensor does not, to ± ${half} s.`,
      }
    : {
        code: "start_extrapolated",
        message: `First motion was drawn back from the first speeds, since no accelerometer tells of it: times from rest are uncertain by ± ${half} s for that alone. Compare the times from 0.3048 m, or log an accelerometer at 50 rows a second.`,
      };
}

function addTimesFromRest(
  { result, sensitivityS }: MeasuredSprint,
  { trace, uncertainty, startNoiseMps }: SprintTrace,
  launch: Launch,
  timings: Timings,
): void {
  const { restS } = launch;
  const { scale } = uncertainty;
  const startWayM = Math.hypot(START_WAY_M[launch.by], START_NOISE_S * startNoiseMps);
  const movementS = wayCrossingS(trace, INITIAL_MOVEMENT_M);
  const fall = fallSensitivity(trace);
  const rest = clockStart(launch.restUncertaintyS);
  const add = (name: string, atS: number, end: ReturnType<typeof clockStart>, savedS: number) => {
    result.times_s[name] = atS - restS;
    result.times_uncertainty_s[name] = timeUncertaintyS(rest, end, atS - restS, scale);
    sensitivityS[name] = savedS;
    if (movementS === null || movementS >= atS) return;
    const movement = wayEnd(trace, movementS, INITIAL_MOVEMENT_M, startWayM);
    result.times_s[`${name} ivm`] = atS - movementS;
    result.times_uncertainty_s[`${name} ivm`] = timeUncertaintyS(movement, end, atS - movementS, scale);
    sensitivityS[`${name} ivm`] = savedS - fall.ofWayS(movementS);
  };
  for (const { name, fromMps, toMps } of timings.pairs) {
    const t = fromMps === 0 ? speedCrossingS(trace, toMps) : null;
    if (t !== null) add(name, t, speedEnd(trace, t, uncertainty), fall.ofSpeedS(t));
  }
  for (const { name, wayM } of timings.distances) {
    const t = wayCrossingS(trace, wayM);
    if (t === null) continue;
    add(name, t, wayEnd(trace, t, wayM, startWayM), fall.ofWayS(t));
    const deviation = speedAtWayUncertaintyMps(trace, t, wayM, uncertainty);
    result.speed_at_kmh[name] = traceAt(trace, t, "speedMps") / KMH_MPS;
    result.speed_uncertainty_kmh[name] = deviation / KMH_MPS;
    const trap = trapSpeedMps(trace, wayM);
    if (trap === null) continue;
    const trapNoise = { ...uncertainty, deviationMps: TRAP_NOISE_SHARE * uncertainty.deviationMps };
    result.trap_kmh[name] = trap / KMH_MPS;
    result.trap_uncertainty_kmh[name] = speedAtWayUncertaintyMps(trace, t, wayM, trapNoise) / KMH_MPS;
  }
}
