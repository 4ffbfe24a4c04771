import type { EngineRows } from "@/lib/measure/engine/find-channels";
import type { BoostAtLoad } from "@/lib/measure/engine/full-load-types";
import { timedChannel } from "@/lib/measure/engine/timed-channel";
import type { Span } from "@/lib/measure/types";
import { median } from "@/lib/signal/statistics";

/** Pressure is there when it first reaches this share of its highest; the overshoot comes within this time after, s. */
const THERE = 0.95;
const OVERSHOOT_WITHIN_S = 1.5;
/** The plateau is read from here to here after the overshoot, s, and needs this much of it [common practice, no source]. */
const PLATEAU_FROM_S = 0.5;
const PLATEAU_TO_S = 2.5;
const LEAST_PLATEAU_S = 1;
/** A target that lies this far off all the time has another zero point, kPa. */
const OTHER_ZERO_KPA = 60;

/**
 * Overshoot of manifold pressure in a pull: its greatest excess over a logged target of the same zero point, else its peak
 * while it builds up over the plateau that follows; both held for `holdS` within the stretches of full load. Null without a manifold pressure. `atS`: when.
 */
export function boostAtLoad(
  timeS: Float64Array,
  rows: EngineRows,
  stretches: readonly Span[],
  holdS: number,
): { found: Omit<BoostAtLoad, "at_rpm">; atS: number } | null {
  const name = rows.channels.has("manifold_pressure") ? "manifold_pressure" : "manifold_pressure_gauge";
  const own = rows.channels.get(name);
  const pressure = own && timedChannel(timeS, own);
  if (!pressure) return null;
  const held = pressure.heldMeans(stretches, holdS);
  if (held.length < 3) return null;
  const highest = held.reduce((best, one) => (one.value > best.value ? one : best));
  const least = held[0].value + THERE * (highest.value - held[0].value);
  const there = held.find(({ value }) => value >= least) ?? highest;
  const peak = held.reduce(
    (best, one) =>
      one.t >= there.t && one.t <= there.t + OVERSHOOT_WITHIN_S && one.value > best.value ? one : best,
    there,
  );
  const base = { channel: name, peak_kpa: peak.value } as const;

  const { boostTarget } = rows;
  const stated =
    boostTarget?.reference === null ||
    boostTarget?.reference === (name === "manifold_pressure" ? "absolute" : "gauge");
  const target = boostTarget && stated ? timedChannel(timeS, boostTarget.values) : null;
  if (target) {
    const excess = held.flatMap(({ t, value }) => {
      const wanted = target.at(t);
      return wanted === null ? [] : [{ t, wanted, over: value - wanted }];
    });
    const late = excess.slice(Math.floor(excess.length / 2)).map(({ over }) => over);
    if (excess.length > 2 && Math.abs(median(late)) < OTHER_ZERO_KPA) {
      const most = excess.reduce((best, one) => (one.over > best.over ? one : best));
      return {
        found: { ...base, reference: "target", against_kpa: most.wanted, overshoot_kpa: most.over },
        atS: most.t,
      };
    }
  }
  const settled = held.filter(({ t }) => t >= peak.t + PLATEAU_FROM_S && t <= peak.t + PLATEAU_TO_S);
  const length = settled.length > 1 ? settled[settled.length - 1].t - settled[0].t : 0;
  if (length < LEAST_PLATEAU_S) {
    return {
      found: {
        ...base,
        reference: null,
        against_kpa: null,
        overshoot_kpa: null,
        why: "No target is logged, and the pressure builds up too late in the pull to settle after it.",
      },
      atS: peak.t,
    };
  }
  const plateau = median(settled.map(({ value }) => value));
  return {
    found: { ...base, reference: "plateau", against_kpa: plateau, overshoot_kpa: peak.value - plateau },
    atS: peak.t,
  };
}
