import type { DecisionRow, WaiverRow } from "@/db/queries/decisions";
import { digestOf } from "@/lib/canonical-json";

export type RecordWaiver = Pick<WaiverRow, "gateId" | "gateState" | "reason" | "waivedBy">;

/** Everything a record says: all of the decision's row but the digest itself, and its waivers. */
export type RecordContent = Omit<DecisionRow, "recordSha256"> & { waivers: readonly RecordWaiver[] };

/**
 * Digest of a record over its canonical JSON. It covers the digest of the record before, so that records form a chain,
 * and ids of person and revision, so that a signature can't be moved to another record.
 */
export function recordDigest(content: RecordContent): string {
  const { waivers, decidedAt, ...row } = content;
  return digestOf({
    record: 1,
    ...row,
    decidedAt: decidedAt.toISOString(),
    waivers: waivers
      .map(({ gateId, gateState, reason, waivedBy }) => ({ gateId, gateState, reason, waivedBy }))
      .sort((a, b) => (a.gateId < b.gateId ? -1 : 1)),
  });
}

/** Whether a stored record still is what was signed. */
export function recordHolds(row: DecisionRow, waivers: readonly RecordWaiver[]): boolean {
  const { recordSha256, ...content } = row;
  return recordDigest({ ...content, waivers }) === recordSha256;
}
