import { lastSegmentFrom } from "@/lib/calibration/image/segment-at";
import type { ImageReading } from "@/lib/calibration/values/types";

type Segment = ImageReading["memorySegments"][number];

/**
 * Finds the memory segment at an address (the one that begins last where they overlap), and up to which address that holds. O(log n),
 * more only where segments overlap.
 */
export function segmentFinder(
  reading: Pick<ImageReading, "memorySegments"> | null,
): (address: number) => { segment: Segment | null; until: number } {
  const segments = [...(reading?.memorySegments ?? [])]
    .filter(({ length }) => length > 0)
    .sort((p, q) => p.address - q.address);
  // Furthest end of the segments up to each one: nothing before can reach beyond it.
  let furthest = 0;
  const reach = segments.map(({ address, length }) => {
    furthest = Math.max(furthest, address + length);
    return furthest;
  });
  return (address) => {
    const last = lastSegmentFrom(segments, address);
    const start = segments[last + 1]?.address ?? Infinity;
    for (let k = last; k >= 0 && reach[k] > address; k--) {
      const end = segments[k].address + segments[k].length;
      if (end > address) return { segment: segments[k], until: Math.min(end, start) };
    }
    return { segment: null, until: start };
  };
}
