import { readFileSync } from "node:fs";
import { gunzipSync } from "node:zlib";
import { groupOf, pooledT, welch } from "@/lib/compare/band/two-means";
import {
  incompleteBeta,
  logGamma,
  normalCdf,
  normalQuantile,
  tCdf,
  tQuantile,
} from "@/lib/signal/distributions";
import { noncentralTCdf } from "@/lib/signal/noncentral-t";
import { savitzkyGolay } from "@/lib/signal/savitzky-golay";
import { whittaker } from "@/lib/signal/whittaker";
import * as constants from "@/lib/units/constants";
import { differenceToCanonical, parseUnit } from "@/lib/units/unit-text";
import { runsPerSide } from "@/tests/support/runs-per-side";

/** One number of ours beside an outside program's, with the relative distance that is allowed (absolute below 1e-3). */
export interface Comparison {
  what: string;
  ours: number;
  outside: number;
  allowed: number;
}

/** What tests/soak/references.py prints; each row of a function ends with the outside value. */
export type ScipyReference = Record<string, number[][]> & {
  speed: unknown;
  versions: unknown;
};

/** A conversion as GNU Units states it. */
export interface UnitReference {
  kind: string;
  unit: string;
  from: string;
  to: string;
  factor: number;
}

const golden = (name: string) => readFileSync(new URL(`../golden/references/${name}`, import.meta.url));

/** The stored answers of tests/soak/references.py. */
export const goldenScipy = () =>
  JSON.parse(gunzipSync(golden("scipy.json.gz")).toString("utf8")) as ScipyReference;

/** The stored answers of GNU Units. */
export const goldenUnits = () =>
  (JSON.parse(golden("gnu-units.json").toString("utf8")) as { factors: UnitReference[] }).factors;

/** Distance of a comparison: relative, or absolute for values below 1e-3. */
export const distance = ({ ours, outside }: Comparison) =>
  Math.abs(ours - outside) / (Math.abs(outside) < 1e-3 ? 1 : Math.abs(outside));

const FUNCTIONS: Record<string, [allowed: number, ours: (...given: number[]) => number]> = {
  log_gamma: [1e-12, logGamma],
  incomplete_beta: [1e-11, incompleteBeta],
  normal_cdf: [1e-12, normalCdf],
  normal_quantile: [1e-11, normalQuantile],
  t_cdf: [1e-11, tCdf],
  t_quantile: [1e-10, tQuantile],
  noncentral_t_cdf: [1e-9, noncentralTCdf],
  runs_a_side: [0, (delta, power) => runsPerSide(delta, 0.05, power)],
};

/** Our numerics beside scipy's on the same input. */
export function scipyComparisons(reference: ScipyReference): Comparison[] {
  const out: Comparison[] = [];
  const add = (what: string, ours: number, outside: number, allowed: number) =>
    out.push({ what, ours, outside, allowed });
  for (const [name, [allowed, ours]] of Object.entries(FUNCTIONS))
    for (const row of reference[name])
      add(`${name}(${row.slice(0, -1).join(", ")})`, ours(...row.slice(0, -1)), row[row.length - 1], allowed);
  const numbers = (name: string) => Float64Array.from(reference[name] as unknown as number[]);
  for (const [window, degree, derivative, ...outside] of reference.savitzky_golay) {
    const ours = savitzkyGolay(numbers("speed"), window, degree, derivative, 0.04);
    outside.forEach((value, i) => {
      add(`savitzky_golay ${window}, ${degree}, ${derivative} at ${i}`, ours[i], value, 1e-9);
    });
  }
  for (const [penalty, order, ...outside] of reference.whittaker) {
    const ours = whittaker(numbers("torque"), penalty, order as 1 | 2 | 3).smooth;
    outside.forEach((value, i) => {
      add(`whittaker ${penalty}, ${order} at ${i}`, ours[i], value, 1e-10);
    });
  }
  const [first, second] = ["first", "second"].map((name) => groupOf([...numbers(name)]));
  for (const [name, test] of [
    ["welch", welch(first, second)],
    ["pooled", pooledT(first, second)],
  ] as const) {
    const ours = [test?.t, test?.df, test?.p];
    numbers(name).forEach((value, i) => {
      add(`${name} ${["t", "degrees of freedom", "p"][i]}`, ours[i] ?? Number.NaN, value, 1e-10);
    });
  }
  return out;
}

/** Our conversion factors beside GNU Units'. It prints 15 digits; SP 811, which we follow, rounds mercury to 7. */
export function unitComparisons(references: readonly UnitReference[]): Comparison[] {
  const named: Record<string, number> = { ...constants };
  return references.map(({ kind, unit, factor }) => {
    const parsed = kind === "constant" ? null : parseUnit(unit);
    const ours = parsed ? differenceToCanonical(1, parsed) : (named[unit] ?? Number.NaN);
    return { what: `${kind} ${unit}`, ours, outside: factor, allowed: /hg/i.test(unit) ? 2e-7 : 5e-15 };
  });
}

/** Spellings of units whose factor is not 1, and exported constants that no outside value covers. */
export function uncovered(references: readonly UnitReference[]): string[] {
  const known = new Set(references.map(({ unit }) => unit));
  // Offsets of the temperature scales are fixed points, tested beside the units.
  return Object.keys(constants).filter((name) => !known.has(name) && name !== "ZERO_CELSIUS_K");
}
