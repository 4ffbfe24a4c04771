import { changedRanges } from "@/lib/calibration/image/changed-ranges";
import { imageIdentity } from "@/lib/calibration/image/image-identity";
import type { ImageDifference, ImageSummary } from "@/lib/calibration/image/image-summary";
import { readImage } from "@/lib/calibration/image/read-image";
import type { CalibrationImage } from "@/lib/calibration/image/types";
import { readBlob } from "@/lib/services/blobs";
import type { Ctx } from "@/lib/services/ctx";

type Where = Pick<Ctx, "store" | "workspaceId">;

/** What names an image: its bytes by fingerprint, its file's name, and for raw bytes where they begin. */
export interface ImageSource {
  imageSha256: string;
  imageFileName: string;
  imageBaseAddress: number | null;
}

const SHOWN_RANGES = 200;

/** Reads a kept image. @throws FileRefusedError naming line and reason; NotFoundError; UnavailableError */
export async function openCalibrationImage(where: Where, source: ImageSource): Promise<CalibrationImage> {
  const bytes = await readBlob(where, source.imageSha256);
  return readImage(bytes, {
    fileName: source.imageFileName,
    baseAddress: source.imageBaseAddress ?? undefined,
  });
}

/** What is kept of an image beside its bytes. */
export function summarise(image: CalibrationImage): ImageSummary {
  return {
    container: image.container,
    identity: imageIdentity(image),
    segments: image.segments.map(({ address, bytes }) => ({ address, length: bytes.length })),
    problems: image.notes.map((note) => note.message),
  };
}

/** Where an image differs from its parent: changed bytes, and bytes that only one of them has. */
export function differenceOf(parent: CalibrationImage, image: CalibrationImage): ImageDifference {
  const ranges = changedRanges(parent, image);
  return {
    ranges: ranges.length,
    bytes: ranges.reduce((sum, range) => sum + range.length, 0),
    first: ranges.slice(0, SHOWN_RANGES).map(({ address, length }) => ({ address, length })),
  };
}
