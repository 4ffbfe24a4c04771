import type { BudgetComponent, UncertaintyBudget } from "@/lib/measure/types";

/** What a tester can do about each part; follows "…, …: ". */
const REMEDY: Readonly<Record<BudgetComponent, string>> = {
  mass: "weigh the car as driven and write the scale's uncertainty on the vehicle sheet",
  "speed scale": "log a GPS speed, or state a measured rolling circumference with its uncertainty",
  wind: "drive both directions, on a calmer day",
  grade: "drive both directions over the same stretch and log position",
  "rolling and air resistance": "let the car roll longer after each pull",
  "engine inertia": "write the engine's inertia with its uncertainty on the vehicle sheet",
  "wheel inertia": "write the wheels' inertia with its uncertainty on the vehicle sheet",
  "mesh efficiency": "write the efficiency of this driveline with its uncertainty on the vehicle sheet",
  weather: "read pressure and temperature at the car with better instruments",
  smoothing: "log faster, or with a finer speed channel",
  repeatability: "drive more runs",
};

/** The largest part of a budget, what would shrink it, and the ± in percent that would be left without it. Null when empty. */
export function budgetAdvice(
  budget: UncertaintyBudget,
): { component: BudgetComponent; remedy: string; leftPct: number } | null {
  const largest = [...budget.parts].sort((a, b) => b.standard_pct - a.standard_pct)[0];
  if (!largest) return null;
  const rest = budget.parts.filter((part) => part !== largest).map((part) => part.standard_pct);
  return {
    component: largest.component,
    remedy: REMEDY[largest.component],
    leftPct: budget.coverage_factor * Math.hypot(...rest),
  };
}

/** A part's name as it begins a line. The speed scale is where the rolling circumference comes in. */
export function componentName(component: BudgetComponent): string {
  if (component === "speed scale") return "Rolling circumference, speed scale";
  return component[0].toUpperCase() + component.slice(1);
}

/** The advice as a sentence. */
export function adviceSentence(budget: UncertaintyBudget): string | null {
  const advice = budgetAdvice(budget);
  if (!advice) return null;
  const [now, left] = [budget.expanded_pct, advice.leftPct].map((pct) => pct.toFixed(1));
  return `${componentName(advice.component)} is the largest part. To shrink it, ${advice.remedy}; were it known exactly, ± ${now} % would be ± ${left} %.`;
}
