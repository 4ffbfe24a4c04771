import {
  ENGINE_CHANNELS,
  type EngineChannel,
  type RunFullLoad,
  type SideChannel,
  type SideFullLoad,
} from "@/lib/measure/engine/full-load-types";
import { valuesOn } from "@/lib/measure/engine/values-on";
import type { Series } from "@/lib/measure/types";
import { mean } from "@/lib/signal/statistics";

/** A usable pull of a side with its engine channels. */
export interface LoadedRun {
  id: string;
  fullLoad: RunFullLoad;
}

/** The engine channels of a side: mean over its runs, the extremes with their run, what none of them carries. Null without a run. */
export function sideFullLoad(runs: readonly LoadedRun[]): SideFullLoad | null {
  if (runs.length === 0) return null;
  const rpm = [...new Set(runs.flatMap(({ fullLoad }) => fullLoad.rpm))].sort((x, y) => x - y);
  const channels: SideFullLoad["channels"] = {};
  for (const name of ENGINE_CHANNELS) {
    const found = sideChannel(runs, name, rpm);
    if (found) channels[name] = found;
  }
  const overs = runs.flatMap(({ id, fullLoad: { boost } }) =>
    boost?.overshoot_kpa == null || boost.reference === null
      ? []
      : [{ run: id, overshoot_kpa: boost.overshoot_kpa, reference: boost.reference }],
  );
  return {
    rpm,
    longest_load_s: Math.max(...runs.map(({ fullLoad }) => fullLoad.load_s)),
    channels,
    ...(overs.length > 0 && {
      boost: {
        n: overs.length,
        ...overs.reduce((best, one) => (one.overshoot_kpa > best.overshoot_kpa ? one : best)),
      },
    }),
    not_recorded: ENGINE_CHANNELS.filter((name) =>
      runs.every(({ fullLoad }) => fullLoad.not_recorded.includes(name)),
    ),
  };
}

function sideChannel(
  runs: readonly LoadedRun[],
  name: EngineChannel,
  rpm: readonly number[],
): SideChannel | null {
  const carrying = runs.flatMap(({ id, fullLoad }) => {
    const channel = fullLoad.channels[name];
    return channel ? [{ run: id, channel, values: valuesOn(rpm, fullLoad.rpm, channel.values) }] : [];
  });
  if (carrying.length === 0) return null;
  const extreme = (which: "min" | "max") => {
    const sign = which === "max" ? 1 : -1;
    const best = carrying.reduce((a, b) =>
      sign * b.channel[which].value > sign * a.channel[which].value ? b : a,
    );
    return { ...best.channel[which], run: best.run };
  };
  return {
    n: carrying.length,
    values: rpm.map((_, k) => meanOfMost(carrying.map(({ values }) => values[k]))),
    min: extreme("min"),
    max: extreme("max"),
    mean_rise: meanOfMost(carrying.map(({ channel }) => channel.rise)),
  };
}

/** Mean of what is there; null when less than half is. */
function meanOfMost(values: Series): number | null {
  const there = values.filter((value) => value !== null);
  if (there.length === 0 || 2 * there.length < values.length) return null;
  return mean(there);
}
