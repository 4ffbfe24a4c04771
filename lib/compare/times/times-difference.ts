import { type ComparedRun, type RunDesign, runDesign } from "@/lib/compare/band/run-design";
import { LEAST_RUNS } from "@/lib/compare/band/side-effect";
import { COVERAGE } from "@/lib/measure/curve/uncertainty-budget";
import type { LegCounts, TimeDifference } from "@/lib/measure/sprint/time-types";
import type { Reason } from "@/lib/measure/types";
import { tQuantile } from "@/lib/signal/distributions";
import { leastSquares } from "@/lib/signal/least-squares";
import { mean } from "@/lib/signal/statistics";

/** A usable run with its times and what the road's fall adds to each (absent: not known), with their standard uncertainties. */
export interface TimedRun extends ComparedRun {
  kind: "pull" | "sprint";
  timesS: Readonly<Record<string, number>>;
  uncertaintiesS: Readonly<Record<string, number>>;
  fallEffectsS: Readonly<Record<string, number>>;
  fallUncertaintiesS: Readonly<Record<string, number>>;
}

interface Sides {
  a: string;
  b: string;
  level: number;
}

const rms = (list: readonly number[]) => Math.sqrt(mean(list.map((x) => x * x)));

/**
 * Times of side B against side A, a roll-on of a pull and a sprint's kept apart: name as in `times_s`, with " in a sprint" where
 * pulls have it too. Each side's time is the mean of out and back; B − A comes from a linear model with side, leg and, where
 * there are runs enough, order and road day. A name that a side lacks is left out.
 */
export function timesDifference(
  runs: readonly TimedRun[],
  settings: Sides,
): { times: Record<string, TimeDifference>; warnings: Reason[] } {
  const times: Record<string, TimeDifference> = {};
  const compared: TimedRun[] = [];
  for (const kind of ["pull", "sprint"] as const) {
    const members = runs.filter(
      (run) => run.kind === kind && (run.side === settings.a || run.side === settings.b),
    );
    for (const name of new Set(members.flatMap((run) => Object.keys(run.timesS)))) {
      const rows = members.filter((run) => run.timesS[name] !== undefined);
      const difference = oneTime(rows, name, settings);
      if (!difference) continue;
      times[name in times ? `${name} in a sprint` : name] = { kind, ...difference };
      if (kind === "sprint") compared.push(...rows.filter((run) => !compared.includes(run)));
    }
  }
  return { times, warnings: legWarnings(compared, settings) };
}

function oneTime(rows: readonly TimedRun[], name: string, settings: Sides): TimeDifference | null {
  const of = (side: string) => rows.filter((run) => run.side === side);
  const [a, b] = [of(settings.a), of(settings.b)];
  if (a.length === 0 || b.length === 0) return null;
  const counts = { n_a: a.length, n_b: b.length, legs_a: legCounts(a), legs_b: legCounts(b) };
  const own = { a: ownHalf(a, name), b: ownHalf(b, name) };
  const design = timeDesign(rows, settings, Math.min(a.length, b.length));
  if (!design) {
    const [meanA, meanB] = [legMean(a, name), legMean(b, name)];
    const none = { half_width_s: null, a_half_width_s: null, b_half_width_s: null };
    return { a_s: meanA, b_s: meanB, difference_s: meanB - meanA, ...none, ...counts };
  }
  const { columns, matrix, side } = design;
  const fit = leastSquares(
    matrix,
    Float64Array.from(rows, (run) => run.timesS[name]),
    columns,
  );
  const t = tQuantile(0.5 + settings.level / 2, fit.df);
  // Leg and order are coded around their middle, so 0 is the mean of both legs; road days at their share of the runs.
  const place = Float64Array.from({ length: columns }, (_, j) =>
    design.names[j] === "road day"
      ? mean(rows.map((_run, r) => matrix[r * columns + j]))
      : design.names[j] === "mean"
        ? 1
        : 0,
  );
  const valueAt = (sideB: number, ownS: number | null) => {
    const x = place.slice();
    x[side] = sideB;
    let value = 0;
    let variance = 0;
    for (let i = 0; i < columns; i++) {
      value += x[i] * fit.coefficients[i];
      for (let j = 0; j < columns; j++) variance += x[i] * x[j] * fit.unscaledCovariance[i * columns + j];
    }
    const scatter = t * fit.residualSd * Math.sqrt(Math.max(0, variance));
    return { value, half: ownS === null ? null : Math.hypot(scatter, ownS) };
  };
  const [atA, atB] = [valueAt(0, own.a), valueAt(1, own.b)];
  return {
    a_s: atA.value,
    b_s: atB.value,
    difference_s: fit.coefficients[side],
    half_width_s: Math.hypot(t * fit.standardErrors[side], fallBetween(a, b, name)),
    a_half_width_s: atA.half,
    b_half_width_s: atB.half,
    ...counts,
  };
}

/** The fullest model that leaves degrees of freedom: with order from three runs a side on, else without; null when none does. */
function timeDesign(rows: readonly TimedRun[], { b }: Sides, smallest: number): RunDesign | null {
  if (smallest < 2) return null;
  const full = runDesign(rows, b);
  if (smallest >= LEAST_RUNS && "matrix" in full && rows.length - full.columns >= 2) return full;
  const plain = runDesign(
    rows.map((run) => ({ ...run, order: null })),
    b,
  );
  return "matrix" in plain && rows.length - plain.columns >= 1 ? plain : null;
}

/** Mean of the means of each leg; of all runs when a leg is not known. */
function legMean(runs: readonly TimedRun[], name: string): number {
  const of = (leg: string) => runs.filter((run) => run.leg === leg).map((run) => run.timesS[name]);
  const known = runs.every((run) => run.leg !== null);
  const legs = [of("out"), of("back")].filter((list) => list.length > 0);
  return known ? mean(legs.map(mean)) : mean(runs.map((run) => run.timesS[name]));
}

/**
 * What a side's time is uncertain by beside its scatter: instruments, and on one leg the fall, which no mean takes out: its effect
 * and twice the uncertainty of that. Null where the fall is not known: nothing bounds its effect then.
 */
function ownHalf(runs: readonly TimedRun[], name: string): number | null {
  const instruments = COVERAGE * rms(runs.map((run) => run.uncertaintiesS[name] ?? 0));
  const { out, back } = legCounts(runs);
  if (out > 0 && back > 0) return instruments;
  const fall = fallOf(runs, name);
  return fall && Math.hypot(instruments, fall.effectS, COVERAGE * fall.uncertaintyS);
}

/** The fall's mean effect on a time. Runs of one road share what is uncertain about its fall, so their mean is no better known. */
function fallOf(runs: readonly TimedRun[], name: string): { effectS: number; uncertaintyS: number } | null {
  const known = runs.flatMap(
    ({ fallEffectsS: { [name]: effectS }, fallUncertaintiesS: { [name]: uncertaintyS } }) =>
      effectS === undefined || uncertaintyS === undefined ? [] : [{ effectS, uncertaintyS }],
  );
  if (known.length === 0) return null;
  const over = (key: "effectS" | "uncertaintyS") => mean(known.map((fall) => fall[key]));
  return { effectS: over("effectS"), uncertaintyS: over("uncertaintyS") };
}

/** All runs on one leg: what the fall did to the sides differently, s; what is uncertain about it is common to both. */
function fallBetween(a: readonly TimedRun[], b: readonly TimedRun[], name: string): number {
  const legs = new Set([...a, ...b].map((run) => run.leg));
  if (legs.size > 1 && !legs.has(null)) return 0;
  const [fallA, fallB] = [fallOf(a, name), fallOf(b, name)];
  return fallA && fallB ? Math.abs(fallB.effectS - fallA.effectS) : 0;
}

function legCounts(runs: readonly TimedRun[]): LegCounts {
  const count = (leg: string | null) => runs.filter((run) => run.leg === leg).length;
  return { out: count("out"), back: count("back"), unknown: count(null) };
}

function legWarnings(runs: readonly TimedRun[], settings: Sides): Reason[] {
  return [settings.a, settings.b].flatMap((side): Reason[] => {
    const members = runs.filter((run) => run.side === side);
    const { out, back, unknown } = legCounts(members);
    if (members.length === 0 || (out > 0 && back > 0)) return [];
    if (unknown > 0) {
      return [
        {
          code: "sprint_leg_not_known",
          message: `Side ${side}: some sprints don't say whether they went out or back, so wind and slope stay in their times. State the leg of every run.`,
        },
      ];
    }
    const names = [...new Set(members.flatMap((run) => Object.keys(run.timesS)))];
    const untold = names.filter((name) => !fallOf(members, name));
    const inIt =
      untold.length === 0
        ? "the fall's effect and its uncertainty are in its ±, the wind's are not."
        : `what the fall does to ${untold.length === names.length ? "them" : untold.join(", ")} is not known, so no ± of the side's own is stated there. Log altitude.`;
    return [
      {
        code: "sprints_one_leg",
        message: `Side ${side}: the sprints went ${out > 0 ? "out" : "back"} only, so wind and slope stay in their times; ${inIt} Drive both ways: the mean of out and back is the result.`,
      },
    ];
  });
}
