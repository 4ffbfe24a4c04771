import { compareChannels } from "@/lib/compare/compare-channels";
import { type ComparedPull, compareSides } from "@/lib/compare/compare-sides";
import { repeatability } from "@/lib/compare/plan/repeatability";
import { addTimes } from "@/lib/compare/times/add-times";
import type { FileRefusedError } from "@/lib/errors";
import type { LogTable } from "@/lib/logs/types";
import { ANALYSIS_VERSION } from "@/lib/measure/analysis-version";
import { peakOfCurve } from "@/lib/measure/curve/peak-of-curve";
import { sideResults } from "@/lib/measure/curve/side-result";
import { findAnomalies } from "@/lib/measure/engine/curve-anomalies";
import { runFullLoad } from "@/lib/measure/engine/full-load";
import type { RunFullLoad } from "@/lib/measure/engine/full-load-types";
import { sideFullLoad } from "@/lib/measure/engine/side-full-load";
import { valuesOn } from "@/lib/measure/engine/values-on";
import { type CampaignEstimate, estimateCampaign, type ReadyRun } from "@/lib/measure/estimate-campaign";
import { maskedSpans, withConsequences } from "@/lib/measure/judge/consequence";
import { judgeTogether } from "@/lib/measure/judge/judge-together";
import { roundResult } from "@/lib/measure/round-result";
import { commonGear } from "@/lib/measure/run/common-gear";
import { type PreparedRun, prepareRun } from "@/lib/measure/run/prepare-run";
import { type PullResult, pullResult } from "@/lib/measure/run/run-result";
import { addFalls, type FallInput } from "@/lib/measure/sprint/add-falls";
import { type MeasuredSprint, measureSprint, type SprintResult } from "@/lib/measure/sprint/sprint";
import { timingsOf } from "@/lib/measure/sprint/timings";
import type {
  Campaign,
  CampaignResult,
  CampaignRun,
  CampaignSettings,
  CampaignVehicle,
  Reason,
  RunResult,
  Series,
} from "@/lib/measure/types";

/** Resamples of the simultaneous band (measurement.md 6.3 asks for at least 2000). */
const RESAMPLES = 2000;

interface AnalysedPull {
  run: CampaignRun;
  pull: PullResult;
  fullLoad: RunFullLoad | undefined;
}

/**
 * Analyses a campaign: every run's verdict, curve, peak and times; each side's mean; the difference with its band.
 * `logs` is keyed by run id; a FileRefusedError stands for a log that could not be read. A refused run is a result, not an
 * error. The same input gives the same output to the last digit.
 */
export function analyseCampaign(
  campaign: Campaign,
  logs: ReadonlyMap<string, LogTable | FileRefusedError>,
): CampaignResult {
  const { vehicle } = campaign;
  const prepared = campaign.runs.map((run) => prepareRun(run, vehicle, logs.get(run.id)));
  const gears = [
    ...new Set(campaign.runs.filter((run) => run.kind === "pull").map((run) => run.gear ?? null)),
  ];
  const analysed = new Map<string, PullResult>();
  for (const gear of gears.length > 0 ? gears : [null]) {
    const ready = prepared.flatMap((p): ReadyRun[] =>
      p.signals &&
      p.segments &&
      (p.run.kind === "coast-down" || (p.run.gear ?? null) === gear) &&
      (p.segments.pull || p.segments.coast)
        ? [
            {
              run: p.run,
              signals: p.signals,
              segments:
                p.run.kind === "coast-down" ? { ...p.segments, pull: null, cruise: null } : p.segments,
            },
          ]
        : [],
    );
    if (!ready.some((r) => r.segments.pull)) continue;
    const estimate: CampaignEstimate = estimateCampaign(ready, vehicle, gear);
    ready.forEach(({ run }, index) => {
      const own = prepared.find((p) => p.run.id === run.id);
      const result = run.kind === "pull" ? pullResult(estimate, index, campaign, own?.notes ?? []) : null;
      if (result) analysed.set(run.id, result);
    });
  }
  const timings = timingsOf(campaign.settings);
  const sprints = new Map(
    prepared.flatMap((p): [string, MeasuredSprint][] =>
      p.run.kind === "sprint" && p.table && p.signals ? [[p.run.id, measureSprint(p.table, timings)]] : [],
    ),
  );
  judgeTogether(prepared);
  const runs = prepared.map((p) =>
    runResult(p, analysed.get(p.run.id), vehicle, sprints.get(p.run.id)?.result),
  );
  addFalls(campaign, runs, new Map<string, FallInput>([...analysed, ...sprints]));
  const usable = campaign.runs.flatMap((run, k): AnalysedPull[] => {
    const pull = analysed.get(run.id);
    const fullLoad = runs[k].full_load;
    return pull && runs[k].usable && run.kind === "pull" ? [{ run, pull, fullLoad }] : [];
  });
  return roundResult({
    analysis_version: ANALYSIS_VERSION,
    runs: runs.map(withConsequences),
    ...sidesAndDelta(campaign, usable, runs),
  });
}

/** Analyses one run alone: its verdict, segments, curve and times, with the losses of its own coast-down. */
export function analyseRun(
  vehicle: CampaignVehicle,
  run: CampaignRun,
  log: LogTable | FileRefusedError,
  settings: CampaignSettings,
): RunResult {
  return analyseCampaign({ campaign: 1, vehicle, runs: [run], settings }, new Map([[run.id, log]])).runs[0];
}

function runResult(
  prepared: PreparedRun,
  pull: PullResult | undefined,
  vehicle: CampaignVehicle,
  sprint: SprintResult | undefined,
): RunResult {
  const { run, table, signals, segments, reasons, notes } = prepared;
  const base: RunResult = { id: run.id, usable: reasons.length === 0, reasons, notes };
  if (!signals || !table) return base;
  base.sample_rate_hz = signals.rateHz;
  if (run.kind === "sprint" && sprint) {
    if (Object.keys(sprint.times_s).length === 0) {
      reasons.push({
        code: "no_sprint_found",
        message:
          "The log has no acceleration from rest or through a known pair of speeds. Check that the whole run is in the recording.",
      });
    }
    return { ...base, ...sprint, usable: reasons.length === 0, reasons, notes: [...notes, ...sprint.notes] };
  }
  base.segments = {
    ...(segments?.pull && run.kind === "pull" && { pull: segments.pull }),
    ...(segments?.coast && { coast: segments.coast }),
  };
  if (run.kind === "coast-down" || !pull) {
    if (run.kind === "pull" && reasons.length === 0) {
      reasons.push({ code: "no_pull_found", message: "No speed channel covers the pull." });
    }
    return { ...base, usable: reasons.length === 0, speed_source: signals.speedName };
  }
  const fullLoad =
    segments?.pull && runFullLoad(table, pull.grid, segments.pull, vehicle, maskedSpans(notes));
  return {
    ...base,
    ...pull.result,
    notes: [...notes, ...pull.result.notes],
    ...(fullLoad && { full_load: fullLoad }),
  };
}

function sidesAndDelta(
  campaign: Campaign,
  usable: readonly AnalysedPull[],
  results: readonly RunResult[],
): Pick<CampaignResult, "repeatability" | "sides" | "delta" | "warnings"> {
  const warnings: Reason[] = [];
  const gear = commonGear(usable.map(({ run }) => run.gear ?? null));
  const pulls = usable.filter(({ run }) => (run.gear ?? null) === gear);
  if (pulls.length < usable.length) {
    warnings.push({
      code: "gears_differ",
      message: `The pulls were driven in different gears; only those ${gear === null ? "without a stated gear" : `in gear ${gear}`} are compared.`,
    });
  }
  const everyFactor = pulls.length > 0 && pulls.every(({ pull }) => pull.result.factor?.applied);
  const someFactor = pulls.some(({ pull }) => pull.result.factor?.applied);
  const basis = everyFactor ? "reference" : "day";
  if (someFactor && !everyFactor) {
    warnings.push({
      code: "factor_not_for_all",
      message:
        "The weather factor can't be had for every run, so all sides are shown uncorrected: bases are never mixed.",
    });
  }
  const step = campaign.settings.rpm_step;
  const all = pulls.flatMap(({ pull }) => pull.grid.rpm);
  const low = Math.min(...all);
  const high = Math.max(...all);
  const rpm =
    all.length === 0
      ? []
      : Array.from({ length: Math.round((high - low) / step) + 1 }, (_, k) => low + k * step);
  const torqueOf = ({ pull }: AnalysedPull): Series => {
    const factor = basis === "reference" ? (pull.result.factor?.value ?? 1) : 1;
    return valuesOn(rpm, pull.grid.rpm, pull.grid.engineNm).map((nm) => (nm === null ? null : nm * factor));
  };
  const names = [...new Set(pulls.flatMap(({ run }) => (run.side ? [run.side] : [])))].sort();
  const sides = sideResults(
    rpm,
    names.map((name) => {
      const members = pulls.filter(({ run }) => run.side === name);
      return {
        name,
        absolute: members.every((m) => m.pull.result.curve),
        pulls: members.map((m) => ({
          engineNm: torqueOf(m),
          sensitivityAt: m.pull.sensitivityAt,
          basis: m.pull.basis,
          factor:
            basis === "reference" && m.pull.result.factor
              ? { id: m.pull.result.factor.id, relative: m.pull.factorUncertainty }
              : null,
        })),
      };
    }),
    basis,
  );
  const { compare, settings } = campaign;
  const compared = pulls.map((m): ComparedPull => {
    const engineNm = torqueOf(m);
    const peak = peakOfCurve(rpm, engineNm, true, null);
    return {
      id: m.run.id,
      side: m.run.side ?? "",
      leg: m.run.leg ?? null,
      order: m.run.order ?? null,
      roadDay: m.run.road_day ?? null,
      engineNm,
      kernelRpm: valuesOn(rpm, m.pull.grid.rpm, m.pull.kernelRpm),
      peakKw: peak?.engine_kw ?? null,
      peakNm: peak?.engine_nm ?? null,
    };
  });
  const loaded = pulls.flatMap(({ fullLoad }, k) => (fullLoad ? [{ ...compared[k], fullLoad }] : []));
  const curvesOf = (name: string) => compared.flatMap((c) => (c.side === name ? [c.engineNm] : []));
  const found = findAnomalies(rpm, Object.fromEntries(names.map((n) => [n, curvesOf(n)])), settings.level);
  for (const name of names) {
    sides[name].full_load = sideFullLoad(loaded.filter((one) => one.side === name));
    Object.assign(sides[name], found[name]);
  }
  const model = compare && { ...compare, level: settings.level, seed: settings.seed, resamples: RESAMPLES };
  const curves = model && compareSides(rpm, compared, { ...model, basis, ranges: settings.rpm_ranges });
  const pullIds = new Set(pulls.map(({ run }) => run.id));
  const delta = model ? addTimes(curves ?? null, campaign, results, pullIds, basis) : undefined;
  if (delta && model) delta.channels = compareChannels(loaded, { ...model, engine: campaign.vehicle.engine });
  return { repeatability: compare ? repeatability(rpm, compared) : undefined, sides, delta, warnings };
}
