import { selectSetting } from "@/db/queries/calibration-settings";
import { type SideRow, selectSides } from "@/db/queries/change-sets";
import { putImageCheck } from "@/db/queries/image-readings";
import { checkRegions } from "@/lib/calibration/image/checksum-regions";
import type { CalibrationImage } from "@/lib/calibration/image/types";
import { imageReading } from "@/lib/jobs/calibration/image-reading";
import { settledDescription } from "@/lib/jobs/calibration/settle-description";
import { storable } from "@/lib/jobs/calibration/storable";
import type { System } from "@/lib/jobs/system";
import { isLost } from "@/lib/services/blobs";
import { openCalibrationImage } from "@/lib/services/revisions/read-image";

interface ImageJob {
  workspaceId: string;
  revisionId: string;
}

/** The image whose fingerprint was checked on the way; null where the stored bytes are not what was kept. */
async function openWhole(
  { store }: System,
  workspaceId: string,
  side: SideRow,
): Promise<CalibrationImage | null> {
  try {
    return await openCalibrationImage({ store, workspaceId }, side);
  } catch (error) {
    if (isLost(error)) return null;
    throw error;
  }
}

/**
 * Looks whether a revision's stored image still has its fingerprint and its declared checksums, and reads its values by its own
 * description. May run any number of times; what a check finds now replaces what it found before.
 * @throws what kept the store from answering; the queue tries again
 */
export async function readRevisionImage(
  system: System,
  { workspaceId, revisionId }: ImageJob,
): Promise<void> {
  const { db } = system;
  const [side] = await selectSides(db, { workspaceId, revisionIds: [revisionId] });
  if (!side) return;
  const { programmeId, descriptionId } = side;
  const image = await openWhole(system, workspaceId, side);
  const kind = "checksum_regions" as const;
  const declared = await selectSetting(db, { workspaceId, programmeId, kind });
  await putImageCheck(db, {
    workspaceId,
    revisionId,
    regionsVersion: declared.version,
    result: storable({
      fingerprintHolds: image !== null,
      regions: image === null ? [] : checkRegions(image, declared.content),
    }),
  });
  if (image === null || descriptionId === null) return;
  const description = await settledDescription(system, { workspaceId, descriptionId });
  if (description?.state === "read") await imageReading(system, { side, image, description });
}
