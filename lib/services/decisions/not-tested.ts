import type { ComparisonInput } from "@/db/schema/comparisons";
import type { CampaignResult } from "@/lib/measure/types";

const whole = (value: number) =>
  Math.round(value)
    .toString()
    .replace(/\B(?=(\d{3})+$)/g, "\u202f");

/** Values of one fact over the runs, as typed for them. */
function facts(input: ComparisonInput, name: string): unknown[] {
  return input.runs.map((run) => (JSON.parse(run.fields) as Record<string, unknown>)[name] ?? null);
}

const numbers = (values: readonly unknown[]): number[] =>
  values.filter((value): value is number => typeof value === "number");

function range(input: ComparisonInput, name: string, unit: string): string | null {
  const values = numbers(facts(input, name));
  if (values.length === 0) return null;
  const [low, high] = [whole(Math.min(...values)), whole(Math.max(...values))];
  return low === high ? `${low} ${unit}` : `${low} to ${high} ${unit}`;
}

/** Engine speeds over which the band holds, first and last; null without a band. */
function bandSpan(result: CampaignResult): [number, number] | null {
  const { delta } = result;
  const held = delta?.rpm.filter((_, index) => delta.low_pct[index] !== null) ?? [];
  const first = held[0];
  const last = held.at(-1);
  return first === undefined || last === undefined ? null : [first, last];
}

/**
 * What a decision's evidence does not reach, one sentence each: a result holds for what was driven and for nothing else.
 * @param compared what the comparison was computed from and what came out; null when the decision rests on none
 */
export function notTested(compared: { input: ComparisonInput; result: CampaignResult } | null): string[] {
  const always = [
    "Light load, sustained load, cold start and part load: no such runs are compared.",
    "Mixture, knock, exhaust temperature and fault memory: no gate judged them.",
  ];
  if (!compared) return ["Nothing was compared on the road for this decision.", ...always];
  const { input, result } = compared;
  const span = bandSpan(result);
  const gears = [...new Set(numbers(facts(input, "gear")))].sort((a, b) => a - b);
  const temperature = range(input, "temperature", "°C");
  const pressure = range(input, "pressure", "hPa");
  return [
    span
      ? `Engine speeds below ${whole(span[0])} and above ${whole(span[1])} per minute.`
      : "No engine speed has a band: nothing is claimed anywhere.",
    gears.length > 0 ? `Other gears than ${gears.join(", ")}.` : null,
    temperature ? `Other air than ${temperature}${pressure ? ` and ${pressure}` : ""}.` : null,
    input.runs.some((run) => run.kind === "sprint")
      ? null
      : "Standing starts and set distances: no sprint was driven.",
    ...always,
    "Any other vehicle: these results relate only to this vehicle on these days.",
  ].filter((sentence) => sentence !== null);
}
