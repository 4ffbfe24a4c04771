import { type GateEvidence, usableRuns } from "@/lib/gates/evidence";
import type { ChannelLimitGate, GateResult } from "@/lib/gates/plan";
import { QUANTITIES, type QuantityWords, senseless } from "@/lib/gates/quantities";
import {
  counted,
  doesNotApply,
  figure,
  gateResult,
  met,
  notMet,
  tooLittle,
  type Verdict,
} from "@/lib/gates/verdict";
import { tQuantile } from "@/lib/signal/distributions";
import { mean, standardDeviation } from "@/lib/signal/statistics";

/** Fewer pulls can't tell how much they scatter. */
const LEAST_PULLS = 3;
const LEVEL = 0.95;

interface Pull {
  id: string;
  low: number;
  high: number;
  loadS: number;
}

/**
 * Limits of an engine quantity at full load on side B. Met: every pull's worst value and the whole interval of their mean lie
 * inside, over pulls that are long enough, and no usable pull lacks the quantity: what was not recorded may have been beyond.
 * Not met: the whole interval lies beyond. Else too little.
 */
export function channelLimitGate(gate: ChannelLimitGate, evidence: GateEvidence): GateResult {
  const words = QUANTITIES[gate.quantity];
  const title = `${words.name} ${limitText(gate, words)} at full load`;
  const reason = senseless(gate, evidence);
  return gateResult(gate, title, reason ? doesNotApply(reason) : verdictOn(gate, words, evidence));
}

function limitText({ min, max }: ChannelLimitGate, words: QuantityWords): string {
  const text = (value: number) => `${figure(value, words.digits)}${words.unit}`;
  if (min !== null && max !== null) return `from ${figure(min, words.digits)} to ${text(max)}`;
  return min === null ? `at most ${text(max ?? 0)}` : `at least ${text(min)}`;
}

function verdictOn(gate: ChannelLimitGate, words: QuantityWords, evidence: GateEvidence): Verdict {
  const ids = new Set(usableRuns(evidence).flatMap((run) => (run.side === "B" ? [run.id] : [])));
  const runs = (evidence.result?.runs ?? []).filter((run) => ids.has(run.id));
  if (runs.length === 0)
    return tooLittle("There is no usable pull on side B yet.", "Drive both sides, A B B A in twins.");
  if (runs.every((run) => run.full_load === undefined))
    return tooLittle(
      "This result was computed before engine channels were read.",
      "Recompute the comparison.",
    );
  const pulls = runs.flatMap((run): Pull[] => {
    const found = run.full_load && words.extremes(run.full_load);
    return found && run.full_load ? [{ id: run.id, ...found, loadS: run.full_load.load_s }] : [];
  });
  if (pulls.length === 0) {
    const why = runs.find((run) => run.full_load?.boost?.why)?.full_load?.boost?.why;
    return tooLittle(
      gate.quantity === "boost_overshoot" && why ? why : "Not recorded on side B.",
      "Log this channel on every pull.",
    );
  }
  const verdicts = [
    ...(gate.max === null ? [] : [sideOfLimit(gate, words, pulls, gate.max, "high")]),
    ...(gate.min === null ? [] : [sideOfLimit(gate, words, pulls, gate.min, "low")]),
  ];
  const open = (["not_met", "too_little"] as const).flatMap((state) =>
    verdicts.filter((verdict) => verdict.state === state),
  );
  const silent = runs.length - pulls.length;
  if (silent === 0) return open[0] ?? met(verdicts.map(({ why }) => why).join(" "));
  const unknown = `${silent} of ${counted(runs.length, "usable pull")} on side B ${silent === 1 ? "does" : "do"} not tell it.`;
  return open[0]
    ? { ...open[0], why: `${open[0].why} ${unknown}` }
    : tooLittle(
        `${verdicts.map(({ why }) => why).join(" ")} ${unknown}`,
        "Log this channel on every pull, and drive those that do not tell it again.",
      );
}

/** Holds the worst value of each pull against one limit; `end` says which end of the quantity it is. */
function sideOfLimit(
  { leastLoadS }: ChannelLimitGate,
  words: QuantityWords,
  pulls: readonly Pull[],
  limit: number,
  end: "low" | "high",
): Verdict {
  const beyond = (value: number) => (end === "high" ? value > limit : value < limit);
  const text = (value: number) => `${figure(value, words.digits)}${words.unit}`;
  const worst = pulls.reduce((a, b) => ((end === "high" ? b.high > a.high : b.low < a.low) ? b : a));
  const named = `${end === "high" ? "Highest" : "Lowest"} ${text(worst[end])} in run ${worst.id}`;
  if (pulls.length < LEAST_PULLS)
    return tooLittle(
      `${named}; only ${counted(pulls.length, "pull")} on side B recorded it, ${LEAST_PULLS} are needed for an interval.`,
      "Log this channel on every pull.",
    );
  const values = pulls.map((pull) => pull[end]);
  const centre = mean(values);
  const half =
    (tQuantile(0.5 + LEVEL / 2, values.length - 1) * standardDeviation(values)) / Math.sqrt(values.length);
  const why = `${named}; the mean of ${counted(pulls.length, "pull")} is ${figure(centre, words.digits)} ± ${text(half)}, the limit ${text(limit)}.`;
  if (beyond(centre - half) && beyond(centre + half))
    return notMet(why, "Bring the quantity back inside its limit in a new revision.");
  if (beyond(worst[end]) || beyond(centre - half) || beyond(centre + half))
    return tooLittle(why, "Drive further twins, or make a revision that keeps clear of the limit.");
  const long = pulls.filter((pull) => pull.loadS >= leastLoadS);
  if (long.length < LEAST_PULLS) {
    const longest = Math.max(...pulls.map((pull) => pull.loadS));
    return tooLittle(
      `${why} The longest pull holds full load for ${figure(longest)} s; this limit needs ${figure(leastLoadS)} s.`,
      "Hold full load longer where the strip allows it, e.g. in a higher gear.",
    );
  }
  return met(why);
}
