import type { FileRefusedError } from "@/lib/errors";
import { HEAD_BYTES } from "@/lib/logs/delimited/read-delimited";
import { MAX_INFLATED_BYTES } from "@/lib/logs/read-log";
import { inflated, joined, type Pieces, take } from "@/lib/logs/read-log-stream";
import { sniffLog } from "@/lib/logs/sniff-log";

/** The beginning of a log, unpacked. */
export interface LogHead {
  bytes: Uint8Array;
  /** Whether `bytes` are the whole file. */
  complete: boolean;
  /** Why nothing of it can be had. */
  refusal?: FileRefusedError;
}

/** Formats that are no text table can only be read whole; larger ones of them are not looked at before the worker reads them. */
const WHOLE_BYTES_AT_MOST = { mdf: 16 * 1024 * 1024, nmea: 4 * 1024 * 1024, gpx: 4 * 1024 * 1024 };

/** Lets go of a source that is not read to its end. */
async function close(pieces: Pieces): Promise<void> {
  await pieces.return?.();
}

/**
 * Takes so much of a log as its form is settled by: the first mebibyte of a text table, at most 16 MiB of MDF 4 and 4 MiB of
 * NMEA 0183 or GPX; of a packed log no more is unpacked than that. Nothing beyond is read.
 * @throws FileRefusedError `gzip_damaged`; what the source throws
 */
export async function gatherHead(source: AsyncIterable<Uint8Array>): Promise<LogHead> {
  const raw: Pieces = source[Symbol.asyncIterator]();
  let pieces = raw;
  try {
    let taken = await take(pieces, HEAD_BYTES);
    if (sniffLog(taken.head).kind === "gzip") {
      pieces = inflated(taken.head, raw, MAX_INFLATED_BYTES);
      taken = await take(pieces, HEAD_BYTES);
    }
    const { head, complete } = taken;
    if (complete) return { bytes: head, complete };
    const { kind } = sniffLog(head);
    if (kind !== "mdf" && kind !== "nmea" && kind !== "gpx")
      return { bytes: head.subarray(0, HEAD_BYTES), complete: false };
    const rest = await take(pieces, WHOLE_BYTES_AT_MOST[kind] - head.length);
    return { bytes: joined([head, rest.head]), complete: rest.complete };
  } finally {
    if (pieces !== raw) await close(pieces);
    await close(raw);
  }
}
