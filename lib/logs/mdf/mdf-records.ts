import { readU64, refuseDamaged } from "@/lib/logs/mdf/mdf-blocks";
import type { MdfChannelGroup, MdfDataGroup } from "@/lib/logs/mdf/mdf-tree";

/** CG flag: the group holds values of variable length, each with its length before it. */
export const VLSD_GROUP = 1;

/** The records of one channel group, one after the other without ids. */
export interface GroupRecords {
  group: MdfChannelGroup;
  bytes: Uint8Array;
}

/** A stream that was taken apart; `cutBytes` at its end are no whole record. */
export interface SortedRecords {
  records: GroupRecords[];
  cutBytes: number;
}

function readRecordId(view: DataView, at: number, bytes: number): number {
  if (bytes === 1) return view.getUint8(at);
  if (bytes === 2) return view.getUint16(at, true);
  return bytes === 4 ? view.getUint32(at, true) : readU64(view, at);
}

/** Calls `take` with the group's number and the place of each record; returns the bytes left over at the end. */
function eachRecord(
  stream: Uint8Array,
  { idBytes, groups }: MdfDataGroup,
  take: (group: number, from: number, to: number) => void,
): number {
  const view = new DataView(stream.buffer, stream.byteOffset, stream.byteLength);
  const byId = new Map(groups.map((group, k) => [group.recordId, k]));
  const sizes = groups.map((group) =>
    group.flags & VLSD_GROUP ? -1 : group.dataBytes + group.invalidationBytes,
  );
  let at = 0;
  while (at + idBytes <= stream.length) {
    const k = byId.get(readRecordId(view, at, idBytes));
    if (k === undefined)
      refuseDamaged(`The data hold a record at byte ${at} whose kind the file does not describe`);
    const from = at + idBytes;
    let to = from + sizes[k];
    if (sizes[k] < 0) {
      if (from + 4 > stream.length) break;
      to = from + 4 + view.getUint32(from, true);
    }
    if (to > stream.length) break;
    take(k, from, to);
    at = to;
  }
  return stream.length - at;
}

/** Sorts a stream of mixed records by their ids; a group of variable length keeps the lengths before its values. */
export function sortRecords(stream: Uint8Array, dataGroup: MdfDataGroup): SortedRecords {
  const { groups } = dataGroup;
  const sizes = groups.map(() => 0);
  const cutBytes = eachRecord(stream, dataGroup, (k, from, to) => {
    sizes[k] += to - from;
  });
  const sorted = sizes.map((size) => new Uint8Array(size));
  const filled = groups.map(() => 0);
  eachRecord(stream, dataGroup, (k, from, to) => {
    const into = sorted[k];
    let at = filled[k];
    for (let i = from; i < to; i++) into[at++] = stream[i];
    filled[k] = at;
  });
  return { records: groups.map((group, k) => ({ group, bytes: sorted[k] })), cutBytes };
}
