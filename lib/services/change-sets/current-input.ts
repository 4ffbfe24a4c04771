import type { Queryable } from "@/db/client";
import { type ChangeSetRow, type SideRow, selectChangeSetOf } from "@/db/queries/change-sets";
import { READER_VERSION } from "@/lib/calibration/reader-version";
import { digestOf } from "@/lib/canonical-json";

type Side = Pick<SideRow, "imageSha256" | "imageFileName" | "imageBaseAddress" | "descriptionId">;

const partsOf = ({ imageSha256, imageFileName, imageBaseAddress, descriptionId }: Side) => ({
  imageSha256,
  imageFileName,
  imageBaseAddress,
  descriptionId,
});

/** SHA-256 over everything that the change set from A to B is worked out from now: another one is out of date. */
export function changeSetInputSha256(a: Side, b: Side): string {
  return digestOf({ readerVersion: READER_VERSION, a: partsOf(a), b: partsOf(b) });
}

/** The change set from A to B for what counts now; null where nobody has asked for it. Asks no policy. */
export async function currentChangeSet(
  db: Queryable,
  { workspaceId, a, b }: { workspaceId: string; a: Side & { id: string }; b: Side & { id: string } },
): Promise<ChangeSetRow | null> {
  const inputSha256 = changeSetInputSha256(a, b);
  return await selectChangeSetOf(db, { workspaceId, revisionAId: a.id, revisionBId: b.id, inputSha256 });
}
