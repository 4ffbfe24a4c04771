import type { Queryable } from "@/db/client";
import {
  type ComparedRun,
  type ComparisonRow,
  type Sides,
  selectComparedRuns,
} from "@/db/queries/comparisons";
import { selectVehicleSheet } from "@/db/queries/vehicle-sheets";
import type { ComparisonInput } from "@/db/schema/comparisons";
import { canonicalJson, digestOf } from "@/lib/canonical-json";
import { NotFoundError } from "@/lib/errors";
import { ANALYSIS_VERSION } from "@/lib/measure/analysis-version";
import type { VehicleSheetFigures } from "@/lib/measure/vehicle/vehicle-sheet";

/** What counts for a comparison at this moment, with the rows it was read from. */
export interface CurrentInput {
  input: ComparisonInput;
  /** SHA-256 of the canonical JSON of `input`: a result with another one is stale. */
  inputSha256: string;
  sheet: VehicleSheetFigures;
  /** Every run of both revisions in the order driven, also those that do not count; `order` counts on over the road days. */
  runs: CurrentRun[];
}

export interface CurrentRun extends ComparedRun {
  side: "A" | "B";
  order: number;
  counts: boolean;
}

/** The typed facts of a run that enter the computation beside its log; the keys are the words of `whatMoved`. */
function runFields(run: ComparedRun): Record<string, unknown> {
  return {
    gear: run.gear,
    started: run.startedAt?.toISOString() ?? null,
    temperature: run.tempC,
    pressure: run.pressureHpa,
    humidity: run.humidityPct,
    mass: run.massKg,
    // Left out where there is none, so that inputs from before there were keys keep their digests.
    ...(run.channelKeyId !== null && { "channel key": run.channelKeyId }),
  };
}

/**
 * Places of the runs on one count over all road days: a later day goes on where the earlier one ended, so that
 * drift is counted per run driven, also past runs that are not compared.
 * @param runs sorted by road day and place in its driven order
 */
function withOrder<T extends ComparedRun>(runs: readonly T[]): (T & { order: number })[] {
  let offset = 0;
  let last = 0;
  let roadDayId: string | null = null;
  return runs.map((run) => {
    if (run.roadDayId !== roadDayId) {
      offset += last;
      roadDayId = run.roadDayId;
    }
    last = run.driveOrder;
    return { ...run, order: offset + run.driveOrder };
  });
}

/**
 * A road day on which only one side was driven can't tell the change from the day, so its runs do not count as long as
 * there is a day with both sides. Where there is none, all runs count and the gates say what that is worth.
 */
function withCounts(runs: readonly Omit<CurrentRun, "counts">[]): CurrentRun[] {
  const kept = runs.filter((run) => run.setAsideAt === null);
  const daysOf = (side: "A" | "B") =>
    new Set(kept.filter((run) => run.side === side).map((run) => run.roadDayId));
  const daysOfB = daysOf("B");
  const shared = new Set([...daysOf("A")].filter((day) => daysOfB.has(day)));
  return runs.map((run) => ({
    ...run,
    counts: run.setAsideAt === null && (shared.size === 0 || shared.has(run.roadDayId)),
  }));
}

/**
 * Reads the exact runs that count now: those of both revisions that are not set aside, on the road days with both sides,
 * or on all of them where no day has both.
 * Call it inside the transaction that relies on it.
 * @throws NotFoundError when the programme has no vehicle sheet
 */
export async function currentInput(
  db: Queryable,
  comparison: Sides & Pick<ComparisonRow, "programmeId" | "settings">,
): Promise<CurrentInput> {
  const { workspaceId, programmeId, revisionAId, nullTestRoadDayId, settings } = comparison;
  const sheet = await selectVehicleSheet(db, { workspaceId, programmeId });
  if (!sheet)
    throw new NotFoundError("no_vehicle_sheet", "This programme has no vehicle sheet. Write one first.");
  const rows = await selectComparedRuns(db, comparison);
  const sideOf = (run: ComparedRun): "A" | "B" => {
    // Both letters of a null test are one image, so only the order card tells them apart.
    if (nullTestRoadDayId !== null) return run.letter ?? "A";
    return run.revisionId === revisionAId ? "A" : "B";
  };
  const runs = withCounts(withOrder(rows).map((run) => ({ ...run, side: sideOf(run) })));
  const input: ComparisonInput = {
    analysisVersion: ANALYSIS_VERSION,
    sheetVersion: sheet.version,
    settings,
    runs: runs
      .filter((run) => run.counts)
      .map((run) => ({
        runId: run.id,
        number: run.number,
        side: run.side,
        logSha256: run.logSha256,
        leg: run.leg,
        order: run.order,
        kind: run.kind,
        roadDayId: run.roadDayId,
        fields: canonicalJson(runFields(run)),
      })),
  };
  return { input, inputSha256: digestOf(input), sheet: sheet.figures, runs };
}
