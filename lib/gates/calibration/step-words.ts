import type { CharacteristicChange } from "@/lib/calibration/changes/types";
import type { TableStep } from "@/lib/gates/calibration/table-steps";
import { figure } from "@/lib/gates/verdict";

/** Cell by its place, counted from 0, and what the axes say there: "[3, 1] at 2,500 1/min, 120 kPa". */
function cellText({ after, before }: CharacteristicChange, index: readonly number[]): string {
  const axes = (after ?? before)?.axes ?? [];
  const places = axes.flatMap((axis, k) => {
    const point = axis.points[index[k]];
    const text = typeof point === "number" ? figure(point, axis.decimals) : point;
    return text == null ? [] : [axis.unit ? `${text} ${axis.unit}` : text];
  });
  return `[${index.join(", ")}]${places.length > 0 ? ` at ${places.join(", ")}` : ""}`;
}

function valueText({ unit, decimals }: CharacteristicChange, value: number): string {
  return `${figure(value, decimals)}${unit ? ` ${unit}` : ""}`;
}

/** "Spark moves most at cell [3, 1] at 2,500 1/min, 120 kPa: 14.2 to 15 °", then what it measures. */
export function moveText(change: CharacteristicChange, step: TableStep, measured: string): string {
  const cell = step.index.length > 0 ? ` at cell ${cellText(change, step.index)}` : "";
  return `${change.name} moves most${cell}: ${figure(step.from, change.decimals)} to ${valueText(change, step.to)}${measured}`;
}

/** "Spark steps most from cell [3, 1] at 2,500 1/min to [4, 1] at 3,000 1/min: 14.2 to 18 °", then what it measures. */
export function stepText(change: CharacteristicChange, step: TableStep, measured: string): string {
  const next = step.next ? ` to ${cellText(change, step.next)}` : "";
  return `${change.name} steps most from cell ${cellText(change, step.index)}${next}: ${figure(step.from, change.decimals)} to ${valueText(change, step.to)}${measured}`;
}
