import type { CalibrationImage, ImageSegment } from "@/lib/calibration/image/types";

/** A run of addresses at which two images are not the same. */
export interface ChangedRange {
  address: number;
  length: number;
  /** "differs": both have bytes here, of other values; "only a" / "only b": the other image has no byte here. */
  kind: "differs" | "only a" | "only b";
}

/** Block that is compared at once before single bytes are looked at. */
const BLOCK = 1024;

/** All addresses at which `a` and `b` differ or only one has bytes, in rising order, longest runs of one kind. */
export function changedRanges(
  a: Pick<CalibrationImage, "segments">,
  b: Pick<CalibrationImage, "segments">,
): ChangedRange[] {
  const ranges: ChangedRange[] = [];
  const add = (address: number, length: number, kind: ChangedRange["kind"]) => {
    const last = ranges[ranges.length - 1];
    if (length <= 0) return;
    if (last && last.kind === kind && last.address + last.length === address) last.length += length;
    else ranges.push({ address, length, kind });
  };
  let i = 0;
  let j = 0;
  let at = 0;
  while (i < a.segments.length || j < b.segments.length) {
    const [sa, sb] = [a.segments[i], b.segments[j]];
    if (sa && at >= end(sa)) {
      i++;
      continue;
    }
    if (sb && at >= end(sb)) {
      j++;
      continue;
    }
    at = Math.max(at, Math.min(sa?.address ?? Infinity, sb?.address ?? Infinity));
    const inA = sa && sa.address <= at;
    const inB = sb && sb.address <= at;
    const until = Math.min(
      inA ? end(sa) : (sa?.address ?? Infinity),
      inB ? end(sb) : (sb?.address ?? Infinity),
    );
    if (inA && inB) compare(sa, sb, at, until, add);
    else add(at, until - at, inA ? "only a" : "only b");
    at = until;
  }
  return ranges;
}

const end = (segment: ImageSegment) => segment.address + segment.bytes.length;

function compare(
  a: ImageSegment,
  b: ImageSegment,
  from: number,
  to: number,
  add: (address: number, length: number, kind: "differs") => void,
): void {
  const x = Buffer.from(a.bytes.buffer, a.bytes.byteOffset + from - a.address, to - from);
  const y = Buffer.from(b.bytes.buffer, b.bytes.byteOffset + from - b.address, to - from);
  for (let block = 0; block < x.length; block += BLOCK) {
    const stop = Math.min(block + BLOCK, x.length);
    if (x.compare(y, block, stop, block, stop) === 0) continue;
    for (let k = block; k < stop; ) {
      let run = k;
      while (run < stop && x[run] !== y[run]) run++;
      add(from + k, run - k, "differs");
      k = run === k ? k + 1 : run;
    }
  }
}
