import { lastSegmentFrom } from "@/lib/calibration/image/segment-at";
import { type CalibrationImage, formatAddress, type ImageSegment } from "@/lib/calibration/image/types";
import { NotReadable } from "@/lib/calibration/values/not-readable";

/** A stretch that is wholly in the image: `view` reads it from `offset` on. */
export interface Stretch {
  view: DataView;
  offset: number;
}

/** Looks up bytes by address in an image's sparse segments, O(log segments). */
export class ImageMemory {
  private readonly segments: readonly ImageSegment[];
  private readonly views: DataView[];

  constructor(image: Pick<CalibrationImage, "segments">) {
    this.segments = image.segments;
    this.views = image.segments.map(
      ({ bytes }) => new DataView(bytes.buffer, bytes.byteOffset, bytes.byteLength),
    );
  }

  /** The stretch of `length` bytes at `address`. Throws NotReadable, with the first missing byte, unless the image has them all. */
  at(address: number, length: number): Stretch {
    const k = lastSegmentFrom(this.segments, address);
    const segment = k < 0 ? undefined : this.segments[k];
    const end = segment ? segment.address + segment.bytes.length : -1;
    if (segment && address + length <= end) return { view: this.views[k], offset: address - segment.address };
    const last = formatAddress(address + Math.max(1, length) - 1);
    if (segment && address < end) {
      throw new NotReadable(
        `its bytes ${formatAddress(address)} to ${last} are only partly in the image, which has none from ${formatAddress(end)} on`,
      );
    }
    const next = this.segments[k + 1];
    const start =
      next && next.address < address + length ? ` before ${formatAddress(next.address)}` : " there";
    throw new NotReadable(
      `its bytes ${formatAddress(address)} to ${last} are not in the image, which has none${start}`,
    );
  }
}
