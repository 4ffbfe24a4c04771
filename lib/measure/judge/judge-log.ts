import type { LogTable } from "@/lib/logs/types";
import { brakedSpans } from "@/lib/measure/judge/braking";
import { faultNotes } from "@/lib/measure/judge/fault-notes";
import { gearingNotes } from "@/lib/measure/judge/gearing";
import { liftNotes } from "@/lib/measure/judge/lift";
import { clockNotes } from "@/lib/measure/judge/road-signs";
import { gapNotes, repeatNotes, samplingNotes } from "@/lib/measure/judge/sampling";
import { agreementNotes, type SpeedAgreement } from "@/lib/measure/judge/speed-agreement";
import { weatherNotes } from "@/lib/measure/judge/weather";
import { fixed } from "@/lib/measure/judge/words";
import type { Segments } from "@/lib/measure/run/find-segments";
import type { RunSignals } from "@/lib/measure/run/run-signals";
import type { CampaignRun, CampaignVehicle, Note } from "@/lib/measure/types";

/** Below 70 °C friction and fuelling are not those of a warm engine [common practice, no source]. */
const WARM_C = 70;

/** A brake is told once the car has rolled for so long, s. */
const ROLLING_FIRST_S = 2.5;

/** One log with what was found in it. */
export interface JudgedLog {
  run: CampaignRun;
  vehicle: CampaignVehicle;
  table: LogTable;
  signals: RunSignals;
  /** Null for a sprint. */
  segments: Segments | null;
  agreement: SpeedAgreement | null;
}

/** Everything that one log tells against itself, in the order in which a foreman would ask. */
export function judgeLog({ run, vehicle, table, signals, segments, agreement }: JudgedLog): Note[] {
  const notes = [
    ...faultNotes(signals, segments),
    ...samplingNotes(table, signals),
    ...agreementNotes(agreement),
    ...clockNotes(signals),
  ];
  if (segments) {
    notes.push(
      ...gapNotes(table, segments),
      ...repeatNotes(signals, segments),
      ...(run.kind === "pull" ? pullNotes(table, signals, segments, run, vehicle) : []),
      ...brakedNotes(signals, segments),
      ...weatherNotes(table, run.weather),
    );
  }
  return [...notes, ...readerNotes(table, notes)];
}

function pullNotes(
  table: LogTable,
  signals: RunSignals,
  segments: Segments,
  run: CampaignRun,
  vehicle: CampaignVehicle,
): Note[] {
  const notes = liftNotes(signals, segments);
  if (segments.gearChange) {
    notes.push({
      code: "gear_change",
      consequence: "masked",
      ...segments.gearChange,
      message:
        "The gear changes within the full-load part; only the longest part in one gear is used. Stay in one gear to the red line.",
    });
  }
  notes.push(...gearingNotes(signals, segments, run, vehicle));
  const { pull } = segments;
  const coolant = table.channels.find((c) => c.channel === "coolant_temperature");
  if (!pull || !coolant) return notes;
  const warm = coolant.values[table.timeS.findIndex((t) => t >= pull.from_s)];
  if (warm < WARM_C) {
    notes.push({
      code: "engine_cold",
      consequence: "warned",
      message: `The coolant is at ${fixed(warm, 0)} °C when the pull starts; a cold engine gives other torque. Warm up before the runs.`,
    });
  }
  return notes;
}

/**
 * The braked parts between the pull and the end of the last piece of coast-down: cut out, so that the good parts count. What slows
 * the car right after the pull is the engine before the gear goes out, and no finding.
 */
function brakedNotes({ timeS, speedRows }: RunSignals, { pull, coasts }: Segments): Note[] {
  const first = coasts[0];
  const last = coasts[coasts.length - 1];
  if (!first || !last) return [];
  const begin = pull && pull.to_s < first.from_s ? pull.to_s + 1 : first.from_s;
  const spans = brakedSpans(timeS, speedRows, { from_s: begin, to_s: last.to_s });
  return spans
    .filter((span) => span.from_s > begin + ROLLING_FIRST_S)
    .map((span) => ({
      code: "braked_coast",
      consequence: "masked",
      ...span,
      message: `Something other than the road slows the car for ${fixed(span.to_s - span.from_s, 1)} s of the coast-down: the brake, or an engine in gear. That part is cut out. Let the car roll in neutral, feet off.`,
    }));
}

/** What the log reader had to say, as warnings; its general word on gaps only where no gap was told by itself. */
export function readerNotes(table: LogTable, told: readonly Note[]): Note[] {
  const gapsTold = told.filter((note) => note.code === "gap").length === table.time.gaps.length;
  return table.problems
    .filter(({ code }) => code !== "gaps" || !gapsTold)
    .map(({ code, message }) => ({ code, message, consequence: "warned" }));
}
