import { insertRunAnalysis, selectRunForJudging } from "@/db/queries/run-analyses";
import { lockRun, setRunState } from "@/db/queries/runs";
import { selectVehicleSheet } from "@/db/queries/vehicle-sheets";
import { digestOf } from "@/lib/canonical-json";
import { FileRefusedError } from "@/lib/errors";
import type { System } from "@/lib/jobs/system";
import { logger } from "@/lib/logger";
import { type ChannelKey, type LogTable, MOST_REFUSED_LISTED } from "@/lib/logs/types";
import { analyseRun } from "@/lib/measure/analyse-campaign";
import { ANALYSIS_VERSION } from "@/lib/measure/analysis-version";
import { runTraces } from "@/lib/measure/run/run-traces";
import type { RunTraces } from "@/lib/measure/run/traces";
import { toTimingSettings } from "@/lib/measure/sprint/sheet-timings";
import type { CampaignRun, CampaignSettings, CampaignVehicle, RunResult } from "@/lib/measure/types";
import { toCampaignVehicle } from "@/lib/measure/vehicle/vehicle-sheet";
import { refreshResultsOf } from "@/lib/services/comparisons/refresh";
import { STANDARD_SETTINGS, toCampaignSettings } from "@/lib/services/comparisons/schema";
import { readStoredLog } from "@/lib/services/runs/read-stored-log";

interface JudgeJob {
  workspaceId: string;
  runId: string;
}

type Found = NonNullable<Awaited<ReturnType<typeof selectRunForJudging>>>;

/** Everything that a verdict rests on: the same input gives the same verdict, to the last digit. */
interface JudgeInput {
  analysisVersion: string;
  sheetVersion: number;
  logSha256: string;
  /** Absent where the log is read by what it says alone. */
  channelKey?: { id: string; key: ChannelKey };
  vehicle: CampaignVehicle;
  run: CampaignRun;
  settings: CampaignSettings;
}

const SETTINGS = toCampaignSettings(STANDARD_SETTINGS);

async function readInput(
  db: System["db"],
  job: JudgeJob,
): Promise<{ found: Found; input: JudgeInput; inputSha256: string } | null> {
  const { workspaceId } = job;
  const found = await selectRunForJudging(db, job);
  if (!found) return null;
  const { run, massKg, channelKey } = found;
  const sheet = await selectVehicleSheet(db, { workspaceId, programmeId: run.programmeId });
  if (!sheet) return null;
  const input: JudgeInput = {
    analysisVersion: ANALYSIS_VERSION,
    sheetVersion: sheet.version,
    logSha256: run.logSha256,
    ...(run.channelKeyId !== null && channelKey && { channelKey: { id: run.channelKeyId, key: channelKey } }),
    vehicle: toCampaignVehicle(sheet.figures, massKg),
    run: {
      id: String(run.number),
      file: run.logFileName,
      kind: run.kind,
      leg: run.leg,
      order: run.driveOrder,
      gear: run.gear,
      started_at: run.startedAt?.toISOString() ?? null,
      weather: { temp_c: run.tempC, pressure_hpa: run.pressureHpa, rh_pct: run.humidityPct },
    },
    settings: { ...SETTINGS, ...toTimingSettings(sheet.figures.timings) },
  };
  return { found, input, inputSha256: digestOf(input) };
}

/** What the run page shows of the rows that the run goes on without. */
function refusedRowsOf({ rowsRefused }: LogTable): Pick<RunTraces, "refusedRows"> {
  const total = rowsRefused.length;
  if (total === 0) return {};
  return { refusedRows: { total, atLeast: total >= MOST_REFUSED_LISTED, first: rowsRefused.slice(0, 5) } };
}

/** Analyses a log. One that is refused is a verdict, not an error. */
function judge(
  input: JudgeInput,
  log: LogTable | FileRefusedError,
): { result: RunResult; traces: RunTraces | null } {
  const result = analyseRun(input.vehicle, input.run, log, input.settings);
  if (log instanceof FileRefusedError) return { result, traces: null };
  return { result, traces: { ...runTraces(log, result), ...refusedRowsOf(log) } };
}

/** Keeps the verdict, unless the run or the sheet has changed meanwhile: then a later job brings the one that counts. */
async function keep(
  { db }: System,
  job: JudgeJob,
  args: { input: JudgeInput; inputSha256: string; result: RunResult; traces: RunTraces | null },
): Promise<void> {
  const { workspaceId, runId } = job;
  const { input, inputSha256, result, traces } = args;
  await db.transaction(async (tx) => {
    const run = await lockRun(tx, job);
    if (!run) return;
    const { analysisVersion, sheetVersion } = input;
    await insertRunAnalysis(tx, {
      runId,
      workspaceId,
      inputSha256,
      analysisVersion,
      sheetVersion,
      result,
      traces,
    });
    await setRunState(tx, { ...job, state: result.usable ? "usable" : "refused" });
    await refreshResultsOf(tx, { workspaceId }, { revisionId: run.revisionId });
  });
}

/**
 * Gives a run its verdict with the newest vehicle sheet, and has the comparisons of its revision computed anew.
 * May run any number of times.
 * @throws what kept the log from being read from the store; the queue tries again
 */
export async function judgeRun(system: System, job: JudgeJob): Promise<void> {
  const read = await readInput(system.db, job);
  if (!read) return;
  const { found, input, inputSha256 } = read;
  const log = await readStoredLog(
    { store: system.store, workspaceId: job.workspaceId },
    { sha256: input.logSha256, sizeBytes: found.run.logBytes },
    { fileName: input.run.file, drive: input.vehicle.drive, key: input.channelKey?.key },
  );
  const verdict = judge(input, log);
  await keep(system, job, { input, inputSha256, ...verdict });
  const { usable, reasons } = verdict.result;
  logger().info({ event: "run.judged", ...job, usable, reasons: reasons.map((reason) => reason.code) });
}

/** The last try failed too: the run gets a verdict that says so, so that nobody waits for ever. */
export async function giveUpJudging(system: System, job: JudgeJob): Promise<void> {
  const read = await readInput(system.db, job);
  if (!read) return;
  const result: RunResult = {
    id: read.input.run.id,
    usable: false,
    reasons: [
      {
        code: "analysis_fault",
        message: `The analysis of ${read.input.run.file} failed on our side, five times over. The log is kept as it came.`,
      },
    ],
    notes: [],
  };
  // A digest of its own: a later verdict on the same input is then not mistaken for a repeat.
  const inputSha256 = digestOf({ fault: read.inputSha256 });
  await system.db.transaction(async (tx) => {
    const run = await lockRun(tx, job);
    if (run?.state !== "waiting") return;
    const { analysisVersion, sheetVersion } = read.input;
    await insertRunAnalysis(tx, { ...job, inputSha256, analysisVersion, sheetVersion, result, traces: null });
    await setRunState(tx, { ...job, state: "refused" });
  });
}
