import { selectLineage } from "@/db/queries/programme-overview";
import { insertVehicleSheet } from "@/db/queries/vehicle-sheets";
import { ConflictError } from "@/lib/errors";
import { changedMembers } from "@/lib/services/changed-members";
import { refreshResultsOf } from "@/lib/services/comparisons/refresh";
import { authorise, type Ctx, withTransaction } from "@/lib/services/ctx";
import { appendLedger } from "@/lib/services/ledger/append";
import { loadProgramme } from "@/lib/services/programmes/load";
import { refuseArchived } from "@/lib/services/programmes/refuse-archived";
import { judgeRunsAgain } from "@/lib/services/runs/judge-again";
import { saveVehicleSheetSchema, type VehicleSheetInput } from "@/lib/services/vehicle-sheets/schema";

/**
 * Adds a version of the vehicle sheet; the old ones stay, and runs are judged and comparisons computed anew with the new one.
 * Saving what is already there adds nothing.
 * @param input `basedOnVersion`: the version that the person looked at
 * @throws ForbiddenError, NotFoundError; ConflictError when a newer version exists
 */
export async function saveVehicleSheet(
  ctx: Ctx,
  input: { programmeId: string; basedOnVersion: number; figures: VehicleSheetInput },
): Promise<{ version: number }> {
  authorise(ctx, "vehicle.version");
  const { programmeId, basedOnVersion, figures } = saveVehicleSheetSchema.parse(input);
  const { workspaceId, userId } = ctx;
  return await withTransaction(ctx, async (tx, inner) => {
    const { programme, sheet } = await loadProgramme(inner, programmeId);
    refuseArchived(programme);
    const version = sheet.version + 1;
    const changes = changedMembers(sheet.figures, figures);
    if (sheet.version === basedOnVersion && Object.keys(changes.new).length === 0)
      return { version: sheet.version };
    const isNewest = sheet.version === basedOnVersion;
    if (
      !isNewest ||
      !(await insertVehicleSheet(tx, { workspaceId, programmeId, version, figures, createdBy: userId }))
    )
      throw new ConflictError(
        "sheet_moved",
        "Somebody else saved a newer version of this sheet meanwhile. Open the page again to see it, then change it.",
        { newestVersion: sheet.version },
      );
    await judgeRunsAgain(tx, inner, { programmeId });
    const lineage = await selectLineage(tx, { workspaceId, programmeIds: [programmeId] });
    for (const revision of lineage) await refreshResultsOf(tx, inner, { revisionId: revision.id });
    await appendLedger(tx, inner, {
      event: "vehicle.versioned",
      subjectType: "programme",
      subjectId: programmeId,
      programmeId,
      data: { version, ...changes },
    });
    return { version };
  });
}
