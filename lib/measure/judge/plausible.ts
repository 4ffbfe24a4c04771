import { fixed } from "@/lib/measure/judge/words";
import type { CampaignVehicle, Note } from "@/lib/measure/types";
import { STANDARD_GRAVITY_MPS2 } from "@/lib/units/constants";

/** Limits of road cars and vans, wide on purpose [common practice, no source]: outside, a typed figure or the run is wrong. */
const DRAG_AREA_M2 = [0.3, 1.8] as const;
const ROLLING = [0.004, 0.03] as const;
/** The limits are far wider than what air density does to drag. */
const USUAL_DENSITY_KGM3 = 1.2;
/** Peak torque per litre, N·m/l; a naturally aspirated engine stays below 14 bar mean pressure, 111 N·m/l. */
const TORQUE_PER_LITRE = {
  natural: [30, 140],
  turbo: [40, 420],
  supercharged: [40, 350],
} as const;

/**
 * Whether the coast-downs' resistance is that of a road car at the typed mass. Both are proportional to the typed mass; what the
 * limits let through is not thereby right. `f0N` in N, `f2NPerMps2` in N per (m/s)².
 */
export function resistanceNotes(
  { f0N, f2NPerMps2 }: { f0N: number; f2NPerMps2: number },
  massKg: number,
): Note[] {
  const rolling = f0N / (massKg * STANDARD_GRAVITY_MPS2);
  const dragArea = (2 * f2NPerMps2) / USUAL_DENSITY_KGM3;
  const wrong = [
    outside(dragArea, DRAG_AREA_M2) &&
      `a drag area of ${fixed(dragArea, 2)} m² (a road car: ${DRAG_AREA_M2.join(" to ")})`,
    outside(rolling, ROLLING) &&
      `a rolling resistance of ${fixed(100 * rolling, 1)} % of the weight (a road car: ${ROLLING.map((x) => 100 * x).join(" to ")} %)`,
  ].filter(Boolean);
  if (wrong.length === 0) return [];
  return [
    {
      code: "resistance_implausible",
      consequence: "warned",
      message: `At the typed ${fixed(massKg, 0)} kg the coast-downs give ${wrong.join(" and ")}. Check the mass, the speed's unit, and that the car rolled in neutral without brake or wind.`,
    },
  ];
}

/** Whether the peak torque fits the displacement and the way the engine breathes; it goes with the typed mass and gearing. */
export function torqueNotes(peakNm: number, vehicle: CampaignVehicle, massKg: number): Note[] {
  const litres = vehicle.displacement_l;
  if (!litres) return [];
  const limits = TORQUE_PER_LITRE[vehicle.aspiration];
  const perLitre = peakNm / litres;
  if (!outside(perLitre, limits)) return [];
  return [
    {
      code: "torque_implausible",
      consequence: "warned",
      message: `A peak of ${fixed(peakNm, 0)} N·m from ${fixed(litres, 1)} l is ${fixed(perLitre, 0)} N·m a litre (usual with ${vehicle.aspiration === "natural" ? "natural aspiration" : `a ${vehicle.aspiration}`}: ${limits.join(" to ")}). Check the typed ${fixed(massKg, 0)} kg, gear, displacement and aspiration.`,
    },
  ];
}

function outside(value: number, [low, high]: readonly [number, number]): boolean {
  return value < low || value > high;
}
