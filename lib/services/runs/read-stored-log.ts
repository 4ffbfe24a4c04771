import { FileRefusedError } from "@/lib/errors";
import type { ReadLogOptions } from "@/lib/logs/read-log";
import { readLogStream } from "@/lib/logs/read-log-stream";
import type { LogTable } from "@/lib/logs/types";
import { streamBlob } from "@/lib/services/blobs";
import type { Ctx } from "@/lib/services/ctx";

/**
 * Reads a run's log from the store piece by piece. A log that is refused is an outcome, not an error; bytes that changed in
 * the store are an error even where the log is refused for them.
 * @throws NotFoundError, UnavailableError as streamBlob
 */
export async function readStoredLog(
  where: Pick<Ctx, "store" | "workspaceId">,
  log: { sha256: string; sizeBytes: number },
  options: ReadLogOptions,
): Promise<LogTable | FileRefusedError> {
  const pieces = streamBlob(where, log.sha256);
  // The iterator is kept open, so that bytes which the reader left (after a refusal, behind a packed log) still count into the fingerprint.
  const source = { [Symbol.asyncIterator]: () => ({ next: () => pieces.next() }) };
  try {
    const outcome = await readLogStream(source, log.sizeBytes, options).catch((error) => {
      if (error instanceof FileRefusedError) return error;
      throw error;
    });
    while (!(await pieces.next()).done);
    return outcome;
  } finally {
    await pieces.return();
  }
}
