import type { RevisionRow } from "@/db/queries/revisions";
import { ConflictError } from "@/lib/errors";
import { isLost, streamBlob } from "@/lib/services/blobs";
import type { Ctx } from "@/lib/services/ctx";

/**
 * Reads the stored image once more and checks its fingerprint, so that nothing is released that can't be given out.
 * @throws ConflictError `image_damaged`; UnavailableError when the store does not answer
 */
export async function requireWholeImage(
  ctx: Ctx,
  { number, imageSha256 }: Pick<RevisionRow, "number" | "imageSha256">,
): Promise<void> {
  try {
    for await (const _ of streamBlob(ctx, imageSha256));
  } catch (error) {
    if (!isLost(error)) throw error;
    throw new ConflictError(
      "image_damaged",
      `The stored image of R${number} no longer has its fingerprint, so it can't be released. Nothing was decided. Tell whoever runs this installation.`,
    );
  }
}
