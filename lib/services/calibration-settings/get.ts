import { selectSetting, selectSettingVersions } from "@/db/queries/calibration-settings";
import { authorise, type Ctx } from "@/lib/services/ctx";
import { loadProgramme } from "@/lib/services/programmes/load";

/**
 * What a programme has settled about its calibration: marks, links and regions, each in its newest version with the list of all.
 * Version 0 and nothing in it where none was saved.
 * @throws NotFoundError; ForbiddenError
 */
export async function getCalibrationSettings(ctx: Ctx, programmeId: string) {
  const { programme } = await loadProgramme(ctx, programmeId);
  authorise(ctx, "history.view");
  const { db, workspaceId } = ctx;
  const kindOf = async <Kind extends Parameters<typeof selectSetting>[1]["kind"]>(kind: Kind) => ({
    ...(await selectSetting(db, { workspaceId, programmeId, kind })),
    versions: await selectSettingVersions(db, { workspaceId, programmeId, kind }),
  });
  return {
    programme: { id: programme.id, name: programme.name, archived: programme.archivedAt !== null },
    marks: await kindOf("relevance_marks"),
    links: await kindOf("axis_links"),
    regions: await kindOf("checksum_regions"),
  };
}
