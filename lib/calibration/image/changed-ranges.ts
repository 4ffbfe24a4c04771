import type { CalibrationImage, ImageSegment } from "@/lib/calibration/image/types";

/** A run of addresses at which two images are not the same. */
export interface ChangedRange {
  address: number;
  length: number;
  /** "differs": both have bytes here, of other values; "only a" / "only b": the other image has no byte here. */
  kind: "differs" | "only a" | "only b";
}

/** Windows that are compared at once: they grow from the smaller to the larger while nothing differs. */
const WINDOW = { least: 512, most: 65_536 } as const;
/** Stretch that is known to differ and so short that its bytes are looked at one by one. */
const NARROW = 128;

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

type Add = (address: number, length: number, kind: "differs") => void;

function compare(a: ImageSegment, b: ImageSegment, from: number, to: number, add: Add): void {
  const x = Buffer.from(a.bytes.buffer, a.bytes.byteOffset + from - a.address, to - from);
  const y = Buffer.from(b.bytes.buffer, b.bytes.byteOffset + from - b.address, to - from);
  searchWindows(x, y, (at, length) => add(from + at, length, "differs"));
}

type OnRun = (at: number, length: number) => void;

/** Compares in windows; a window that differs is halved down to the first difference, and the search goes on behind it. */
function searchWindows(x: Buffer, y: Buffer, onRun: OnRun): void {
  let window: number = WINDOW.most;
  for (let at = 0; at < x.length; ) {
    let stop = Math.min(at + window, x.length);
    if (x.compare(y, at, stop, at, stop) === 0) {
      at = stop;
      window = Math.min(8 * window, WINDOW.most);
      continue;
    }
    while (stop - at > NARROW) {
      const middle = (at + stop) >>> 1;
      if (x.compare(y, at, middle, at, middle) === 0) at = middle;
      else stop = middle;
    }
    searchBytes(x, y, at, stop, onRun);
    at = stop;
    window = WINDOW.least;
  }
}

function searchBytes(x: Buffer, y: Buffer, from: number, to: number, onRun: OnRun): void {
  for (let k = from; k < to; ) {
    let run = k;
    while (run < to && x[run] !== y[run]) run++;
    if (run > k) onRun(k, run - k);
    k = run === k ? k + 1 : run;
  }
}
