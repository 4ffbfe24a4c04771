import { createHash } from "node:crypto";
import { InvalidInputError, TooLargeError, TwinpassError } from "@/lib/errors";
import type { ByteSource, DeclaredBytes } from "@/storage/port";

/** The sender went away: `body_interrupted`. */
export function interrupted(cause: unknown): InvalidInputError {
  const error = new InvalidInputError(
    "body_interrupted",
    "The bytes stopped coming before the file was complete. Nothing was stored; send it again.",
  );
  error.cause = cause;
  return error;
}

/** Settles when the signal aborts; never resolves. The caller must call `forget`. */
function abortion(signal: AbortSignal | undefined): { promise?: Promise<never>; forget: () => void } {
  if (signal === undefined) return { forget: () => undefined };
  if (signal.aborted) throw interrupted(signal.reason);
  let listener: () => void = () => undefined;
  const promise = new Promise<never>((_, reject) => {
    listener = () => reject(interrupted(signal.reason));
    signal.addEventListener("abort", listener, { once: true });
  });
  promise.catch(() => undefined);
  return { promise, forget: () => signal.removeEventListener("abort", listener) };
}

/**
 * Passes bytes on while counting and hashing them. Read to the end without an error, they are what was declared.
 * @param source read once; closed when the reading stops early
 * @throws TooLargeError `body_too_long` before the first byte too many is passed on;
 *   InvalidInputError `body_too_short`, `digest_mismatch`, `body_interrupted` (source failed or signal aborted);
 *   a TwinpassError of the source as it is
 */
export async function* checkedSource(
  source: ByteSource,
  declared: DeclaredBytes,
  signal?: AbortSignal,
): AsyncGenerator<Uint8Array, void, undefined> {
  const hash = createHash("sha256");
  const iterator = source[Symbol.asyncIterator]();
  const abort = abortion(signal);
  let sizeBytes = 0;
  let ended = false;
  try {
    for (;;) {
      const next = iterator.next();
      const step = await (abort.promise === undefined ? next : Promise.race([next, abort.promise]));
      if (step.done === true) break;
      sizeBytes += step.value.byteLength;
      if (sizeBytes > declared.sizeBytes) {
        throw new TooLargeError(
          "body_too_long",
          `More bytes came than the ${declared.sizeBytes} that were announced. Nothing was stored; choose the file again.`,
        );
      }
      hash.update(step.value);
      if (step.value.byteLength > 0) yield step.value;
    }
    ended = true;
  } catch (error) {
    throw error instanceof TwinpassError ? error : interrupted(error);
  } finally {
    abort.forget();
    // Not awaited: a source that hangs would hold the failed request too.
    if (!ended) iterator.return?.().then(undefined, () => undefined);
  }
  if (sizeBytes < declared.sizeBytes) {
    throw new InvalidInputError(
      "body_too_short",
      `Only ${sizeBytes} of the ${declared.sizeBytes} announced bytes came. Nothing was stored; send it again.`,
    );
  }
  const sha256 = hash.digest("hex");
  if (declared.sha256 !== undefined && sha256 !== declared.sha256) {
    throw new InvalidInputError(
      "digest_mismatch",
      "The bytes that came are not the bytes that were announced: their fingerprints differ. Nothing was stored; send the file again.",
      { declaredSha256: declared.sha256, receivedSha256: sha256 },
    );
  }
}
