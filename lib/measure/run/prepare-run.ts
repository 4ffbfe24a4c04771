import { FileRefusedError } from "@/lib/errors";
import { requireRoadSpeed } from "@/lib/logs/road-speed";
import type { LogTable } from "@/lib/logs/types";
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
  reasons: Reason[];
  notes: Note[];
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
  const signals = runSignals(log);
  if (!(signals.rateHz >= RATE_TOLERANCE * LEAST_RATE_HZ)) {
    return refused(
      "rate_too_low",
      `The log has ${signals.rateHz.toFixed(1)} rows a second; at least ${LEAST_RATE_HZ} are needed. Log faster.`,
    );
  }
  if (run.kind === "sprint") return { run, table: log, signals, segments: null, reasons: [], notes: [] };
  const stated = rpmPerMps(vehicle, run.gear)?.value ?? null;
  if (!signals.engineSpeed && stated === null) {
    return refused(
      "engine_speed_not_known",
      "The log has no engine speed and the vehicle sheet does not tell it from road speed. Log engine speed, or state a speed read off at an engine speed.",
    );
  }
  const segments = findSegments(signals, vehicle, stated);
  const reasons: Reason[] = [];
  if (run.kind === "pull" && segments.reason) reasons.push(segments.reason);
  if (run.kind === "coast-down" && !segments.coast) {
    reasons.push({
      code: "no_coast_found",
      message:
        "The log has no neutral coast-down over 20 km/h or more. Put the gear out and let the car roll.",
    });
  }
  return { run, table: log, signals, segments, reasons, notes: firstNotes(log, segments) };
}

function firstNotes(log: LogTable, segments: Segments): Note[] {
  const notes: Note[] = [];
  const { pull } = segments;
  if (segments.gearChange) {
    notes.push({
      code: "gear_change",
      message: "The gear changes within the full-load part; only the longest part in one gear is used.",
    });
  }
  for (const gap of log.time.gaps) {
    if (pull && gap.toS > pull.from_s && gap.fromS < pull.to_s) {
      notes.push({
        code: "gap",
        from_s: gap.fromS,
        to_s: gap.toS,
        message: `The recording has a gap of ${(gap.toS - gap.fromS).toFixed(2)} s inside the pull; the engine speeds in it are left out.`,
      });
    }
  }
  const coolant = log.channels.find((c) => c.channel === "coolant_temperature");
  if (pull && coolant) {
    const row = log.timeS.findIndex((t) => t >= pull.from_s);
    const warm = coolant.values[row];
    // Below 70 °C friction and fuelling are not those of a warm engine [common practice, no source].
    if (warm < 70) {
      notes.push({
        code: "engine_cold",
        message: `The coolant is at ${warm.toFixed(0)} °C when the pull starts; a cold engine gives other torque. Warm up before the runs.`,
      });
    }
  }
  return notes;
}
