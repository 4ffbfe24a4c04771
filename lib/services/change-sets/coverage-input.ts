import type { Queryable } from "@/db/client";
import { selectSetting } from "@/db/queries/calibration-settings";
import type { ChangeSetRow } from "@/db/queries/change-sets";
import { selectRunsForCoverage } from "@/db/queries/coverages";
import { selectVehicleSheet } from "@/db/queries/vehicle-sheets";
import type { AxisLink } from "@/lib/calibration/coverage/types";
import { READER_VERSION } from "@/lib/calibration/reader-version";
import { digestOf } from "@/lib/canonical-json";
import type { CampaignVehicle } from "@/lib/measure/types";

type Head = Pick<ChangeSetRow, "workspaceId" | "programmeId" | "revisionBId" | "inputSha256">;

/** What counts for the coverage of a change set at this moment. */
export interface CoverageInput {
  inputSha256: string;
  /** Usable runs of what changed, of any kind. */
  runs: Awaited<ReturnType<typeof selectRunsForCoverage>>;
  /** Chosen by people; axes without one are linked by title. */
  links: AxisLink[];
  drive: CampaignVehicle["drive"] | undefined;
}

/** Reads what counts now; another digest makes an earlier coverage out of date. */
export async function coverageInput(db: Queryable, changeSet: Head): Promise<CoverageInput> {
  const { workspaceId, programmeId, revisionBId: revisionId } = changeSet;
  const runs = await selectRunsForCoverage(db, { workspaceId, revisionId });
  const { content: links } = await selectSetting(db, { workspaceId, programmeId, kind: "axis_links" });
  const drive = (await selectVehicleSheet(db, { workspaceId, programmeId }))?.figures.drive;
  const inputSha256 = digestOf({
    readerVersion: READER_VERSION,
    changeSet: changeSet.inputSha256,
    runs: runs.map(({ id, logSha256, channelKeyId }) => ({ id, logSha256, channelKeyId })),
    links,
    drive,
  });
  return { inputSha256, runs, links, drive };
}
