import type { RunSignals, SampledChannel } from "@/lib/measure/run/run-signals";
import { lowerBound } from "@/lib/signal/local-quadratic";
import { median, robustDeviation } from "@/lib/signal/statistics";
import { RADIAN_DEG } from "@/lib/units/constants";

/** Where a run was on its strip: way along the road axis at every row, and the sense of travel. */
export interface StripTrack {
  /** Way from the log's start by integrating the road speed, m, one value a row. */
  wayM: Float64Array;
  /** Strip position = `originM` + `direction` · way; one axis for all runs of a road day when `located`. */
  originM: number;
  direction: 1 | -1;
  located: boolean;
}

/** Mean radius of the earth, m. */
export const EARTH_RADIUS_M = 6_371_000;
/** Beyond this scatter of GPS position against integrated speed the road is no straight strip, or the position is poor. */
const LARGEST_SCATTER_M = 25;

/** Way by the trapezium rule from the finding speed times `speedFactor`; m, one value a row. */
function integratedWay(signals: RunSignals, speedFactor: number): Float64Array {
  const way = new Float64Array(signals.timeS.length);
  for (let i = 1; i < way.length; i++) {
    const dt = signals.timeS[i] - signals.timeS[i - 1];
    way[i] = way[i - 1] + speedFactor * dt * 0.5 * (signals.speedRows[i] + signals.speedRows[i - 1]);
  }
  return way;
}

/** The way at a time, by linear interpolation between rows. */
export function wayAt(signals: RunSignals, way: Float64Array, t: number): number {
  const { timeS } = signals;
  const k = Math.min(timeS.length - 1, Math.max(1, lowerBound(timeS, t)));
  const u = (t - timeS[k - 1]) / (timeS[k] - timeS[k - 1]);
  return way[k - 1] + u * (way[k] - way[k - 1]);
}

/**
 * Lays the runs of one road day on a common axis: the main axis of all GPS positions, each run tied to it by the median
 * offset between its projected positions and its integrated way. Runs without usable positions keep their own way from the
 * log's start, with the direction of `legDirection` (+1 when the leg is not known). `speedFactor` turns finding speed into road speed.
 */
export function stripTracks(
  runs: readonly { signals: RunSignals; legDirection: 1 | -1 | 0; speedFactor: number }[],
): StripTrack[] {
  const fixes = runs.map(({ signals }) => fixesOf(signals.latitude, signals.longitude));
  const all = fixes.flat();
  const own = runs.map(
    ({ signals, legDirection, speedFactor }): StripTrack => ({
      wayM: integratedWay(signals, speedFactor),
      originM: 0,
      direction: legDirection === -1 ? -1 : 1,
      located: false,
    }),
  );
  if (all.length < 20) return own;
  const latitude0 = median(all.map((fix) => fix.latitude));
  const longitude0 = median(all.map((fix) => fix.longitude));
  const cos = Math.cos(latitude0 / RADIAN_DEG);
  const east = (fix: Fix) => ((fix.longitude - longitude0) / RADIAN_DEG) * EARTH_RADIUS_M * cos;
  const north = (fix: Fix) => ((fix.latitude - latitude0) / RADIAN_DEG) * EARTH_RADIUS_M;
  let xx = 0;
  let xy = 0;
  let yy = 0;
  for (const fix of all) {
    xx += east(fix) ** 2;
    xy += east(fix) * north(fix);
    yy += north(fix) ** 2;
  }
  const angle = 0.5 * Math.atan2(2 * xy, xx - yy);
  const along = (fix: Fix) => east(fix) * Math.cos(angle) + north(fix) * Math.sin(angle);
  const senses = fixes.map((list) =>
    list.length < 5 ? 0 : Math.sign(along(list[list.length - 1]) - along(list[0])),
  );
  // The axis points the way most out legs go, so that a slope's sign agrees with the leg's name.
  const agreement = runs.reduce((sum, run, k) => sum + run.legDirection * senses[k], 0);
  const flip = agreement < 0 ? -1 : 1;
  return runs.map(({ signals }, k) => {
    const list = fixes[k];
    const direction = senses[k] * flip;
    if (direction === 0 || list.length < 5) return own[k];
    const offsets = list.map((fix) => flip * along(fix) - direction * wayAt(signals, own[k].wayM, fix.t));
    if (robustDeviation(offsets) > LARGEST_SCATTER_M) return own[k];
    return { wayM: own[k].wayM, originM: median(offsets), direction: direction > 0 ? 1 : -1, located: true };
  });
}

interface Fix {
  t: number;
  latitude: number;
  longitude: number;
}

/** About one fix a second: positions are smooth, and the axis needs no more. */
function fixesOf(latitude: SampledChannel | null, longitude: SampledChannel | null): Fix[] {
  if (!latitude || !longitude) return [];
  const out: Fix[] = [];
  let next = Number.NEGATIVE_INFINITY;
  for (let i = 0; i < latitude.times.length; i++) {
    const t = latitude.times[i];
    if (t < next) continue;
    const k = Math.min(longitude.times.length - 1, lowerBound(longitude.times, t - 1e-6));
    if (Math.abs(longitude.times[k] - t) > 0.5) continue;
    if (latitude.values[i] === 0 && longitude.values[k] === 0) continue;
    out.push({ t, latitude: latitude.values[i], longitude: longitude.values[k] });
    next = t + 1;
  }
  return out;
}
