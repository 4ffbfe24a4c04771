import { FileRefusedError } from "@/lib/errors";
import { requireRoadSpeed } from "@/lib/logs/channels/road-speed";
import { heldOnRows } from "@/lib/logs/times/held-on-rows";
import type { LogTable } from "@/lib/logs/types";
import { judgeLog, readerNotes } from "@/lib/measure/judge/judge-log";
import { believableRoad } from "@/lib/measure/judge/road-signs";
import { bestSpeedRateHz, isFastEnough } from "@/lib/measure/judge/sampling";
import {
  implausibleSpeed,
  type SpeedAgreement,
  speedAgreement,
  speedContradiction,
} from "@/lib/measure/judge/speed-agreement";
import { fixed } from "@/lib/measure/judge/words";
import { findSegments, type Segments } from "@/lib/measure/run/find-segments";
import { type RunSignals, runSignals } from "@/lib/measure/run/run-signals";
import type { CampaignRun, CampaignVehicle, Note, Reason } from "@/lib/measure/types";
import { rpmPerMps } from "@/lib/measure/vehicle/vehicle";

/** Below this rate an acceleration over half a second is guesswork (campaign.md start value). */
const LEAST_RATE_HZ = 5;
/** Jitter of time stamps must not turn 5 rows a second into a refusal. */
const RATE_TOLERANCE = 0.95;

/** A log after its first look: what it holds, or why it is refused. */
export interface PreparedRun {
  run: CampaignRun;
  table: LogTable | null;
  signals: RunSignals | null;
  segments: Segments | null;
  reasons: Note[];
  notes: Note[];
  /** How its wheel and GPS speeds go together; null where either is absent. */
  agreement: SpeedAgreement | null;
}

/** First look at one log: road speed, rate, segments. Never throws: a refusal is a reason. */
export function prepareRun(
  run: CampaignRun,
  vehicle: CampaignVehicle,
  log: LogTable | FileRefusedError | undefined,
): PreparedRun {
  const refused = (code: string, message: string): PreparedRun => ({
    run,
    table: null,
    signals: null,
    segments: null,
    reasons: [{ code, message }],
    notes: [],
    agreement: null,
  });
  if (log === undefined)
    return refused("log_missing", `There is no log for run ${run.id}. Add the file, or set the run aside.`);
  if (log instanceof FileRefusedError) return refused(log.code, log.message);
  try {
    requireRoadSpeed(log);
  } catch (error) {
    if (error instanceof FileRefusedError) return refused(error.code, error.message);
    throw error;
  }
  const { signals, notes: road } = believableRoad(runSignals(log));
  const agreement = speedAgreement(signals);
  const why = tooSlow(signals) ?? implausibleSpeed(signals) ?? speedContradiction(agreement);
  if (why) return { ...refused(why.code, why.message), notes: readerNotes(log, []) };
  const table = heldOnRows(log);
  const seen = { run, vehicle, table, signals, agreement };
  if (run.kind === "sprint") {
    const notes = judgeLog({ ...seen, segments: null });
    return { run, table, signals, segments: null, reasons: [], notes, agreement };
  }
  const stated = rpmPerMps(vehicle, run.gear)?.value ?? null;
  if (!signals.engineSpeed && stated === null) {
    return refused(
      "engine_speed_not_known",
      "The log has no engine speed and the vehicle sheet does not tell it from road speed. Log engine speed, or state a speed read off at an engine speed.",
    );
  }
  const segments = findSegments(signals, vehicle, stated);
  const reasons: Note[] = [];
  if (run.kind === "pull" && segments.reason) reasons.push(segments.reason);
  if (run.kind === "coast-down" && !segments.coast) {
    reasons.push({
      code: "no_coast_found",
      message:
        "The log has no neutral coast-down over 5 km/h or more. Put the gear out and let the car roll without the brake.",
    });
  }
  const notes = [...judgeLog({ ...seen, segments }), ...road];
  return { run, table, signals, segments, reasons, notes, agreement };
}

function tooSlow(signals: RunSignals): Reason | null {
  if (!(signals.rateHz >= RATE_TOLERANCE * LEAST_RATE_HZ)) {
    return {
      code: "rate_too_low",
      message: `The log has ${fixed(signals.rateHz, 1)} rows a second; at least ${LEAST_RATE_HZ} are needed. Log faster.`,
    };
  }
  if (isFastEnough(signals)) return null;
  return {
    code: "rate_too_low",
    message: `No speed channel brings more than ${fixed(bestSpeedRateHz(signals), 1)} new values a second; at least ${LEAST_RATE_HZ} are needed. Log a speed faster.`,
  };
}
