import type { LedgerRow } from "@/db/queries/ledger";
import { digestOf } from "@/lib/canonical-json";

/** The members of an entry that its digest covers, in words: everything but the digest itself. */
export function ledgerDigest(entry: Omit<LedgerRow, "sha256">): string {
  return digestOf({ ...entry, at: entry.at.toISOString() });
}

/**
 * Checks a stretch of the chain, oldest first.
 * @returns null when it holds, else the sequence number of the first entry that does not
 */
export function firstBrokenLink(entries: readonly LedgerRow[]): number | null {
  let previous: LedgerRow | undefined;
  for (const entry of entries) {
    const { sha256, ...covered } = entry;
    const follows =
      previous === undefined || (entry.seq === previous.seq + 1 && entry.previousSha256 === previous.sha256);
    if (!follows || ledgerDigest(covered) !== sha256) return entry.seq;
    previous = entry;
  }
  return null;
}
