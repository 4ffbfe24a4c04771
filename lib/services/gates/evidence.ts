import type { CalibrationEvidence, EvidenceRun, GateEvidence } from "@/lib/gates/evidence";
import type { CampaignResult } from "@/lib/measure/types";
import type { VehicleSheetFigures } from "@/lib/measure/vehicle/vehicle-sheet";
import { campaignRunId, massOf } from "@/lib/services/comparisons/build-campaign";
import type { ComparisonStanding } from "@/lib/services/comparisons/load";

/**
 * What the gates are evaluated on: the result shown and the runs that count now with their conditions.
 * @param calibration null when nothing stands
 * @param comparison null when nothing stands or nobody has compared yet: every gate then has too little
 */
export function gateEvidence(
  comparison: {
    current: ComparisonStanding["current"];
    shown: { result: CampaignResult } | null;
  } | null,
  sheet: Pick<VehicleSheetFigures, "redlineRpm" | "engine" | "aspiration"> | null,
  calibration: CalibrationEvidence | null,
): GateEvidence {
  const vehicle = {
    redlineRpm: sheet?.redlineRpm ?? 0,
    engine: sheet?.engine ?? null,
    aspiration: sheet?.aspiration ?? null,
    calibration,
  };
  if (!comparison) return { result: null, runs: [], ...vehicle };
  const { current, shown } = comparison;
  return {
    result: shown?.result ?? null,
    ...vehicle,
    runs: current.runs
      .filter((run) => run.counts)
      .map(
        (run): EvidenceRun => ({
          id: campaignRunId(run),
          side: run.side,
          leg: run.leg,
          order: run.order,
          roadDay: run.roadDayId,
          gear: run.gear,
          massKg: massOf(current, run),
          tempC: run.tempC,
          pressureHpa: run.pressureHpa,
          tyreFrontKpa: run.tyrePressureFrontKpa,
          tyreRearKpa: run.tyrePressureRearKpa,
          fuel: run.fuelNote,
        }),
      ),
  };
}
