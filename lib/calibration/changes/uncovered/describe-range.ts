import { createHash } from "node:crypto";
import type { UncoveredRange } from "@/lib/calibration/changes/types";
import type { ChangedRange } from "@/lib/calibration/image/changed-ranges";
import { segmentAt } from "@/lib/calibration/image/segment-at";
import type { CalibrationImage } from "@/lib/calibration/image/types";
import { digestOf } from "@/lib/canonical-json";

type Image = Pick<CalibrationImage, "segments">;

const SHOWN = 16;
const AROUND = 8;

/** Puts the bytes of both images, with some around them, to a changed stretch; `digest` holds for all its bytes on both sides. */
export function describeRange(
  piece: ChangedRange & Pick<UncoveredRange, "segment" | "programType">,
  a: Image,
  b: Image,
): UncoveredRange {
  const { address, length, kind } = piece;
  const contextAddress = Math.max(0, address - AROUND);
  const end = address + (length > SHOWN ? SHOWN : length + AROUND);
  return {
    ...piece,
    before: kind === "only b" ? null : hex(a, contextAddress, end),
    after: kind === "only a" ? null : hex(b, contextAddress, end),
    contextAddress,
    digest: digestOf({
      address,
      length,
      before: hashOf(a, address, length),
      after: hashOf(b, address, length),
    }),
  };
}

function hex(image: Image, from: number, to: number): string {
  let text = "";
  for (let at = from; at < to; at++) {
    const segment = segmentAt(image.segments, at);
    text += segment ? segment.bytes[at - segment.address].toString(16).toUpperCase().padStart(2, "0") : "--";
  }
  return text;
}

/** SHA-256 of a stretch that one segment holds; null where the image has no byte there. */
function hashOf(image: Image, address: number, length: number): string | null {
  const segment = segmentAt(image.segments, address);
  if (!segment) return null;
  const from = address - segment.address;
  return createHash("sha256")
    .update(segment.bytes.subarray(from, from + length))
    .digest("hex");
}
