import { deltaBand, upTo } from "@/lib/compare/band/delta-band";
import { type ComparedRun, carriedBy, type RunDesign, runDesign } from "@/lib/compare/band/run-design";
import { LEAST_RUNS, sideEffect } from "@/lib/compare/band/side-effect";
import {
  type ChannelDifference,
  ENGINE_CHANNELS,
  type EngineChannel,
  type RunFullLoad,
} from "@/lib/measure/engine/full-load-types";
import { valuesOn } from "@/lib/measure/engine/values-on";
import type { CampaignVehicle, Series } from "@/lib/measure/types";
import { mean } from "@/lib/signal/statistics";

/** A usable pull with its engine channels. */
export interface LoadedPull extends ComparedRun {
  fullLoad: RunFullLoad;
}

export interface ChannelSettings {
  a: string;
  b: string;
  level: number;
  engine: CampaignVehicle["engine"];
}

/** Residual variance is pooled over this much to each side, 1/min, as for torque. */
const POOL_RPM = 400;

/**
 * B − A of every engine channel that both sides carry: at each engine speed by the linear model of the torque comparison
 * (side, leg, order, road day), with a band that holds this channel's whole curve at once where three runs a side carry it. The
 * band is Bonferroni's t over the grid: a little wider than resampling would give, at no cost for any number of channels.
 */
export function compareChannels(
  pulls: readonly LoadedPull[],
  settings: ChannelSettings,
): Partial<Record<EngineChannel, ChannelDifference>> {
  const out: Partial<Record<EngineChannel, ChannelDifference>> = {};
  for (const name of ENGINE_CHANNELS) {
    const runs = pulls.filter(
      ({ side, fullLoad }) => (side === settings.a || side === settings.b) && fullLoad.channels[name],
    );
    const found = compareOne(name, runs, settings);
    if (found) out[name] = found;
  }
  return out;
}

function compareOne(
  name: EngineChannel,
  runs: readonly LoadedPull[],
  settings: ChannelSettings,
): ChannelDifference | null {
  const countOf = (side: string) => runs.filter((run) => run.side === side).length;
  const counts = { n_a: countOf(settings.a), n_b: countOf(settings.b) };
  const smallest = Math.min(counts.n_a, counts.n_b);
  if (smallest === 0) return null;
  const built = runDesign(runs, settings.b);
  const design =
    "matrix" in built && smallest >= LEAST_RUNS && runs.length - built.columns >= 2 ? built : null;
  const all = [...new Set(runs.flatMap(({ fullLoad }) => fullLoad.rpm))].sort((x, y) => x - y);
  const rows = runs.map(({ fullLoad }) => valuesOn(all, fullLoad.rpm, fullLoad.channels[name]?.values ?? []));
  const least = design ? LEAST_RUNS : 1;
  const carried = design && carriedBy(design);
  const kept = all.flatMap((_, k) => {
    const there = rows.flatMap((row, r) => (row[k] === null ? [] : [r]));
    const at = (side: string) => there.filter((r) => runs[r].side === side).length;
    return Math.min(at(settings.a), at(settings.b)) >= least && (!carried || carried(there)) ? [k] : [];
  });
  const rpm = kept.map((k) => all[k]);
  const values = rows.map((row) => kept.map((k) => row[k]));
  const band = design && bandOf(rpm, values, design, settings);
  const plain = kept.map((_, k) => meanOf(values, runs, settings.b, k) - meanOf(values, runs, settings.a, k));
  const gaps = kept.map(() => null);
  return {
    ...counts,
    rpm,
    difference: band?.difference ?? plain,
    low: band?.low ?? gaps,
    high: band?.high ?? gaps,
    level: settings.level,
    simultaneous: band !== null,
    method: band
      ? `Linear model with ${band.names}; ${band.method}.`
      : rpm.length === 0
        ? "Nothing to compare: no engine speed carries this channel on enough runs of both sides."
        : !design
          ? "Difference of the sides' means only: too few runs, or the side can't be told apart from leg, order or road day."
          : "Difference of the sides' means only: the channel does not scatter between runs (a coarse step), so its scatter is not known.",
    worst: worstOf(name, runs, design, settings),
  };
}

const shifted = (x: number, half: number | null, sign: 1 | -1) => (half === null ? null : x + sign * half);

/** The simultaneous band, open where the runs show no scatter at all; null where they show none anywhere. */
function bandOf(
  rpm: readonly number[],
  values: readonly Series[],
  design: RunDesign,
  settings: ChannelSettings,
): (Pick<ChannelDifference, "difference" | "low" | "high"> & { names: string; method: string }) | null {
  if (rpm.length === 0) return null;
  const flat = Float64Array.from(values.flatMap((row) => row.map((value) => value ?? Number.NaN)));
  const band = deltaBand(flat, rpm.length, design.matrix, design.columns, design.side, design.order, {
    level: settings.level,
    seed: 0,
    resamples: 0,
    small: true,
    pool: rpm.length > 1 ? Math.round(POOL_RPM / (rpm[1] - rpm[0])) : 0,
  });
  const scale = Math.max(...flat.map((value) => Math.abs(value || 0)));
  const effect = Array.from(band.effect);
  const half = Array.from(band.standardError, (se, k) =>
    se > 1e-9 * scale ? band.criticalAt[k] * se : null,
  );
  if (half.every((width) => width === null)) return null;
  return {
    difference: effect,
    low: effect.map((x, k) => shifted(x, half[k], -1)),
    high: effect.map((x, k) => shifted(x, half[k], 1)),
    names: design.names.slice(1).join(", "),
    method: `${band.method}, critical value ${upTo(band)}${band.critical.toFixed(3)}, ${band.df} degrees of freedom`,
  };
}

function meanOf(values: readonly Series[], runs: readonly ComparedRun[], side: string, k: number): number {
  return mean(
    values.flatMap((row, r) => {
      const value = row[k];
      return runs[r].side === side && value !== null ? [value] : [];
    }),
  );
}

/** A petrol engine runs hot when lean, a diesel smokes when rich; of all else the highest value is the worst. */
function worstOf(
  name: EngineChannel,
  runs: readonly LoadedPull[],
  design: RunDesign | null,
  settings: ChannelSettings,
): ChannelDifference["worst"] {
  const of = name === "lambda" && settings.engine === "compression ignition" ? "min" : "max";
  const values = runs.map(({ fullLoad }) => fullLoad.channels[name]?.[of].value ?? null);
  const worst = (side: string) => {
    const own = values.filter((value, r): value is number => value !== null && runs[r].side === side);
    return of === "max" ? Math.max(...own) : Math.min(...own);
  };
  const [a, b] = [worst(settings.a), worst(settings.b)];
  const found = sideEffect(runs, values, design, settings);
  return {
    of,
    a,
    b,
    difference: b - a,
    mean_difference: found?.effect ?? b - a,
    half_width: found?.half || null,
  };
}
