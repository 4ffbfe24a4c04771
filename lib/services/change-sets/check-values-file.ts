import { checkValues, type ValuesCheck } from "@/lib/calibration/cdf/check-values";
import { readCdfx } from "@/lib/calibration/cdf/read-cdfx";
import { TooLargeError } from "@/lib/errors";
import { findRevisionReading } from "@/lib/services/change-sets/revision-reading";
import { LARGEST_VALUES_FILE_BYTES, MOST_LISTED_VALUES } from "@/lib/services/change-sets/schema";
import { openReading } from "@/lib/services/change-sets/stored-reading";
import type { Ctx } from "@/lib/services/ctx";
import { limitTries } from "@/lib/services/limit-tries";

/**
 * Holds the values of a revision's image against a values file (CDFX). The file is neither kept nor noted: nothing rests on it.
 * @param body taken only when the asker may have the values and they are there; at most 16 MB of it are read
 * @throws ForbiddenError; NotFoundError; ConflictError `no_values`; TooManyRequestsError; TooLargeError; FileRefusedError
 */
export async function checkValuesFile(
  ctx: Ctx,
  { revisionId, body }: { revisionId: string; body: AsyncIterable<Uint8Array> },
): Promise<ValuesCheck> {
  const { blobSha256 } = await findRevisionReading(ctx, revisionId);
  await limitTries(ctx.db, { doing: "check values files", userId: ctx.userId });
  const file = readCdfx(await readBounded(body));
  return checkValues(await openReading(ctx, blobSha256), file, MOST_LISTED_VALUES);
}

async function readBounded(body: AsyncIterable<Uint8Array>): Promise<Uint8Array> {
  const pieces: Uint8Array[] = [];
  let sizeBytes = 0;
  for await (const piece of body) {
    sizeBytes += piece.length;
    if (sizeBytes > LARGEST_VALUES_FILE_BYTES)
      throw new TooLargeError(
        "values_file_too_large",
        `A values file has at most ${LARGEST_VALUES_FILE_BYTES / 1e6} MB here, this one has more. Export fewer values at once.`,
      );
    pieces.push(piece);
  }
  return Buffer.concat(pieces);
}
