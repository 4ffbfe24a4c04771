import type { Transaction } from "@/db/client";
import { insertSetting, type SettingKind, selectSetting } from "@/db/queries/calibration-settings";
import type { CalibrationSettings } from "@/db/schema/change-sets";
import { digestOf } from "@/lib/canonical-json";
import { ConflictError } from "@/lib/errors";
import { type Ctx, withTransaction } from "@/lib/services/ctx";
import { appendLedger } from "@/lib/services/ledger/append";
import { loadProgramme } from "@/lib/services/programmes/load";
import { refuseArchived } from "@/lib/services/programmes/refuse-archived";

interface Save<Kind extends SettingKind> {
  kind: Kind;
  programmeId: string;
  basedOnVersion: number;
  content: CalibrationSettings[Kind];
  /** What the ledger calls it. */
  event: string;
  /** What follows from the new version, in the same transaction. */
  follow?: (tx: Transaction, ctx: Ctx) => Promise<void>;
}

/**
 * Adds a version of a programme's setting, in the frame that all kinds share. Saving what is there adds nothing.
 * @throws NotFoundError; ForbiddenError; ConflictError `setting_moved` when a newer version exists, `programme_archived`
 */
export async function saveSetting<Kind extends SettingKind>(
  ctx: Ctx,
  { kind, programmeId, basedOnVersion, content, event, follow }: Save<Kind>,
): Promise<{ version: number }> {
  const { workspaceId, userId } = ctx;
  return await withTransaction(ctx, async (tx, inner) => {
    const { programme } = await loadProgramme(inner, programmeId);
    refuseArchived(programme);
    const place = { workspaceId, programmeId, kind };
    const newest = await selectSetting(tx, place);
    const isNewest = newest.version === basedOnVersion;
    if (isNewest && digestOf(newest.content) === digestOf(content)) return { version: newest.version };
    const version = newest.version + 1;
    if (!isNewest || !(await insertSetting(tx, { ...place, version, content, createdBy: userId })))
      throw new ConflictError(
        "setting_moved",
        "Somebody else saved a newer version meanwhile. Open the page again to see it, then change it.",
        { newestVersion: newest.version },
      );
    await appendLedger(tx, inner, {
      event,
      subjectType: "programme",
      subjectId: programmeId,
      programmeId,
      data: { version, old: newest.content, new: content },
    });
    await follow?.(tx, inner);
    return { version };
  });
}
