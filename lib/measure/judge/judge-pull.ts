import type { CampaignEstimate } from "@/lib/measure/estimate-campaign";
import { ratioNotes } from "@/lib/measure/judge/gearing";
import { resistanceNotes, torqueNotes } from "@/lib/measure/judge/plausible";
import type { CampaignVehicle, FactorResult, Note, Series } from "@/lib/measure/types";

/** What of a pull's own result its judgement needs. */
export interface JudgedPull {
  factor: FactorResult;
  /** Whether the road day carries absolute figures. */
  absolute: boolean;
  /** Crank torque along the grid, N·m; null = gap. */
  torqueNm: Series;
}

/** What only the estimate over all runs tells of one pull: losses, gearing, leg and what was typed against it, what nothing checks. */
export function judgePull(
  estimate: CampaignEstimate,
  index: number,
  vehicle: CampaignVehicle,
  { factor, absolute, torqueNm }: JudgedPull,
): Note[] {
  const { run, segments } = estimate.runs[index];
  const { model } = estimate;
  const { massKg } = estimate.drivelines[index];
  const { day, run: road } = estimate.roads[index];
  const notes = coastNotes(absolute, segments.coast !== null);
  notes.push(...ratioNotes(model.channels.get("engineSpeed")?.scale ?? null, run, vehicle));
  if (absolute) {
    notes.push(...resistanceNotes(day, massKg));
    const peakNm = torqueNm.reduce<number>((top, nm) => Math.max(top, nm ?? 0), 0);
    notes.push(...torqueNotes(peakNm, vehicle, massKg));
  }
  if (factor.in_range === false) {
    notes.push({ code: "factor_out_of_range", consequence: "warned", message: factor.why });
  }
  const { track } = road;
  if (track.located && run.leg && (run.leg === "out" ? 1 : -1) !== track.direction) {
    notes.push({
      code: "leg_disagrees",
      consequence: "warned",
      message: `The GPS track runs against the leg that was typed (${run.leg}). Check out and back.`,
    });
  }
  if (model.scaleFrom !== "gps") {
    notes.push({
      code: "scale_not_checked",
      consequence: "warned",
      message:
        "Without a GPS speed the wheel speed's scale is taken as it is; the absolute figures carry its error twice. Log GPS, or measure the rolling circumference.",
    });
  }
  if (model.base === "driven" || model.base === "engineSpeed") {
    notes.push({
      code: "slip_not_checked",
      consequence: "warned",
      message:
        "Only driven wheels tell the speed: wheel spin and clutch slip can't be seen. Log an undriven wheel or GPS.",
    });
  }
  return notes;
}

function coastNotes(absolute: boolean, own: boolean): Note[] {
  if (!absolute) {
    return [
      {
        code: "no_coast_down",
        consequence: "warned",
        message:
          "The neutral coast-downs of this road day cover less than 20 km/h between them: a difference can be shown, an absolute power can't. Let the car roll in neutral after a pull.",
      },
    ];
  }
  if (own) return [];
  return [
    {
      code: "no_own_coast_down",
      consequence: "warned",
      message:
        "This run has no coast-down of its own; the losses come from the road day's other runs. Let the car roll in neutral after each pull.",
    },
  ];
}
