import type { Peak, Series } from "@/lib/measure/types";
import { savitzkyGolay } from "@/lib/signal/savitzky-golay";
import { RPM_RADPS } from "@/lib/units/constants";

/** Half width of the parabola that a single run's peak is read from, 1/min: its noise must not become its peak. */
const HALF_WIDTH_RPM = 200;

/**
 * Highest power and torque of a curve. `smooth`: read from local parabolas (single runs, whose noise lifts a plain maximum);
 * the mean of a side is read as it is. Null when fewer than three points are there.
 */
export function peakOfCurve(
  rpm: readonly number[],
  engineNm: Series,
  smooth: boolean,
  uncertaintyKw: number | null,
): Peak | null {
  const torque = smooth ? smoothed(rpm, engineNm) : engineNm;
  let power: [number, number] | null = null;
  let twist: [number, number] | null = null;
  let points = 0;
  rpm.forEach((n, k) => {
    const nm = torque[k];
    if (nm === null) return;
    points++;
    const kw = (nm * n * RPM_RADPS) / 1000;
    if (!power || kw > power[0]) power = [kw, n];
    if (!twist || nm > twist[0]) twist = [nm, n];
  });
  if (points < 3 || !power || !twist) return null;
  return {
    engine_kw: power[0],
    engine_kw_rpm: power[1],
    engine_nm: twist[0],
    engine_nm_rpm: twist[1],
    uncertainty_kw: uncertaintyKw,
  };
}

function smoothed(rpm: readonly number[], values: Series): Series {
  const step = rpm.length > 1 ? rpm[1] - rpm[0] : HALF_WIDTH_RPM;
  const window = 2 * Math.round(HALF_WIDTH_RPM / step) + 1;
  const out: Series = values.slice();
  let start = 0;
  while (start < values.length) {
    let end = start;
    while (end < values.length && values[end] !== null) end++;
    if (window >= 5 && end - start >= window) {
      const filtered = savitzkyGolay(
        Float64Array.from(values.slice(start, end), (v) => v ?? 0),
        window,
        2,
      );
      for (let k = start; k < end; k++) out[k] = filtered[k - start];
    }
    start = end + 1;
  }
  return out;
}
