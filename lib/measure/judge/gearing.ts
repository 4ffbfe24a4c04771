import { fixed, signedPercent } from "@/lib/measure/judge/words";
import type { Segments } from "@/lib/measure/run/find-segments";
import type { RunSignals } from "@/lib/measure/run/run-signals";
import type { CampaignRun, CampaignVehicle, Note } from "@/lib/measure/types";
import { readTyreMarking, rollingCircumference, rpmPerMps } from "@/lib/measure/vehicle/vehicle";
import { median, quantile } from "@/lib/signal/statistics";
import { MILE_M } from "@/lib/units/constants";

/** Neighbouring gears differ by more than 12 %; tyre wear and growth stay below 4 % [common practice, no source]. */
const RATIO_LIMIT = 0.06;
const FITS = 0.04;
/** The sheet's own figures must agree this well: markings are good to 1.5 %, wear adds 2 % [common practice, no source]. */
const SHEET_LIMIT = 0.05;
/** An engine overshoots its typed red line by less than this before the limiter has it. */
const OVERSHOOT = 1.04;
/** Kilometres a mile. */
const MILE = MILE_M / 1000;

/** Findings from gear channel, engine speed and sheet before anything is estimated. All warn. */
export function gearingNotes(
  signals: RunSignals,
  { pull }: Segments,
  run: CampaignRun,
  vehicle: CampaignVehicle,
): Note[] {
  const notes = sheetNotes(vehicle);
  if (!pull) return notes;
  const inside = (rows: Float64Array) =>
    rows.filter((_, i) => signals.timeS[i] >= pull.from_s && signals.timeS[i] <= pull.to_s);
  const gear = signals.gearRows ? median(inside(signals.gearRows)) : Number.NaN;
  if (run.gear != null && Number.isFinite(gear) && Math.round(gear) !== run.gear) {
    notes.push({
      code: "gear_channel_disagrees",
      consequence: "warned",
      ...pull,
      message: `The log's gear channel says ${Math.round(gear)} during the pull, typed is ${run.gear}. Check which gear was driven; the curve's engine speed rests on it where none is logged.`,
    });
  }
  if (!signals.gearRows && !(signals.engineSpeed && rpmPerMps(vehicle, run.gear))) {
    notes.push({
      code: "gear_not_checked",
      consequence: "warned",
      ...pull,
      message: signals.engineSpeed
        ? "The log has no gear channel and the sheet does not tell engine from road speed: the typed gear is taken on trust. Log the gear, or state a speed read off at an engine speed."
        : "The log has neither gear nor engine speed: the typed gear and the sheet's gearing are taken on trust. Log engine speed.",
    });
  }
  const top = signals.engineRows ? quantile(inside(signals.engineRows), 0.99) : Number.NaN;
  if (top > OVERSHOOT * vehicle.redline_rpm) {
    notes.push({
      code: "above_red_line",
      consequence: "warned",
      ...pull,
      message: `The engine turns ${fixed(top, 0)} 1/min in the pull, above the typed red line of ${fixed(vehicle.redline_rpm, 0)}. Correct the sheet, or check the unit of the engine speed.`,
    });
  }
  return notes;
}

/** What the sheet says twice must agree: the speed read off at an engine speed, gear and final drive, the tyre. */
function sheetNotes(vehicle: CampaignVehicle): Note[] {
  const marked = vehicle.tyre ? readTyreMarking(vehicle.tyre)?.circumferenceM : undefined;
  const used = rollingCircumference(vehicle);
  if (!marked || !used || used.source === "tyre marking") return [];
  const off = used.value / marked - 1;
  if (Math.abs(off) < SHEET_LIMIT) return [];
  return [
    {
      code: "sheet_disagrees",
      consequence: "warned",
      message: `The sheet contradicts itself: its ${used.source === "vehicle sheet" ? "rolling circumference" : "speed at an engine speed with gear ratio and final drive"} makes ${fixed(used.value, 3)} m a turn, the tyre ${vehicle.tyre} makes ${fixed(marked, 3)} m (${signedPercent(off)}). Correct the one that is wrong.`,
    },
  ];
}

/**
 * What the measured engine speed per road speed (1/min per m/s) says of the typed gear: which gear fits, two that fit, or a speed in
 * miles. `measured` null: nothing.
 */
export function ratioNotes(measured: number | null, run: CampaignRun, vehicle: CampaignVehicle): Note[] {
  const stated = rpmPerMps(vehicle, run.gear)?.value;
  if (!measured || !stated) return [];
  const off = measured / stated - 1;
  if (Math.abs(off) <= RATIO_LIMIT) return [];
  const fitting = (factor: number) =>
    (vehicle.gear_ratios ?? []).flatMap((_, k) => {
      const value = rpmPerMps(vehicle, k + 1)?.value;
      return value && Math.abs((measured * factor) / value - 1) < FITS ? [k + 1] : [];
    });
  const gears = fitting(1);
  const guesses = [
    gears.length > 0 ? `They fit gear ${gears.join(" or ")}.` : "They fit no gear of the sheet.",
    Math.abs(off + 1 - MILE) < FITS * MILE || Math.abs((off + 1) * MILE - 1) < FITS
      ? "A speed in miles an hour read as kilometres an hour, or the other way round, would do the same."
      : "",
  ].filter(Boolean);
  return [
    {
      code: "gear_disagrees",
      consequence: "warned",
      message: `Engine and road speed fit ${signedPercent(off, 0)} away from gear ${run.gear} of the vehicle sheet; what was measured is used. ${guesses.join(" ")} Check the gear, and the sheet's ratio, final drive and tyre.`,
    },
  ];
}
