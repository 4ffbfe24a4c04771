import { createGunzip, type Gunzip } from "node:zlib";
import { HEAD_BYTES, openDelimited } from "@/lib/logs/delimited/read-delimited";
import {
  formatRefusal,
  gzipRefusal,
  MAX_INFLATED_BYTES,
  type ReadLogOptions,
  readLog,
} from "@/lib/logs/read-log";
import { sniffLog } from "@/lib/logs/sniff-log";
import type { LogTable } from "@/lib/logs/types";

/** Bytes of a file in order. */
export type Pieces = AsyncIterator<Uint8Array, unknown>;

/** The pieces as one. */
export function joined(pieces: readonly Uint8Array[]): Uint8Array {
  const whole = new Uint8Array(pieces.reduce((sum, piece) => sum + piece.length, 0));
  let at = 0;
  for (const piece of pieces) {
    whole.set(piece, at);
    at += piece.length;
  }
  return whole;
}

/** At least the first `atLeast` bytes, or all there are. */
export async function take(
  pieces: Pieces,
  atLeast: number,
): Promise<{ head: Uint8Array; complete: boolean }> {
  const taken: Uint8Array[] = [];
  let size = 0;
  while (size < atLeast) {
    const next = await pieces.next();
    if (next.done) return { head: joined(taken), complete: true };
    taken.push(next.value);
    size += next.value.length;
  }
  return { head: joined(taken), complete: false };
}

async function feed(gunzip: Gunzip, head: Uint8Array, pieces: Pieces): Promise<void> {
  const settled = () =>
    new Promise<void>((resolve) => {
      const done = () => {
        gunzip.off("drain", done).off("close", done);
        resolve();
      };
      gunzip.on("drain", done).on("close", done);
    });
  for (let piece: Uint8Array | null = head; piece && !gunzip.destroyed; ) {
    if (!gunzip.write(piece)) await settled();
    const next = await pieces.next();
    piece = next.done ? null : next.value;
  }
  if (!gunzip.destroyed) gunzip.end();
}

/** Unpacks piece by piece. @throws FileRefusedError `inflates_too_large`, `gzip_damaged`; what the source throws as it is */
export async function* inflated(head: Uint8Array, pieces: Pieces, limit: number): AsyncGenerator<Uint8Array> {
  const gunzip = createGunzip();
  let sourceError: unknown = null;
  const fed = feed(gunzip, head, pieces).catch((error) => {
    sourceError = error;
    gunzip.destroy(error as Error);
  });
  let size = 0;
  let damaged = false;
  try {
    for await (const piece of gunzip) {
      size += piece.length;
      if (size > limit) break;
      yield piece;
    }
  } catch {
    damaged = true;
  } finally {
    gunzip.destroy();
  }
  // What the source throws in the piece under way goes before any refusal of what was unpacked.
  await fed;
  if (sourceError) throw sourceError;
  if (damaged || size > limit) throw gzipRefusal(damaged ? null : limit);
}

/**
 * Reads a log that arrives piece by piece, with the same outcome as `readLog` of all its bytes. Delimited text is parsed on the
 * way: memory is that of its columns, not of the file. Other formats are gathered first.
 * @param sizeBytes size of the file where it is known
 * @throws FileRefusedError as readLog; what the source throws
 */
export async function readLogStream(
  source: AsyncIterable<Uint8Array>,
  sizeBytes: number | null,
  options: ReadLogOptions = {},
): Promise<LogTable> {
  const limit = options.maxInflatedBytes ?? MAX_INFLATED_BYTES;
  let pieces: Pieces = source[Symbol.asyncIterator]();
  let size = sizeBytes;
  let { head, complete } = await take(pieces, HEAD_BYTES);
  if (sniffLog(head).kind === "gzip") {
    pieces = inflated(head, pieces, limit);
    size = null;
    ({ head, complete } = await take(pieces, HEAD_BYTES));
    if (sniffLog(head).kind === "gzip") throw formatRefusal("a file packed twice", options.fileName);
  }
  if (complete) return readLog(head, options);
  if (sniffLog(head).kind !== "delimited") {
    const rest: Uint8Array[] = [head];
    for (let next = await pieces.next(); !next.done; next = await pieces.next()) rest.push(next.value);
    return readLog(joined(rest), options);
  }
  const reader = openDelimited(
    head.subarray(0, HEAD_BYTES),
    size,
    options.key ?? {},
    options.drive,
    options.maxRefusedRows,
  );
  reader.push(head);
  for (let next = await pieces.next(); !next.done; next = await pieces.next()) reader.push(next.value);
  return reader.finish();
}
