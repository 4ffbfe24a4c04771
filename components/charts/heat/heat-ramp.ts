const STEPS = ["heat-a3", "heat-a2", "heat-a1", "heat-0", "heat-b1", "heat-b2", "heat-b3"] as const;

/** Class of one step of the diverging ramp (charts.css). */
export type HeatStep = (typeof STEPS)[number];

/**
 * Step of the ramp for a difference B − A: thirds of the largest difference in the table to either side, plain paper
 * for none. Null (not comparable) and a table without a difference are plain.
 */
export function heatStep(value: number | null, largest: number): HeatStep {
  if (value === null || value === 0 || largest <= 0) return "heat-0";
  const third = Math.min(3, Math.ceil((Math.abs(value) / largest) * 3 - 1e-9));
  return STEPS[3 + Math.sign(value) * third] ?? "heat-0";
}
