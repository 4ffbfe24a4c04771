import type { Queryable } from "@/db/client";
import { selectImageCheck } from "@/db/queries/image-readings";
import type { RegionResult } from "@/lib/calibration/image/checksum-regions";

/** What a revision's stored image was last found to be, for a version of the regions; null members until it was checked. */
export async function imageIntegrity(
  db: Queryable,
  place: { workspaceId: string; revisionId: string; regionsVersion: number },
): Promise<{ fingerprintHolds: boolean | null; regions: RegionResult[] | null }> {
  const check = await selectImageCheck(db, place);
  return {
    fingerprintHolds: check?.result.fingerprintHolds ?? null,
    regions: check?.result.regions ?? null,
  };
}
