import { selectNewestRoadDay } from "@/db/queries/road-days";
import { MOST_TWINS, proposeOrder } from "@/lib/compare/plan/order-card";
import { cardCost } from "@/lib/compare/plan/plan-cost";
import { shownBy, twinsFor, twinsForInterval } from "@/lib/compare/plan/plan-twins";
import { can } from "@/lib/policy/can";
import { authorise, type Ctx } from "@/lib/services/ctx";
import { planBasis, poolDays, scatterHistory } from "@/lib/services/plans/history";
import {
  type PlanRow,
  type PlanView,
  type RepeatabilityView,
  readPlanQuery,
  type StripScatter,
} from "@/lib/services/plans/schema";
import { loadProgramme } from "@/lib/services/programmes/load";

/** Twins a side that the table lists. */
const LISTED = [2, 3, 4, 5, 6, 7, 8];

/**
 * The plan before driving: how many twins a side show a difference, from the programme's own scatter.
 * @throws NotFoundError for another workspace's; ForbiddenError
 */
export async function getPlan(
  ctx: Ctx,
  programmeId: string,
  raw: Record<string, string | string[] | undefined>,
): Promise<PlanView> {
  authorise(ctx, "plan.view");
  const { programme } = await loadProgramme(ctx, programmeId);
  const place = { workspaceId: ctx.workspaceId, programmeId };
  const last = await selectNewestRoadDay(ctx.db, place);
  const history = await scatterHistory(ctx.db, place);
  const query = readPlanQuery(raw, last?.stripLengthM ?? null);
  const basis = planBasis(history);
  const needed = twinsFor(query.wantedPct, basis);
  const rowOf = (twins: number): PlanRow => ({
    ...shownBy(twins, basis),
    cost: cardCost(proposeOrder({ twinsPerSide: twins }), query.drive),
  });
  const twins = query.twins ?? needed.curve ?? needed.range ?? MOST_TWINS;
  return {
    programme: { id: programme.id, name: programme.name },
    query,
    basis,
    days: history.days.filter((day) => (day.figures?.df ?? 0) > 0).length,
    needed,
    neededBetween: twinsForInterval(query.wantedPct, basis),
    rows: LISTED.map(rowOf),
    chosen: rowOf(twins),
    card: proposeOrder({ twinsPerSide: twins }),
    mayOpenRoadDay: programme.archivedAt
      ? { ok: false, reason: "This programme is archived." }
      : can(ctx, "road_day.edit"),
  };
}

/**
 * A workshop's own scatter over time, strip by strip, the strip driven last first.
 * @throws NotFoundError for another workspace's; ForbiddenError
 */
export async function getRepeatability(ctx: Ctx, programmeId: string): Promise<RepeatabilityView> {
  authorise(ctx, "plan.view");
  const { programme } = await loadProgramme(ctx, programmeId);
  const { days } = await scatterHistory(ctx.db, { workspaceId: ctx.workspaceId, programmeId });
  const names = [...new Set([...days].reverse().map((day) => day.stripName))];
  const strips = names.map((stripName): StripScatter => {
    const own = days.filter((day) => day.stripName === stripName);
    const [point, range] = [poolDays(own, "sd_point_pct"), poolDays(own, "sd_range_pct")];
    return { stripName, days: own, point, range };
  });
  return { programme: { id: programme.id, name: programme.name }, strips };
}
