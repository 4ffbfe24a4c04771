import type { Transaction } from "@/db/client";
import { lockRoadDay, type RoadDayRow, selectRoadDay } from "@/db/queries/road-days";
import { NotFoundError } from "@/lib/errors";
import type { Ctx } from "@/lib/services/ctx";

const noRoadDay = () => new NotFoundError("no_road_day", "There is no such road day here.");

/** @throws NotFoundError for another workspace's */
export async function loadRoadDay(ctx: Ctx, roadDayId: string): Promise<RoadDayRow> {
  const row = await selectRoadDay(ctx.db, { workspaceId: ctx.workspaceId, roadDayId });
  if (!row) throw noRoadDay();
  return row;
}

/** As loadRoadDay, locked. */
export async function loadRoadDayForUpdate(
  tx: Transaction,
  ctx: Ctx,
  roadDayId: string,
): Promise<RoadDayRow> {
  const row = await lockRoadDay(tx, { workspaceId: ctx.workspaceId, roadDayId });
  if (!row) throw noRoadDay();
  return row;
}
