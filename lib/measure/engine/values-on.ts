import type { Series } from "@/lib/measure/types";

/** Values of a curve at those points of another grid that both have; null elsewhere. */
export function valuesOn(grid: readonly number[], rpm: readonly number[], values: Series): Series {
  const at = new Map(rpm.map((x, k) => [x, values[k]]));
  return grid.map((x) => at.get(x) ?? null);
}
