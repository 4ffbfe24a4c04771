import type { RevisionContent, UncoveredRange } from "@/lib/calibration/changes/types";
import { describeRange } from "@/lib/calibration/changes/uncovered/describe-range";
import { describedStarts } from "@/lib/calibration/changes/uncovered/not-read-suspects";
import { segmentFinder } from "@/lib/calibration/changes/uncovered/segment-finder";
import type { ChangedRange } from "@/lib/calibration/image/changed-ranges";
import { joinRanges } from "@/lib/calibration/values/convert/presentation";
import type { ByteRange } from "@/lib/calibration/values/types";

const MOST_RANGES = 500;

/** A changed stretch that no described change accounts for, in one memory segment. */
interface Piece extends ChangedRange {
  segment: string | null;
  programType: string | null;
}

/**
 * Changed bytes less those that described changes account for, split at the borders of memory segments. A byte under a characteristic
 * of which nothing changed (bits outside its mask, room behind a text) is uncovered too: nobody said what it means. Lists the 500
 * longest by address; totals count all. O(ranges log ranges).
 */
export function uncoveredRanges(
  a: RevisionContent,
  b: RevisionContent,
  changed: readonly ChangedRange[],
  explained: readonly ByteRange[],
): { listed: UncoveredRange[]; ranges: number; bytes: number; problems: string[] } {
  const segmentAt = segmentFinder(b.reading ?? a.reading);
  const suspects = describedStarts(a.reading, b.reading);
  const covered = joinRanges(explained);
  let kept: Piece[] = [];
  let [ranges, bytes, next] = [0, 0, 0];
  // Later ranges of this length have no place among the longest any more.
  let shortest = 0;
  const keep = (address: number, length: number, kind: ChangedRange["kind"]) => {
    for (let at = address; at < address + length; ) {
      const { segment, until } = segmentAt(at);
      const end = Math.min(address + length, until);
      const piece = { address: at, length: end - at, kind };
      if (piece.length > shortest) {
        kept.push({ ...piece, segment: segment?.name ?? null, programType: segment?.programType ?? null });
      }
      suspects.add(piece);
      ranges++;
      bytes += piece.length;
      at = end;
    }
    if (kept.length > 8 * MOST_RANGES) {
      kept = longest(kept);
      shortest = kept[kept.length - 1].length;
    }
  };
  for (const { address, length, kind } of changed) {
    const end = address + length;
    let at = address;
    while (next < covered.length && covered[next].address + covered[next].length <= at) next++;
    for (let k = next; k < covered.length && covered[k].address < end; k++) {
      if (covered[k].address > at) keep(at, covered[k].address - at, kind);
      at = Math.max(at, covered[k].address + covered[k].length);
    }
    if (at < end) keep(at, end - at, kind);
  }
  const listed = longest(kept).sort((p, q) => p.address - q.address);
  return {
    listed: listed.map((piece) => describeRange(piece, a.image, b.image)),
    ranges,
    bytes,
    problems: suspects.problems(),
  };
}

function longest(pieces: readonly Piece[]): Piece[] {
  return [...pieces].sort((p, q) => q.length - p.length || p.address - q.address).slice(0, MOST_RANGES);
}
