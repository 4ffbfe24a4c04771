import { selectGatePlan } from "@/db/queries/gate-plans";
import { isShared, type ProgrammeRow, selectProgramme } from "@/db/queries/programmes";
import { selectVehicleSheet } from "@/db/queries/vehicle-sheets";
import { NotFoundError } from "@/lib/errors";
import type { GatePlan } from "@/lib/gates/plan";
import type { VehicleSheetFigures } from "@/lib/measure/vehicle/vehicle-sheet";
import { authorise, type Ctx } from "@/lib/services/ctx";

interface Version {
  version: number;
  createdAt: Date;
  createdByName: string | null;
}

export interface LoadedProgramme {
  programme: ProgrammeRow;
  /** Newest vehicle sheet. */
  sheet: Version & { figures: VehicleSheetFigures };
  /** Newest gate plan. */
  plan: (Version & { plan: GatePlan }) | null;
  /** The fact `granted` of the policy: shared with this person today. */
  granted: boolean;
}

/**
 * A programme of the asker's workspace with its newest vehicle sheet and gate plan.
 * @throws NotFoundError for an unknown id and for one of another workspace; ForbiddenError for a reader without a share
 */
export async function loadProgramme(ctx: Ctx, programmeId: string): Promise<LoadedProgramme> {
  const place = { workspaceId: ctx.workspaceId, programmeId };
  const programme = await selectProgramme(ctx.db, place);
  if (!programme) throw new NotFoundError("programme_not_found", "There is no such programme here.");
  const granted = await isShared(ctx.db, { ...place, userId: ctx.userId });
  authorise(ctx, "programme.view", { granted });
  const sheet = await selectVehicleSheet(ctx.db, place);
  if (!sheet) throw new NotFoundError("vehicle_sheet_missing", "This programme has no vehicle sheet yet.");
  return { programme, sheet, plan: await selectGatePlan(ctx.db, place), granted };
}
