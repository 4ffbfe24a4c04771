import type { Driveline, GridCurve } from "@/lib/measure/curve/pull-curve";
import type { PullSpeed } from "@/lib/measure/speed/pull-speed";
import { RPM_RADPS } from "@/lib/units/constants";

/** How far the smoothing of speed reaches in engine speed at each grid point, 1/min; null where the curve has a gap. */
export function kernelWidthRpm(
  pull: PullSpeed,
  grid: Pick<GridCurve, "timeS" | "accelerationMps2">,
  { gearingRadPerM }: Pick<Driveline, "gearingRadPerM">,
): (number | null)[] {
  return grid.timeS.map((t, k) => {
    const a = grid.accelerationMps2[k];
    return t === null || a === null ? null : (pull.kernelS(t) * gearingRadPerM * Math.max(0, a)) / RPM_RADPS;
  });
}
