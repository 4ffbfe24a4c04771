import type { SideRow } from "@/db/queries/change-sets";
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
