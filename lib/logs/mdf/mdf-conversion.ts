import { compileFormula } from "@/lib/format/compile-formula";
import {
  demandData,
  type MdfBlock,
  type MdfFile,
  readBlock,
  readText,
  refuseDamaged,
} from "@/lib/logs/mdf/mdf-blocks";

/** How a raw number becomes a physical one (CC block). */
export interface MdfConversion {
  /** Raw to physical; NaN where the result is a word or no number. Null: y = x. */
  convert: ((raw: number) => number) | null;
  /** Scale and offset where that is all there is to it. */
  linear: { offset: number; factor: number } | null;
  /** Some raw values stand for words. */
  hasWords: boolean;
  unit: string | null;
  /** Why it can't be carried out, as the end of a sentence. */
  problem: string | null;
}

const DEEPEST = 6;
const TOO_MANY = "is converted by more overlapping ranges than are searched";
const IDENTITY: MdfConversion = { convert: null, linear: null, hasWords: false, unit: null, problem: null };

/** Position of the last key that is not above `x`; -1 when all are. Keys rise. */
function lastNotAbove(keys: Float64Array, x: number): number {
  let low = 0;
  let high = keys.length;
  while (low < high) {
    const middle = (low + high) >> 1;
    if (keys[middle] <= x) low = middle + 1;
    else high = middle;
  }
  return low - 1;
}

/** Table of keys and values: linear between keys or the nearer key's value; beyond the ends the end's value. */
function tableOf(v: Float64Array, interpolate: boolean): (x: number) => number {
  const n = v.length >> 1;
  const keys = Float64Array.from({ length: n }, (_, i) => v[2 * i]);
  const values = Float64Array.from({ length: n }, (_, i) => v[2 * i + 1]);
  return (x) => {
    if (Number.isNaN(x) || n === 0) return Number.NaN;
    const k = lastNotAbove(keys, x);
    if (k < 0) return values[0];
    if (k >= n - 1) return values[n - 1];
    const u = (x - keys[k]) / (keys[k + 1] - keys[k]);
    if (interpolate) return values[k] + u * (values[k + 1] - values[k]);
    return u > 0.5 ? values[k + 1] : values[k];
  };
}

/** Overlapping ranges are searched one by one, so there may be no more than this many. */
const MOST_OVERLAPPING = 64;

/**
 * Finds the range that holds a number, the first of several, -1 for none: whole numbers belong to both ends, others not to the upper
 * one. Null when there are too many ranges out of order.
 */
function rangeFinder(
  v: Float64Array,
  width: number,
  count: number,
  whole: boolean,
): ((x: number) => number) | null {
  const lows = Float64Array.from({ length: count }, (_, i) => v[width * i]);
  const holds = (i: number, x: number) =>
    x >= lows[i] && (whole ? x <= v[width * i + 1] : x < v[width * i + 1] || x === lows[i]);
  const inOrder = lows.every((low, i) => i === 0 || low >= v[width * (i - 1) + 1]);
  if (!inOrder && count > MOST_OVERLAPPING) return null;
  return (x) => {
    const last = inOrder ? lastNotAbove(lows, x) : count - 1;
    for (let i = inOrder ? Math.max(0, last - 1) : 0; i <= last; i++) if (holds(i, x)) return i;
    return -1;
  };
}

function exactFinder(v: Float64Array, count: number): (x: number) => number {
  const exact = new Map<number, number>();
  for (let i = count - 1; i >= 0; i--) exact.set(v[i], i);
  return (x) => exact.get(x) ?? -1;
}

/** Value or range to word (7, 8): a reference may be a word or a further conversion; the last one is the default. */
function wordsOf(
  references: readonly (MdfConversion | null)[],
  count: number,
  find: (x: number) => number,
): (x: number) => number {
  const fallback = references.length > count ? references[count] : null;
  return (x) => {
    if (Number.isNaN(x)) return x;
    const k = find(x);
    const found = k < 0 ? fallback : references[k];
    if (!found) return Number.NaN;
    return found.convert ? found.convert(x) : x;
  };
}

function valuesOf(file: MdfFile, block: MdfBlock, count: number): Float64Array {
  demandData(block, 24 + 8 * count);
  return Float64Array.from({ length: count }, (_, i) =>
    file.view.getFloat64(block.dataAt + 24 + 8 * i, true),
  );
}

function rational([a, b, c, d, e, f]: Float64Array): (x: number) => number {
  return (x) => {
    const y = (a * x * x + b * x + c) / (d * x * x + e * x + f);
    return Number.isFinite(y) ? y : Number.NaN;
  };
}

/** Builds the conversions of a file, each once. `whole`: the raw values are whole numbers, whose ranges hold both ends. */
export function conversionReader(file: MdfFile): (at: number, whole: boolean) => MdfConversion {
  const known = new Map<string, MdfConversion>();
  const read = (at: number, whole: boolean, depth: number): MdfConversion => {
    if (at === 0) return IDENTITY;
    const name = `${at} ${whole}`;
    const before = known.get(name);
    if (before) return before;
    if (depth > DEEPEST) refuseDamaged(`The conversions at byte ${at} lead from one to the next without end`);
    const made = build(at, whole, depth);
    known.set(name, made);
    return made;
  };
  const build = (at: number, whole: boolean, depth: number): MdfConversion => {
    const block = readBlock(file, at, ["CC"]);
    demandData(block, 24);
    const type = file.view.getUint8(block.dataAt);
    const v = valuesOf(file, block, file.view.getUint16(block.dataAt + 6, true));
    const refs = block.links.slice(4);
    const plain = { ...IDENTITY, unit: readText(file, block.links[1]) };
    const need = (count: number) => {
      if (v.length < count)
        refuseDamaged(`The conversion at byte ${at} holds ${v.length} of ${count} numbers`);
    };
    switch (type) {
      case 0:
        return plain;
      case 1: {
        need(2);
        const [offset, factor] = v;
        return { ...plain, linear: { offset, factor }, convert: (x) => offset + factor * x };
      }
      case 2:
        need(6);
        return { ...plain, convert: rational(v) };
      case 3: {
        const formula = readText(file, refs[0]) ?? "";
        const convert = compileFormula(formula);
        const problem = convert
          ? null
          : `is converted by the formula "${formula.slice(0, 80)}", which is not understood`;
        return { ...plain, convert, problem };
      }
      case 4:
      case 5:
        need(2);
        return { ...plain, convert: tableOf(v, type === 4) };
      case 6: {
        const count = Math.floor((v.length - 1) / 3);
        need(1);
        const find = rangeFinder(v, 3, count, whole);
        if (!find) return { ...plain, problem: TOO_MANY };
        const value = (x: number) => {
          const k = find(x);
          return Number.isNaN(x) ? x : k < 0 ? v[3 * count] : v[3 * k + 2];
        };
        return { ...plain, convert: value };
      }
      case 7:
      case 8: {
        const parts = refs.map((ref) =>
          ref !== 0 && isConversion(file, ref) ? read(ref, whole, depth + 1) : null,
        );
        const problem = parts.find((part) => part?.problem)?.problem ?? null;
        const count = Math.min(type === 8 ? v.length >> 1 : v.length, Math.max(0, refs.length - 1));
        const find = type === 8 ? rangeFinder(v, 2, count, whole) : exactFinder(v, count);
        if (!find) return { ...plain, problem: TOO_MANY };
        return { ...plain, hasWords: true, problem, convert: wordsOf(parts, count, find) };
      }
      default:
        return { ...plain, problem: `is converted by method ${type}, which is not read` };
    }
  };
  return (at, whole) => read(at, whole, 0);
}

function isConversion(file: MdfFile, at: number): boolean {
  return readBlock(file, at, ["TX", "MD", "CC"]).id === "CC";
}

/** Carries a conversion out, in place. */
export function applyConversion(values: Float64Array, { linear, convert }: MdfConversion): void {
  if (linear) {
    const { offset, factor } = linear;
    for (let i = 0; i < values.length; i++) values[i] = offset + factor * values[i];
    return;
  }
  if (convert) for (let i = 0; i < values.length; i++) values[i] = convert(values[i]);
}
