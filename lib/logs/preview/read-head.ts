import { FileRefusedError } from "@/lib/errors";
import { openDelimited } from "@/lib/logs/delimited/read-delimited";
import type { LogHead } from "@/lib/logs/preview/gather-head";
import { type ReadLogOptions, readLog } from "@/lib/logs/read-log";
import { sniffLog } from "@/lib/logs/sniff-log";
import type { LogTable } from "@/lib/logs/types";

const LF = 10;
const CR = 13;
const GROWS_TO_AT_MOST = 64 * 1024 * 1024;
/** Ten minutes of 70 channels at 100 a second: read in well under a second. */
const VALUES_AT_MOST = 4 * 1024 * 1024;
const TOO_LARGE = new Set(["inflates_too_large", "too_many_values"]);

/** Number of bytes up to the end of the last whole line, also of UTF-16; all where there is no line end. */
function wholeLines(bytes: Uint8Array): number {
  let at = bytes.lastIndexOf(LF);
  if (at < 0) at = bytes.lastIndexOf(CR);
  if (at < 0) return bytes.length;
  // The second byte of a line end in UTF-16, little-endian.
  return bytes[at + 1] === 0 && at % 2 === 0 ? at + 2 : at + 1;
}

const tooLarge = () =>
  new FileRefusedError(
    "too_large_to_preview",
    "A log of this format can only be read whole, and this one is too large for that here; only the worker reads it. To choose its columns, export a shorter recording, or CSV.",
  );

/** A whole file that was small enough; what it may grow to is bounded more tightly than in the worker. */
function readWhole(bytes: Uint8Array, options: ReadLogOptions): LogTable {
  try {
    return readLog(bytes, { ...options, maxInflatedBytes: GROWS_TO_AT_MOST, maxValues: VALUES_AT_MOST });
  } catch (error) {
    if (error instanceof FileRefusedError && TOO_LARGE.has(error.code)) throw tooLarge();
    throw error;
  }
}

/**
 * Reads the beginning of a log by the very parse that the import of the whole file uses: the same bytes settle its form.
 * @throws FileRefusedError as readLog; `too_large_to_preview` where a format can't be read in part
 */
export function readHead(head: LogHead, options: ReadLogOptions): LogTable {
  const { bytes, complete, refusal } = head;
  if (refusal) throw refusal;
  const { kind } = sniffLog(bytes);
  if (complete || kind === "unsupported" || kind === "gzip") return readWhole(bytes, options);
  if (kind !== "delimited") throw tooLarge();
  const reader = openDelimited(bytes, null, options.key ?? {}, options.drive);
  reader.push(bytes.subarray(0, wholeLines(bytes)));
  return reader.finish();
}
