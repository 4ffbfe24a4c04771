import { selectVehicleSheet, selectVehicleSheetVersions } from "@/db/queries/vehicle-sheets";
import { NotFoundError } from "@/lib/errors";
import type { Ctx } from "@/lib/services/ctx";
import { loadProgramme } from "@/lib/services/programmes/load";

/** A version of a programme's sheet (the newest when none is named) and the list of all. @throws NotFoundError, ForbiddenError */
export async function getVehicleSheet(ctx: Ctx, programmeId: string, version?: number) {
  const { programme, sheet: newest } = await loadProgramme(ctx, programmeId);
  const place = { workspaceId: ctx.workspaceId, programmeId };
  const sheet = version === undefined ? newest : await selectVehicleSheet(ctx.db, { ...place, version });
  if (!sheet) throw new NotFoundError("sheet_not_found", "This programme has no such version of its sheet.");
  return {
    programme,
    sheet,
    newestVersion: newest.version,
    versions: await selectVehicleSheetVersions(ctx.db, place),
  };
}
