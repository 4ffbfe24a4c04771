import type { ImageSegment } from "@/lib/calibration/image/types";

/** Index of the last of sorted segments that begins at or before an address, −1 where none does. O(log segments). */
export function lastSegmentFrom(segments: readonly { address: number }[], address: number): number {
  let low = 0;
  let high = segments.length;
  while (low < high) {
    const middle = (low + high) >>> 1;
    if (segments[middle].address <= address) low = middle + 1;
    else high = middle;
  }
  return low - 1;
}

/** The segment that holds the byte at an address; undefined where the image has none there. */
export function segmentAt(segments: readonly ImageSegment[], address: number): ImageSegment | undefined {
  const segment = segments[lastSegmentFrom(segments, address)];
  return segment && address < segment.address + segment.bytes.length ? segment : undefined;
}
