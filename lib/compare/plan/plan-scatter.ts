import { chiSquareQuantile } from "@/lib/signal/chi-square";
import { tCdf, tQuantile } from "@/lib/signal/distributions";
import { median } from "@/lib/signal/statistics";

/** A standard deviation between runs, %, with the degrees of freedom it rests on; df null = a starting value that nobody measured. */
export interface Scatter {
  sdPct: number;
  df: number | null;
}

/** What a plan rests on. */
export interface PlanBasis {
  /** Of the mean torque over a range, and of the torque at one engine speed. */
  range: Scatter;
  point: Scatter;
  /** How many independent places the band is worth: its critical value is that of so many t tests at once. */
  places: { count: number; comparisons: number };
  /** What a band allows for smoothing beside scatter, %: median of past bands; null = none has told it, none is counted. */
  smoothingPct: number | null;
}

/**
 * Starting values where a programme has no road day yet [common practice, no source]; our own simulated campaigns lie between
 * 0.3 and 0.8 over a range and between 0.4 and 1.0 at one engine speed. The plan says that they are assumed.
 */
export const STARTING_SD_PCT = { range: 0.8, point: 1 } as const;
/** Independent places of the band where no comparison has drawn one yet: the bands of our simulated campaigns are worth 3 to 26. */
export const STARTING_PLACES = 10;

/** Pools standard deviations with their degrees of freedom; null where there are none. Those with df 0 add nothing. */
export function pooledScatter(parts: readonly { sdPct: number | null; df: number }[]): Scatter | null {
  let squares = 0;
  let df = 0;
  for (const part of parts) {
    if (part.sdPct === null || part.df <= 0) continue;
    squares += part.sdPct ** 2 * part.df;
    df += part.df;
  }
  return df > 0 ? { sdPct: Math.sqrt(squares / df), df } : null;
}

/**
 * Interval of a standard deviation (normal scatter), %; null for a starting value.
 * Source: chi-square interval of a variance, NIST/SEMATECH e-Handbook 1.3.5.8.
 */
export function scatterInterval(
  { sdPct, df }: Scatter,
  level = 0.95,
): { lowPct: number; highPct: number } | null {
  if (df === null) return null;
  const at = (p: number) => sdPct * Math.sqrt(df / chiSquareQuantile(p, df));
  return { lowPct: at((1 + level) / 2), highPct: at((1 - level) / 2) };
}

/**
 * Independent places that a band was worth: the number of two-sided t tests whose Šidák critical value is the band's.
 * At least 1. Lets a band seen with one number of runs tell how wide that of another number will be.
 */
export function bandPlaces(
  { criticalValue, df }: { criticalValue: number; df: number },
  level = 0.95,
): number {
  const beyond = 2 * tCdf(-criticalValue, df);
  return Math.max(1, Math.log(level) / Math.log1p(-beyond));
}

/** Critical value that a band over `places` independent places has with `df` degrees of freedom; the inverse of bandPlaces. */
export function bandCritical(places: number, df: number, level = 0.95): number {
  return tQuantile(1 - (1 - level ** (1 / places)) / 2, df);
}

/** Median of the places of past bands, or the starting value where there is none. */
export function placesSeen(bands: readonly { criticalValue: number; df: number }[]): PlanBasis["places"] {
  const count = bands.length === 0 ? STARTING_PLACES : median(bands.map((band) => bandPlaces(band)));
  return { count, comparisons: bands.length };
}
