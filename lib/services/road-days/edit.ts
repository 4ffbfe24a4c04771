import { type RoadDayRow, updateRoadDay } from "@/db/queries/road-days";
import { selectRunIds, updateWeatherOfRuns } from "@/db/queries/runs";
import { ConflictError } from "@/lib/errors";
import { refreshResultsOf } from "@/lib/services/comparisons/refresh";
import { authorise, type Ctx, withTransaction } from "@/lib/services/ctx";
import { appendLedger } from "@/lib/services/ledger/append";
import { loadRoadDayForUpdate } from "@/lib/services/road-days/load";
import type { EditRoadDay } from "@/lib/services/road-days/schema";
import { judgeRunsAgain } from "@/lib/services/runs/judge-again";
import { refuseCited } from "@/lib/services/runs/refuse-cited";

type Figures = Omit<EditRoadDay, "roadDayId" | "rowVersion">;

/** Figures that enter the computation of the day's runs. */
const COMPUTED_WITH = ["tempC", "pressureHpa", "humidityPct", "massKg"] as const;

function differences(row: RoadDayRow, figures: Figures) {
  const fields = (Object.keys(figures) as (keyof Figures)[]).filter((key) => figures[key] !== row[key]);
  const pick = (from: Figures | RoadDayRow) => Object.fromEntries(fields.map((key) => [key, from[key]]));
  return { fields, old: pick(row), new: pick(figures) };
}

/**
 * Corrects a road day. Weather and mass count in the computation: runs that took the old weather over get the new one and
 * are judged again, and comparisons follow. Once a decision other than a hold rests on a run of the day, those figures stay.
 * @throws ForbiddenError; NotFoundError; ConflictError `road_day_moved` with what it holds now, `run_cited`
 */
export async function editRoadDay(ctx: Ctx, input: EditRoadDay): Promise<RoadDayRow> {
  authorise(ctx, "road_day.edit");
  const { roadDayId, rowVersion, ...figures } = input;
  return await withTransaction(ctx, async (tx, inner) => {
    const { workspaceId } = inner;
    const row = await loadRoadDayForUpdate(tx, inner, roadDayId);
    const { programmeId } = row;
    const changes = differences(row, figures);
    if (row.rowVersion !== rowVersion) {
      throw new ConflictError(
        "road_day_moved",
        "Somebody changed this road day after you opened it. Look at what it holds now and enter your change again.",
        { now: changes.old },
      );
    }
    if (changes.fields.length === 0) return row;
    if (COMPUTED_WITH.some((field) => changes.fields.includes(field))) {
      const affected = await selectRunIds(tx, { workspaceId, programmeId, roadDayId, lock: true });
      const ids = affected.map((run) => run.id);
      await refuseCited(tx, inner, "A run of this road day", ids);
      const weather = ({ tempC, pressureHpa, humidityPct }: Figures | RoadDayRow) => ({
        tempC,
        pressureHpa,
        humidityPct,
      });
      await updateWeatherOfRuns(tx, { workspaceId, roadDayId, old: weather(row), new: weather(figures) });
      await judgeRunsAgain(tx, inner, { programmeId, roadDayId });
      for (const revisionId of new Set(affected.map((run) => run.revisionId)))
        await refreshResultsOf(tx, inner, { revisionId });
    }
    const changed = await updateRoadDay(tx, { workspaceId, roadDayId, rowVersion, set: figures });
    if (!changed) throw new ConflictError("road_day_moved", "The road day has just changed. Try again.");
    await appendLedger(tx, inner, {
      event: "road_day.updated",
      subjectType: "road_day",
      subjectId: roadDayId,
      programmeId,
      data: { old: changes.old, new: changes.new },
    });
    return changed;
  });
}
