import { selectGatePlan, selectGatePlanVersions } from "@/db/queries/gate-plans";
import { NotFoundError } from "@/lib/errors";
import { gatesNotIn, startingPlan } from "@/lib/gates/starting-plan";
import type { Ctx } from "@/lib/services/ctx";
import { loadProgramme } from "@/lib/services/programmes/load";

/**
 * A version of a programme's gate plan and the list of all; without a named one the newest, or the starting plan as
 * version 0 where none was saved yet.
 * @throws NotFoundError, ForbiddenError
 */
export async function getGatePlan(ctx: Ctx, programmeId: string, version?: number) {
  const { programme, sheet, plan: newest } = await loadProgramme(ctx, programmeId);
  const place = { workspaceId: ctx.workspaceId, programmeId };
  const start = {
    version: 0,
    plan: startingPlan(sheet.figures),
    createdAt: programme.createdAt,
    createdByName: null,
  };
  const plan =
    version === undefined ? (newest ?? start) : await selectGatePlan(ctx.db, { ...place, version });
  if (!plan)
    throw new NotFoundError("plan_not_found", "This programme has no such version of its gate plan.");
  return {
    programme,
    plan,
    offered: gatesNotIn(plan.plan, sheet.figures),
    newestVersion: newest?.version ?? 0,
    versions: await selectGatePlanVersions(ctx.db, place),
  };
}
