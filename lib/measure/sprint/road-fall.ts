import type { RunRoad } from "@/lib/measure/estimate-campaign";
import { positionAt } from "@/lib/measure/road/road-observations";
import type { NetFall } from "@/lib/measure/sprint/net-fall";
import { STANDARD_GRAVITY_MPS2 } from "@/lib/units/constants";

/**
 * Net fall over a stretch of a run by its road day's slope: the mean over the way, with the share of the slope in the joint
 * uncertainty. Null without a coast-down, since the slope is then a guess. `t` and `speedMps` are equally long.
 */
export function roadFall(
  { day, place, run }: RunRoad,
  t: Float64Array,
  speedMps: Float64Array,
): NetFall | null {
  if (day.coastRuns === 0 || t.length === 0) return null;
  const points = Array.from(t, (at, k) => ({ speedMps: speedMps[k], positionM: positionAt(run, at) }));
  let climb = 0;
  let way = 0;
  for (const point of points) {
    climb += point.speedMps * day.slope(place, point.positionM);
    way += point.speedMps;
  }
  const { grade } = day.variance.parts(day.variance.gradient(place, points));
  return {
    pct: (-100 * climb) / way,
    uncertaintyPct: (100 * Math.sqrt(grade)) / (run.massKg * STANDARD_GRAVITY_MPS2),
    from: "road day",
  };
}
