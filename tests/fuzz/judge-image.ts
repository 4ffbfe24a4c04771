import { imageIdentity } from "@/lib/calibration/image/image-identity";
import { readImage } from "@/lib/calibration/image/read-image";
import { ADDRESS_LIMIT, type CalibrationImage, IMAGE_REFUSALS } from "@/lib/calibration/image/types";
import { FileRefusedError } from "@/lib/errors";

/** What is wrong with an image that was read; null when nothing is. */
function faultOf({ segments }: CalibrationImage, bytes: Uint8Array): string | null {
  if (segments.length === 0) return "no segment";
  let end = -1;
  let length = 0;
  for (const { address, bytes: content } of segments) {
    if (content.length === 0) return "an empty segment";
    if (address <= end) return "segments that touch, overlap or are out of order";
    end = address + content.length;
    if (end > ADDRESS_LIMIT) return "bytes beyond 32 bits";
    length += content.length;
  }
  // Two digits of text make one byte.
  return 2 * length > bytes.length ? `${length} bytes out of ${bytes.length} characters` : null;
}

/** Reads bytes as a record file. The image, or the code of the refusal; a fault of the reader is thrown. */
function readRecords(bytes: Uint8Array, fileName: string): CalibrationImage | string {
  let image: CalibrationImage;
  try {
    image = readImage(bytes, { fileName });
  } catch (error) {
    if (!(error instanceof FileRefusedError)) throw error;
    if (!(IMAGE_REFUSALS as readonly string[]).includes(error.code))
      throw new Error(`refused with unlisted code ${error.code}`);
    if (error.message.length > 1000) throw new Error(`refused in ${error.message.length} characters`);
    return error.code;
  }
  const fault = faultOf(image, bytes);
  if (fault) throw new Error(fault);
  return image;
}

/** Any change: an image whose segments add up, or a refusal. */
export function judgeImage(bytes: Uint8Array, fileName: string): string {
  const image = readRecords(bytes, fileName);
  return typeof image === "string" ? image : "read";
}

/** One byte of a sound file changed: other content is never read without a word that the sound file does not get. */
export function judgeFlip(bytes: Uint8Array, sound: Uint8Array, fileName: string): string {
  const image = readRecords(bytes, fileName);
  if (typeof image === "string") return image;
  const whole = readImage(sound, { fileName });
  if (imageIdentity(image) === imageIdentity(whole)) return "read";
  const known = new Set(whole.notes.map(({ code }) => code));
  if (image.notes.some(({ code }) => !known.has(code))) return "read_with_a_note";
  throw new Error("a changed byte reads as other content without a word");
}
