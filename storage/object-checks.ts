import { Readable } from "node:stream";
import { InvalidInputError, type TwinpassError, UnavailableError } from "@/lib/errors";
import type { ParsedKey } from "@/storage/keys";
import { isSha256 } from "@/storage/keys";
import type { ByteRange, ByteSource, DeclaredBytes } from "@/storage/port";

/**
 * The declaration that a create must meet. A blob key carries its digest, so no other bytes can ever lie under it.
 * @throws InvalidInputError `bad_declaration`
 */
export function declaredFor(parsed: ParsedKey, declared: DeclaredBytes): DeclaredBytes {
  const sha256 = parsed.kind === "blob" ? parsed.sha256 : declared.sha256;
  const contradicts = declared.sha256 !== undefined && declared.sha256 !== sha256;
  const malformed = sha256 !== undefined && !isSha256(sha256);
  if (contradicts || malformed || !Number.isSafeInteger(declared.sizeBytes) || declared.sizeBytes < 0) {
    throw new InvalidInputError(
      "bad_declaration",
      "The announced size or fingerprint of the file is not usable. Choose the file again.",
    );
  }
  return { sizeBytes: declared.sizeBytes, sha256 };
}

/**
 * Clips a range to an object, as HTTP does.
 * @throws InvalidInputError `range_outside` where no byte of it exists
 */
export function rangeWithin(totalBytes: number, range?: ByteRange): { firstByte: number; sizeBytes: number } {
  if (range === undefined) return { firstByte: 0, sizeBytes: totalBytes };
  const { firstByte, lastByte = totalBytes - 1 } = range;
  const whole = [firstByte, lastByte].every(Number.isSafeInteger);
  if (!whole || firstByte < 0 || lastByte < firstByte || firstByte >= totalBytes) throw rangeOutside();
  return { firstByte, sizeBytes: Math.min(lastByte, totalBytes - 1) - firstByte + 1 };
}

export function rangeOutside(): InvalidInputError {
  return new InvalidInputError(
    "range_outside",
    "The asked range lies outside the file. Ask for the file from its start.",
  );
}

/** @throws InvalidInputError `bad_page` for anything but 1 to 1,000 */
export function pageLimit(limit = 1000): number {
  if (Number.isInteger(limit) && limit >= 1 && limit <= 1000) return limit;
  throw new InvalidInputError("bad_page", "A page of the store holds 1 to 1,000 names.");
}

/**
 * A stream that gives exactly the bytes that were announced or ends with an error, never fewer in silence.
 * @param source opened already
 * @param typed turns an error of the source into one of ours
 * @param close runs once when the stream is done with, even if not a byte of it was read
 */
export function checkedStream(
  source: ByteSource,
  sizeBytes: number,
  typed: (error: unknown) => TwinpassError,
  signal: AbortSignal | undefined,
  close: () => unknown,
): Readable {
  async function* exact() {
    let seen = 0;
    try {
      for await (const chunk of source) {
        seen += chunk.byteLength;
        yield chunk;
      }
    } catch (error) {
      throw typed(error);
    }
    if (seen !== sizeBytes) {
      throw new UnavailableError(
        "stored_bytes_short",
        "The file store ended a file early. Try again; if it stays so, check the store.",
      );
    }
  }
  const stream = Readable.from(exact(), { objectMode: false, signal });
  // A generator that was never started runs no `finally`, so the handle behind it is closed here.
  stream.once("close", close);
  return stream;
}
