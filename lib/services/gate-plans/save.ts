import { insertGatePlan } from "@/db/queries/gate-plans";
import { ConflictError } from "@/lib/errors";
import type { Gate, GatePlan } from "@/lib/gates/plan";
import { changedMembers } from "@/lib/services/changed-members";
import { authorise, type Ctx, withTransaction } from "@/lib/services/ctx";
import { type GatePlanInput, saveGatePlanSchema } from "@/lib/services/gate-plans/schema";
import { appendLedger } from "@/lib/services/ledger/append";
import { loadProgramme } from "@/lib/services/programmes/load";
import { refuseArchived } from "@/lib/services/programmes/refuse-archived";

const byId = (plan: GatePlan | undefined): Record<string, Gate> =>
  Object.fromEntries((plan?.gates ?? []).map((gate) => [gate.id, gate]));

/**
 * Adds a version of the gate plan; it binds revisions that are not in review yet. Saving what is there adds nothing.
 * @param input `basedOnVersion`: the version that the person looked at, 0 where there was none
 * @throws ForbiddenError, NotFoundError; ConflictError when a newer version exists
 */
export async function saveGatePlan(
  ctx: Ctx,
  input: { programmeId: string; basedOnVersion: number; plan: GatePlanInput },
): Promise<{ version: number }> {
  authorise(ctx, "gate_plan.version");
  const { programmeId, basedOnVersion, plan } = saveGatePlanSchema.parse(input);
  const { workspaceId, userId } = ctx;
  return await withTransaction(ctx, async (tx, inner) => {
    const { programme, plan: newest } = await loadProgramme(inner, programmeId);
    refuseArchived(programme);
    const newestVersion = newest?.version ?? 0;
    const changes = changedMembers(byId(newest?.plan), byId(plan));
    const isSame = Object.keys({ ...changes.old, ...changes.new }).length === 0;
    if (newestVersion === basedOnVersion && newest && isSame) return { version: newestVersion };
    const version = newestVersion + 1;
    const isNewest = newestVersion === basedOnVersion;
    if (
      !isNewest ||
      !(await insertGatePlan(tx, { workspaceId, programmeId, version, plan, createdBy: userId }))
    )
      throw new ConflictError(
        "plan_moved",
        "Somebody else saved a newer version of this plan meanwhile. Open the page again to see it, then change it.",
        { newestVersion },
      );
    await appendLedger(tx, inner, {
      event: "plan.versioned",
      subjectType: "programme",
      subjectId: programmeId,
      programmeId,
      data: { version, ...changes },
    });
    return { version };
  });
}
