import type { ChangeSet } from "@/lib/calibration/changes/types";
import { type ChecksumRegion, VALUE_BYTES } from "@/lib/calibration/image/checksum-regions";

/** Addresses of the stored values of declared regions, each once: regions may share a value. */
function storedAddresses(regions: readonly ChecksumRegion[]): Set<number> {
  const addresses = new Set<number>();
  for (const { storedAt, algorithm } of regions)
    if (storedAt !== null) for (let i = 0; i < VALUE_BYTES[algorithm]; i++) addresses.add(storedAt + i);
  return addresses;
}

/**
 * A change set as gates judge it: stored values of declared checksums, which have to change with what they cover, are no longer
 * counted as bytes that nobody described. A range that goes beyond them stays listed, with the rest of its bytes counted.
 */
export function withoutChecksums(changes: ChangeSet, regions: readonly ChecksumRegion[]): ChangeSet {
  const stored = storedAddresses(regions);
  let { uncoveredBytes, uncoveredRanges } = changes;
  const uncovered = changes.uncovered.filter(({ address, length, kind }) => {
    if (kind !== "differs") return true;
    let explained = 0;
    for (const place of stored) if (place >= address && place < address + length) explained++;
    uncoveredBytes -= explained;
    if (explained < length) return true;
    uncoveredRanges--;
    return false;
  });
  return { ...changes, uncovered, uncoveredBytes, uncoveredRanges };
}
