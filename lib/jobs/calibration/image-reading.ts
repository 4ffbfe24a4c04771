import type { SideRow } from "@/db/queries/change-sets";
import type { DescriptionRow } from "@/db/queries/descriptions";
import { insertImageReading, selectImageReading } from "@/db/queries/image-readings";
import type { CalibrationImage } from "@/lib/calibration/image/types";
import { READER_VERSION } from "@/lib/calibration/reader-version";
import { readImageByDescription } from "@/lib/calibration/values/read-image-by-description";
import type { ImageReading } from "@/lib/calibration/values/types";
import { openDescription } from "@/lib/jobs/calibration/settle-description";
import { storable } from "@/lib/jobs/calibration/storable";
import type { System } from "@/lib/jobs/system";
import { keepBlob, storeBlob } from "@/lib/services/blobs";
import { openReading, packReading } from "@/lib/services/change-sets/stored-reading";

/**
 * A revision's image read by a description: the kept reading, or one made and kept now, bytes before row.
 * @param description settled as read
 * @throws NotFoundError, UnavailableError, OutOfSpaceError of the store
 */
export async function imageReading(
  { db, store }: System,
  args: { side: SideRow; image: CalibrationImage; description: DescriptionRow },
): Promise<ImageReading> {
  const { side, image, description } = args;
  const { workspaceId } = description;
  const where = { store, workspaceId };
  const key = {
    workspaceId,
    revisionId: side.id,
    descriptionId: description.id,
    readerVersion: READER_VERSION,
  };
  const kept = await selectImageReading(db, key);
  if (kept) return await openReading(where, kept.blobSha256);
  const reading = storable(readImageByDescription(await openDescription({ db, store }, description), image));
  const blob = await storeBlob(where, await packReading(reading));
  const { epk, problems, characteristics, notRead } = reading;
  const summary = { epk, problems, characteristics: characteristics.length, notRead: notRead.length };
  await db.transaction(async (tx) => {
    await keepBlob(tx, where, blob);
    await insertImageReading(tx, { ...key, blobSha256: blob.sha256, summary });
  });
  return reading;
}
