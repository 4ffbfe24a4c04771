import type { Conversion } from "@/lib/calibration/a2l/types";
import { firstRangeAt } from "@/lib/calibration/values/convert/first-range";
import { fromRational } from "@/lib/calibration/values/convert/rational";
import type { PhysicalValue, ReadCharacteristic } from "@/lib/calibration/values/types";
import { compileFormula } from "@/lib/format/compile-formula";

/** Physical limits: they tell which of two solutions of a quadratic conversion is meant. */
export type Limits = ReadCharacteristic["limits"];

/** A conversion made ready: raw number in, physical value out; null where it has none for this raw number. */
export interface Converter {
  toPhysical(raw: number, limits: Limits): PhysicalValue;
  unit: string;
  decimals: number | null;
  /** False where one step of the raw number says nothing about physical steps (words, separate table entries). */
  stepped: boolean;
  /** Why nothing is converted, else null. */
  problem: string | null;
}

/** A finite number without a negative zero, or null. */
const finite = (value: number | null): number | null =>
  value === null || !Number.isFinite(value) ? null : value + 0;

/** NO_COMPU_METHOD: the raw number is the value. */
export const RAW_CONVERTER: Converter = {
  toPhysical: finite,
  unit: "",
  decimals: null,
  stepped: true,
  problem: null,
};

/** Makes a conversion of a description ready for use. O(entries log entries) once, O(log entries) a value. */
export function converterOf(conversion: Conversion): Converter {
  const of = (
    toPhysical: Converter["toPhysical"],
    stepped: boolean,
    problem: string | null = null,
  ): Converter => ({
    toPhysical: withStates(conversion.status ?? [], toPhysical),
    unit: conversion.unit.trim(),
    decimals: conversion.decimals,
    stepped,
    problem,
  });
  switch (conversion.kind) {
    case "identical":
      return of(finite, true);
    case "linear": {
      const { a, b } = conversion;
      return of((raw) => finite(a * raw + b), true);
    }
    case "rational": {
      const { coefficients } = conversion;
      return of((raw, limits) => finite(fromRational(coefficients, raw, limits)), true);
    }
    case "table":
      return conversion.interpolated
        ? of(interpolate(conversion.pairs), true)
        : of(lookUp(conversion.pairs, conversion.fallback), false);
    case "words":
      return of(words(conversion.ranges, conversion.fallback), false);
    case "formula": {
      const evaluate = compileFormula(conversion.formula);
      if (evaluate) return of((raw) => finite(evaluate(raw)), true);
      return of(() => null, false, `its formula "${conversion.formula.slice(0, 80)}" is not understood`);
    }
    case "unknown":
      return of(() => null, false, conversion.reason);
  }
}

/** Raw numbers that mean a state ("sensor defect") and no number come first. */
function withStates(
  states: NonNullable<Conversion["status"]>,
  toPhysical: Converter["toPhysical"],
): Converter["toPhysical"] {
  if (states.length === 0) return toPhysical;
  const stateOf = words(states, null);
  return (raw, limits) => stateOf(raw) ?? toPhysical(raw, limits);
}

function lookUp(pairs: readonly (readonly [number, number])[], fallback: number | null) {
  const table = new Map<number, number>();
  for (const [raw, physical] of pairs) if (!table.has(raw)) table.set(raw, physical);
  return (raw: number) => finite(table.get(raw) ?? fallback);
}

/** Straight lines between the entries; beyond the ends the end value holds (from memory). NaN has none. */
function interpolate(pairs: readonly (readonly [number, number])[]) {
  const table = pairs
    .filter(([raw, physical]) => Number.isFinite(raw) && Number.isFinite(physical))
    .sort((a, b) => a[0] - b[0]);
  return (raw: number): number | null => {
    if (table.length === 0 || Number.isNaN(raw)) return null;
    let low = 0;
    let high = table.length;
    while (low < high) {
      const middle = (low + high) >>> 1;
      if (table[middle][0] < raw) low = middle + 1;
      else high = middle;
    }
    if (low === table.length) return table[low - 1][1];
    const [x1, y1] = table[low];
    if (low === 0 || x1 === raw) return y1;
    const [x0, y0] = table[low - 1];
    return finite(y0 + ((y1 - y0) * (raw - x0)) / (x1 - x0));
  };
}

/** The text of each raw number; of several that hold it a single number comes first, then the range that is written first. */
function words(ranges: readonly { from: number; to: number; text: string }[], fallback: string | null) {
  const single = new Map<number, string>();
  for (const { from, to, text } of ranges) if (from === to && !single.has(from)) single.set(from, text);
  const wide = firstRangeAt(ranges.filter(({ from, to }) => from < to));
  return (raw: number): string | null => single.get(raw) ?? wide(raw)?.text ?? fallback;
}
