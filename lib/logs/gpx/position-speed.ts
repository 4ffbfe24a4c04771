import { RADIAN_DEG } from "@/lib/units/constants";

/** WGS 84: equatorial radius, m, and first eccentricity squared [NIMA TR8350.2, 2000, table 3.1 and 3.3]. */
const EQUATOR_M = 6_378_137;
const ECCENTRICITY_2 = 6.694_379_990_14e-3;

/** Way between two near positions on the ellipsoid, m: radii of curvature at the middle latitude; good to 1e-6 below 1 km. */
export function wayM(latitude1: number, longitude1: number, latitude2: number, longitude2: number): number {
  const middle = (latitude1 + latitude2) / 2 / RADIAN_DEG;
  const w = 1 - ECCENTRICITY_2 * Math.sin(middle) ** 2;
  const across = EQUATOR_M / Math.sqrt(w);
  const along = (EQUATOR_M * (1 - ECCENTRICITY_2)) / w ** 1.5;
  const turn = ((((longitude2 - longitude1 + 180) % 360) + 360) % 360) - 180;
  const north = ((latitude2 - latitude1) / RADIAN_DEG) * along;
  const east = (turn / RADIAN_DEG) * across * Math.cos(middle);
  return Math.hypot(north, east);
}

/**
 * Speed from positions, m/s: way from the point before to the point after over the time between them; at an end of a segment only one
 * side is there. NaN beside a missing position and for a lone point. `timeS` need not rise: such a point has no speed.
 */
export function positionSpeed(
  timeS: Float64Array,
  latitude: Float64Array,
  longitude: Float64Array,
  segment: readonly number[],
): Float64Array {
  const last = timeS.length - 1;
  return timeS.map((_, i) => {
    const a = i > 0 && segment[i - 1] === segment[i] ? i - 1 : i;
    const b = i < last && segment[i + 1] === segment[i] ? i + 1 : i;
    const dt = timeS[b] - timeS[a];
    if (!(dt > 0)) return Number.NaN;
    const way = (p: number, q: number) =>
      p === q ? 0 : wayM(latitude[p], longitude[p], latitude[q], longitude[q]);
    return (way(a, i) + way(i, b)) / dt;
  });
}
