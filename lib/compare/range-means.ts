import type { ComparedRun, RunDesign } from "@/lib/compare/band/run-design";
import { sideEffect } from "@/lib/compare/band/side-effect";
import { meanCurve } from "@/lib/measure/curve/mean-curve";
import type { RangeMean, Series } from "@/lib/measure/types";
import { mean } from "@/lib/signal/statistics";

/** A run counts in a range when it covers this share of it. */
const LEAST_COVER = 0.8;

/** Ranges to average over when none were chosen: the whole compared range and its thirds, on grid points. */
export function defaultRanges(rpm: readonly number[]): [number, number][] {
  const last = rpm.length - 1;
  if (last < 1) return [];
  const edge = (share: number) => rpm[Math.round(share * last)];
  const whole: [number, number] = [rpm[0], rpm[last]];
  if (last < 6) return [whole];
  return [whole, [rpm[0], edge(1 / 3)], [edge(1 / 3), edge(2 / 3)], [edge(2 / 3), rpm[last]]];
}

/**
 * Mean difference B − A over ranges of engine speed. Each run gives one value a range: the mean of its log torque less the
 * curve that all runs share, so that a masked stretch does not shift it. The interval is that of one mean by the linear model
 * (t, 95 % at this range alone), not part of the simultaneous band.
 * @param runs with their torque on `rpm`, null = gap
 */
export function rangeMeans(
  rpm: readonly number[],
  runs: readonly (ComparedRun & { engineNm: Series })[],
  ranges: readonly (readonly [number, number])[],
  design: RunDesign | null,
  settings: { a: string; b: string; level: number },
): RangeMean[] {
  const shared = meanCurve(runs.map((run) => run.engineNm));
  const pct = (x: number) => 100 * Math.expm1(x);
  return ranges.flatMap(([from, to]): RangeMean[] => {
    const points = rpm.flatMap((x, k) => (x >= from && x <= to && shared[k] !== null ? [k] : []));
    const values = runs.map(({ engineNm }) => {
      const own = points.flatMap((k) => {
        const [nm, common] = [engineNm[k], shared[k]];
        return nm !== null && common !== null && nm > 0 ? [Math.log(nm / common)] : [];
      });
      if (own.length === 0 || own.length < LEAST_COVER * points.length) return null;
      return mean(own);
    });
    const found = sideEffect(runs, values, design, settings);
    if (!found) return [];
    const { effect, half, resolvable, nA, nB } = found;
    return [
      {
        from_rpm: from,
        to_rpm: to,
        pct: pct(effect),
        low_pct: half === null ? null : pct(effect - half),
        high_pct: half === null ? null : pct(effect + half),
        resolvable_pct: resolvable === null ? null : pct(resolvable),
        n_a: nA,
        n_b: nB,
      },
    ];
  });
}
