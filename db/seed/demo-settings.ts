import { CHECKSUM_REGION } from "@/db/seed/control-unit/place";
import type { People } from "@/db/seed/demo-steps";
import { saveRelevanceMarks } from "@/lib/services/calibration-settings/save-marks";
import { saveChecksumRegions } from "@/lib/services/calibration-settings/save-regions";

/** What a workshop states once of a programme's images: where a checksum lies, and what touches emissions or safety. */
export async function settleCalibration({ mia, ana }: People, programmeId: string): Promise<void> {
  await saveChecksumRegions(mia, { programmeId, basedOnVersion: 0, regions: [CHECKSUM_REGION] });
  await saveRelevanceMarks(ana, {
    programmeId,
    basedOnVersion: 0,
    marks: [
      {
        ...{ set: "characteristic", name: "Fuel.Exhaust_protection", relevance: "emission" },
        note: "Keeps the catalyst from overheating.",
      },
      {
        ...{ set: "characteristic", name: "Fuel.Lambda_control", relevance: "emission" },
        note: "Off means no closed loop at part load.",
      },
      { set: "function", name: "Limiter", relevance: "safety", note: "Ends of engine and road speed." },
    ],
  });
}
