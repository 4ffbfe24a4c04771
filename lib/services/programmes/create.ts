import { insertGatePlan } from "@/db/queries/gate-plans";
import { insertProgramme } from "@/db/queries/programmes";
import { insertVehicleSheet } from "@/db/queries/vehicle-sheets";
import { selectWorkspace } from "@/db/queries/workspaces";
import { startingPlan } from "@/lib/gates/starting-plan";
import { authorise, type Ctx, withTransaction } from "@/lib/services/ctx";
import { appendLedger } from "@/lib/services/ledger/append";
import { type NewProgrammeInput, newProgrammeSchema } from "@/lib/services/programmes/schema";

/**
 * Makes a programme with vehicle sheet version 1 and the starting gate plan as version 1.
 * @throws ForbiddenError
 */
export async function createProgramme(ctx: Ctx, input: NewProgrammeInput): Promise<{ programmeId: string }> {
  authorise(ctx, "programme.edit");
  const { name, goal, sheet } = newProgrammeSchema.parse(input);
  const { workspaceId, userId } = ctx;
  return await withTransaction(ctx, async (tx, inner) => {
    const workspace = await selectWorkspace(tx, { workspaceId });
    const sample = workspace?.sample ?? false;
    const programmeId = await insertProgramme(tx, { workspaceId, name, goal, createdBy: userId, sample });
    const first = { workspaceId, programmeId, version: 1, createdBy: userId };
    await insertVehicleSheet(tx, { ...first, figures: sheet });
    await insertGatePlan(tx, { ...first, plan: startingPlan(sheet) });
    await appendLedger(tx, inner, {
      event: "programme.created",
      subjectType: "programme",
      subjectId: programmeId,
      programmeId,
      data: { name, goal, vehicle: sheet.label, sheetVersion: 1, gatePlanVersion: 1 },
    });
    return { programmeId };
  });
}
