import { ConflictError, InvalidInputError } from "@/lib/errors";
import { fingerprintOfHead } from "@/lib/logs/preview/header-fingerprint";
import { type LogPreview, previewLog } from "@/lib/logs/preview/preview-log";
import { previewWords } from "@/lib/logs/preview/preview-words";
import { streamBlob } from "@/lib/services/blobs";
import { findFittingKey } from "@/lib/services/channel-keys/find-fitting";
import { headOf } from "@/lib/services/channel-keys/run-head";
import type { UploadReading } from "@/lib/services/channel-keys/schema";
import type { Ctx } from "@/lib/services/ctx";
import { loadProgramme } from "@/lib/services/programmes/load";
import { loadRoadDay } from "@/lib/services/road-days/load";
import { loadUpload } from "@/lib/services/uploads/load";
import { readStaged } from "@/lib/services/uploads/seal";

function summary(preview: LogPreview) {
  const { time, rowsRead, columns } = preview;
  const { found, leftOut, inDoubt } = previewWords(preview);
  const rateHz = time?.rateHz ?? null;
  return { rateHz, rowsRead, columnCount: columns.length, found, leftOut, inDoubt };
}

/**
 * What is understood of an uploaded log before it is attached, from its beginning only, and the key that fits its header.
 * @param roadDayId whose vehicle sheet says which axle is driven
 * @throws ForbiddenError; NotFoundError; ConflictError `upload_incomplete`; InvalidInputError `wrong_purpose`
 */
export async function readUpload(
  ctx: Ctx,
  { uploadId, roadDayId }: { uploadId: string; roadDayId: string },
): Promise<UploadReading> {
  const upload = await loadUpload(ctx, uploadId);
  const { fileName, declaredSha256 } = upload;
  if (upload.purpose !== "log")
    throw new InvalidInputError("wrong_purpose", `${fileName} was not sent as a log. Choose it again.`);
  if (upload.state === "cancelled" || upload.receivedBytes !== upload.declaredBytes)
    throw new ConflictError(
      "upload_incomplete",
      `${fileName} has not arrived as a whole yet. Go on sending.`,
    );
  const roadDay = await loadRoadDay(ctx, roadDayId);
  const { sheet } = await loadProgramme(ctx, roadDay.programmeId);
  const isStaged = upload.state === "open" || upload.state === "complete";
  const head = await headOf(isStaged ? readStaged(ctx, upload) : streamBlob(ctx, declaredSha256));
  const about = { fileName, drive: sheet.figures.drive };
  const preview = previewLog(head, about);
  const key = await findFittingKey(ctx, fingerprintOfHead(head));
  return {
    ...summary(preview),
    wholeFile: preview.wholeFile,
    columns: preview.columns.map(({ title, channel, unitFound, unit, samples, min, median, max }) => ({
      title,
      channel,
      unitFound,
      unit,
      samples,
      min,
      median,
      max,
    })),
    fitting: key && { id: key.id, name: key.name, version: key.version },
    withKey: key && summary(previewLog(head, { ...about, key: key.key })),
  };
}
