import { runDesign } from "@/lib/compare/band/run-design";
import { LEAST_RUNS } from "@/lib/compare/band/side-effect";
import { MOST_TWINS, type OrderCard, proposeOrder } from "@/lib/compare/plan/order-card";
import { bandCritical, type PlanBasis, type Scatter, scatterInterval } from "@/lib/compare/plan/plan-scatter";
import { tQuantile } from "@/lib/signal/distributions";
import { noncentralTCdf } from "@/lib/signal/noncentral-t";

/** Chance with which a plan shows the difference it is made for, and two-sided level of what it shows. */
const PLANNED_POWER = 0.8;
const LEVEL = 0.95;

/** What the runs of an order card leave to tell a difference with, under the model of the comparison. */
interface CardDesign {
  df: number;
  /** Standard error of the side's effect in standard deviations of a run. */
  seFactor: number;
}

function designOf(card: OrderCard): CardDesign | null {
  const runs = card.places.map(({ place, side, leg }) => ({
    ...{ id: String(place), side, leg, order: place, roadDay: null },
  }));
  const design = runDesign(runs, "B");
  if (!("matrix" in design)) return null;
  const df = runs.length - design.columns;
  // Two sides of equal size: variance 4/N, widened by what leg and drift take.
  return df >= 1 ? { df, seFactor: Math.sqrt((4 / runs.length) * design.inflation) } : null;
}

/** Chance that a true effect of `delta` standard errors lies outside ± critical · its standard error; exact noncentral t. */
export function planPower(delta: number, df: number, critical: number): number {
  return 1 - noncentralTCdf(critical, df, delta) + noncentralTCdf(-critical, df, delta);
}

/** Smallest true effect in standard errors that is shown with `power`; bisection to 1e-10. */
export function smallestDelta(df: number, critical: number, power = PLANNED_POWER): number {
  let low = 0;
  let high = 2 * critical + 4;
  while (high - low > 1e-10) {
    const middle = (low + high) / 2;
    if (planPower(middle, df, critical) < power) low = middle;
    else high = middle;
  }
  return (low + high) / 2;
}

/** Smallest differences that a number of twins a side shows, %; null where the runs can't tell. */
export interface ShownBy {
  twins: number;
  /** Mean over a range of the width that the scatter was taken over. */
  rangePct: number | null;
  /** At one engine speed, told by the band that holds the whole curve at once, past what that allows for smoothing. */
  curvePct: number | null;
}

/**
 * What `twins` a side show with power 0.8 at the two-sided level 0.95, in the order that the card proposes and under the
 * comparison's model (mean, side, leg, drift).
 */
export function shownBy(twins: number, basis: PlanBasis): ShownBy {
  const design = designOf(proposeOrder({ twinsPerSide: twins }));
  if (!design || 2 * twins < LEAST_RUNS) return { twins, rangePct: null, curvePct: null };
  const { df, seFactor } = design;
  const pct = (scatter: Scatter, critical: number, beyondPct = 0) =>
    100 *
    Math.expm1(
      smallestDelta(df, critical) * seFactor * Math.log1p(scatter.sdPct / 100) + Math.log1p(beyondPct / 100),
    );
  return {
    twins,
    rangePct: pct(basis.range, tQuantile((1 + LEVEL) / 2, df)),
    curvePct: pct(basis.point, bandCritical(basis.places.count, df, LEVEL), basis.smoothingPct ?? 0),
  };
}

/** Twins a side for a wanted difference; null = not with the most that fit a road day. */
export interface TwinsNeeded {
  range: number | null;
  curve: number | null;
}

/** Fewest twins a side that show `wantedPct`. @throws RangeError unless wantedPct > 0 */
export function twinsFor(wantedPct: number, basis: PlanBasis): TwinsNeeded {
  if (!(wantedPct > 0)) throw new RangeError(`the wanted difference must be above 0, not ${wantedPct}`);
  const fewest = (of: (shown: ShownBy) => number | null): number | null => {
    for (let twins = 1; twins <= MOST_TWINS; twins++) {
      const pct = of(shownBy(twins, basis));
      if (pct !== null && pct <= wantedPct) return twins;
    }
    return null;
  };
  return { range: fewest((shown) => shown.rangePct), curve: fewest((shown) => shown.curvePct) };
}

/**
 * The same at both ends of what the standard deviations can be (95 % interval of each), fewest and most twins.
 * Null where the scatter is a starting value, of which nothing is known.
 */
export function twinsForInterval(
  wantedPct: number,
  basis: PlanBasis,
): { fewest: TwinsNeeded; most: TwinsNeeded } | null {
  const range = scatterInterval(basis.range);
  const point = scatterInterval(basis.point);
  if (!range || !point) return null;
  const at = (end: "lowPct" | "highPct"): TwinsNeeded =>
    twinsFor(wantedPct, {
      ...basis,
      range: { ...basis.range, sdPct: range[end] },
      point: { ...basis.point, sdPct: point[end] },
    });
  return { fewest: at("lowPct"), most: at("highPct") };
}
