import { type RoadDayRow, updateRoadDay } from "@/db/queries/road-days";
import { ConflictError } from "@/lib/errors";
import { authorise, type Ctx, withTransaction } from "@/lib/services/ctx";
import { appendLedger } from "@/lib/services/ledger/append";
import { loadRoadDayForUpdate } from "@/lib/services/road-days/load";
import { CHECKLIST, type ConfirmChecklist } from "@/lib/services/road-days/schema";

/**
 * Writes down which lines of the safety checklist are confirmed, by whom and when. A line can also be taken back, e.g.
 * when people come to stand beside the road. Lines confirmed before keep their name and time.
 * @throws ForbiddenError; NotFoundError
 */
export async function confirmChecklist(ctx: Ctx, input: ConfirmChecklist): Promise<RoadDayRow> {
  authorise(ctx, "road_day.edit");
  return await withTransaction(ctx, async (tx, inner) => {
    const row = await loadRoadDayForUpdate(tx, inner, input.roadDayId);
    const { seq, at } = await appendLedger(tx, inner, {
      event: "road_day.updated",
      subjectType: "road_day",
      subjectId: row.id,
      programmeId: row.programmeId,
      data: {
        checklist: {
          old: row.checklist.filter((line) => line.confirmed).map((line) => line.item),
          new: input.confirmed,
        },
      },
    });
    const checklist = CHECKLIST.map(({ item }) => {
      const before = row.checklist.find((line) => line.item === item);
      if (!input.confirmed.includes(item)) return { item, confirmed: false };
      if (before?.confirmed) return before;
      return { item, confirmed: true, byName: inner.userName, at: at.toISOString() };
    });
    const { workspaceId } = inner;
    const changed = await updateRoadDay(tx, {
      workspaceId,
      roadDayId: row.id,
      rowVersion: row.rowVersion,
      set: { checklist },
    });
    if (!changed)
      throw new ConflictError("road_day_moved", "The road day has just changed. Try again.", { seq });
    return changed;
  });
}
