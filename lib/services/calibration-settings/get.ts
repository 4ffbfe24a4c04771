import {
  type SettingKind,
  selectSetting,
  selectSettingVersion,
  selectSettingVersions,
} from "@/db/queries/calibration-settings";
import { NotFoundError } from "@/lib/errors";
import { authorise, type Ctx } from "@/lib/services/ctx";
import { loadProgramme } from "@/lib/services/programmes/load";

/**
 * A version of what a programme has settled about its calibration, and the list of all versions; without a named one the
 * newest, or version 0 with nothing in it where none was saved.
 * @throws NotFoundError; ForbiddenError
 */
export async function getCalibrationSetting<Kind extends SettingKind>(
  ctx: Ctx,
  { programmeId, kind, version }: { programmeId: string; kind: Kind; version?: number },
) {
  const { programme } = await loadProgramme(ctx, programmeId);
  authorise(ctx, "history.view");
  const { db, workspaceId } = ctx;
  const place = { workspaceId, programmeId, kind };
  const newest = await selectSetting(db, place);
  const shown = version === undefined ? newest : await selectSettingVersion(db, { ...place, version });
  if (!shown) throw new NotFoundError("setting_not_found", "This programme has no such version of it.");
  return {
    programme,
    shown,
    newestVersion: newest.version,
    versions: await selectSettingVersions(db, place),
  };
}
