import type { RelevanceMark } from "@/lib/calibration/changes/relevance";
import type { ChangeSet } from "@/lib/calibration/changes/types";
import type { Coverage } from "@/lib/calibration/coverage/types";
import type { RegionResult } from "@/lib/calibration/image/checksum-regions";
import type { CampaignResult, CampaignVehicle, Leg } from "@/lib/measure/types";

/** One counted run as the gates see it; null = not known. */
export interface EvidenceRun {
  /** The same id as in the result. */
  id: string;
  side: "A" | "B";
  leg: Leg | null;
  order: number | null;
  roadDay: string | null;
  gear: number | null;
  massKg: number | null;
  tempC: number | null;
  pressureHpa: number | null;
  tyreFrontKpa: number | null;
  tyreRearKpa: number | null;
  /** The fuel as noted for the road day. */
  fuel: string | null;
}

/** What is known of the candidate's calibration; null members are not known yet. */
export interface CalibrationEvidence {
  /** What stands → candidate; null: not computed yet. */
  fromStanding: ChangeSet | null;
  /** Parent → candidate; the same object where the parent stands. */
  fromParent: ChangeSet | null;
  /** Of the change set `fromStanding`, by usable runs of the candidate of any kind. */
  coverage: Coverage | null;
  coverageState: "ready" | "computing" | "no_runs";
  /** `regions`: [] = no region is declared. */
  integrity: { fingerprintHolds: boolean | null; regions: RegionResult[] | null };
  /** The newest version of the programme's marks. */
  marks: readonly RelevanceMark[];
  /** The revision's own answer to whether it touches emission- or safety-relevant functions; null: not answered. */
  declaresTouch: boolean | null;
  intendedUse: "road" | "closed_course" | "bench" | null;
}

/** What the gates of a revision are evaluated on: the comparison with what stands, and the conditions of its runs. */
export interface GateEvidence {
  /** Result of the comparison under the standard settings, A = what stands, B = the candidate; null when there is none. */
  result: CampaignResult | null;
  /** All counted runs of both sides, usable or not. */
  runs: readonly EvidenceRun[];
  redlineRpm: number;
  /** From the vehicle sheet; null where there is none. */
  engine: CampaignVehicle["engine"] | null;
  aspiration: CampaignVehicle["aspiration"] | null;
  /** Null where there is nothing to say, e.g. while nothing stands. */
  calibration: CalibrationEvidence | null;
}

/** The counted runs that the analysis found usable as pulls. */
export function usableRuns({ result, runs }: GateEvidence): EvidenceRun[] {
  const usable = new Set(result?.runs.flatMap((run) => (run.usable && run.segments?.pull ? [run.id] : [])));
  return runs.filter((run) => usable.has(run.id));
}
