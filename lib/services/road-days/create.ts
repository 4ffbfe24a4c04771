import { insertRoadDay, type RoadDayRow } from "@/db/queries/road-days";
import { authorise, type Ctx, withTransaction } from "@/lib/services/ctx";
import { appendLedger } from "@/lib/services/ledger/append";
import { loadProgramme } from "@/lib/services/programmes/load";
import { refuseArchived } from "@/lib/services/programmes/refuse-archived";
import type { NewRoadDay } from "@/lib/services/road-days/schema";

/**
 * Opens a road day with nothing of its checklist confirmed: that is done at the road side.
 * @throws ForbiddenError; NotFoundError; ConflictError `programme_archived`
 */
export async function createRoadDay(ctx: Ctx, input: NewRoadDay & { sample?: boolean }): Promise<RoadDayRow> {
  authorise(ctx, "road_day.edit");
  return await withTransaction(ctx, async (tx, inner) => {
    const { programme } = await loadProgramme(inner, input.programmeId);
    refuseArchived(programme);
    const { workspaceId, userId } = inner;
    const row = await insertRoadDay(tx, { ...input, workspaceId, createdBy: userId, checklist: [] });
    const { programmeId, sample: _sample, ...figures } = input;
    await appendLedger(tx, inner, {
      event: "road_day.created",
      subjectType: "road_day",
      subjectId: row.id,
      programmeId,
      data: { new: figures },
    });
    return row;
  });
}
