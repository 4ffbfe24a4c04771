import type { RevisionRow } from "@/db/queries/revisions";
import { ConflictError, NotFoundError, UnavailableError } from "@/lib/errors";
import { streamBlob } from "@/lib/services/blobs";
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
    const isLost =
      error instanceof NotFoundError ||
      (error instanceof UnavailableError && error.code === "integrity_failed");
    if (!isLost) throw error;
    throw new ConflictError(
      "image_damaged",
      `The stored image of R${number} no longer has its fingerprint, so it can't be released. Nothing was decided. Tell whoever runs this installation.`,
    );
  }
}
