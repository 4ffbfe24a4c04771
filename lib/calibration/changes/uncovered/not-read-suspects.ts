import { formatAddress } from "@/lib/calibration/image/types";
import type { ByteRange, ImageReading } from "@/lib/calibration/values/types";
import { lowerBound } from "@/lib/signal/local-quadratic";

/** Collects changed bytes that may belong to something that could not be read. */
interface Suspects {
  add(range: ByteRange): void;
  problems(): string[];
}

/** Further behind its start nothing is thought to belong to a characteristic of unknown size. */
const FURTHEST = 1 << 16;
const MOST_NAMES = 20;

/**
 * Changed bytes behind the start of a characteristic that could not be read, with no other start in between, may be its own: its size is
 * not known, so this is told and not counted as covered.
 */
export function describedStarts(a: ImageReading | null, b: ImageReading | null): Suspects {
  const starts = new Map<number, string | null>();
  for (const reading of [a, b]) {
    for (const { address } of reading?.characteristics ?? []) starts.set(address, null);
  }
  for (const reading of [a, b]) {
    for (const { name, address } of reading?.notRead ?? []) if (address !== null) starts.set(address, name);
  }
  const sorted = [...starts.keys()].sort((p, q) => p - q);
  const found = new Map<string, { bytes: number; first: number }>();
  return {
    add({ address, length }) {
      const start = sorted[lowerBound(sorted, address + length) - 1];
      const name = start === undefined || address - start > FURTHEST ? null : starts.get(start);
      if (!name) return;
      const known = found.get(name);
      if (known) known.bytes += length;
      else found.set(name, { bytes: length, first: address });
    },
    problems() {
      const listed = [...found].slice(0, MOST_NAMES).map(([name, { bytes, first }]) => {
        const what = bytes === 1 ? "1 changed byte" : `${bytes} changed bytes`;
        return `${what} from ${formatAddress(first)} on may belong to ${name}, which could not be read.`;
      });
      const more = found.size - MOST_NAMES;
      return more > 0
        ? [...listed, `Changed bytes may belong to ${more} more that could not be read.`]
        : listed;
    },
  };
}
