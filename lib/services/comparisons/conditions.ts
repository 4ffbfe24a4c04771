import { massOf } from "@/lib/services/comparisons/build-campaign";
import type { CurrentInput } from "@/lib/services/comparisons/current-input";
import type { SideConditions, Spread } from "@/lib/services/comparisons/schema";

function spread(values: readonly (number | null)[]): Spread | null {
  const known = values.filter((value) => value !== null);
  if (known.length === 0) return null;
  return {
    min: Math.min(...known),
    mean: known.reduce((sum, value) => sum + value, 0) / known.length,
    max: Math.max(...known),
  };
}

const distinct = <T>(values: readonly T[]): T[] => [...new Set(values)];
const texts = (values: readonly string[]) => distinct(values.filter((text) => text.trim() !== ""));

/** The conditions of one side, from the runs that count now. */
export function sideConditions(
  current: Pick<CurrentInput, "runs" | "sheet">,
  side: "A" | "B",
): SideConditions {
  const runs = current.runs.filter((run) => run.side === side && run.counts);
  const days = new Map(runs.map(({ roadDayId: id, day, stripName }) => [id, { id, day, stripName }]));
  return {
    runs: runs.length,
    roadDays: [...days.values()],
    tempC: spread(runs.map((run) => run.tempC)),
    pressureHpa: spread(runs.map((run) => run.pressureHpa)),
    humidityPct: spread(runs.map((run) => run.humidityPct)),
    massKg: spread(runs.map((run) => massOf(current, run))),
    gears: distinct(runs.map((run) => run.gear).filter((gear) => gear !== null)).sort((a, b) => a - b),
    tyreFrontKpa: spread(runs.map((run) => run.tyrePressureFrontKpa)),
    tyreRearKpa: spread(runs.map((run) => run.tyrePressureRearKpa)),
    fuel: texts(runs.map((run) => run.fuelNote)),
    wind: texts(runs.map((run) => run.windNote)),
  };
}
