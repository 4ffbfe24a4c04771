import type { GateEvidence } from "@/lib/gates/evidence";
import type { GainGate, GateResult, NoLossGate, SprintGate } from "@/lib/gates/plan";
import { figure, gateResult, met, notMet, tooLittle, type Verdict } from "@/lib/gates/verdict";
import type { DeltaResult } from "@/lib/measure/types";

/** Where the ends of an open region lie: above the start of the pull and below the limiter, 1/min. */
const ABOVE_START_RPM = 500;
const BELOW_LIMITER_RPM = 300;

interface BandPoint {
  rpm: number;
  low: number | null;
  high: number | null;
}

/** A gain of at least x % everywhere in a region: the whole band must lie above x. */
export function gainGate(gate: GainGate, { result }: GateEvidence): GateResult {
  const title = `Gain of at least ${figure(gate.atLeastPct)} %, ${span(gate.fromRpm, gate.toRpm)}`;
  const delta = result?.delta ?? null;
  return gateResult(gate, title, bandVerdict(delta, gate.fromRpm, gate.toRpm, gate.atLeastPct, "a gain of"));
}

/** No loss beyond x % anywhere in a region: the whole band must lie above −x. */
export function noLossGate(gate: NoLossGate, { result, redlineRpm }: GateEvidence): GateResult {
  const delta = result?.delta ?? null;
  const start = delta?.rpm[0];
  const from = gate.fromRpm ?? (start === undefined ? null : start + ABOVE_START_RPM);
  const to = gate.toRpm ?? redlineRpm - BELOW_LIMITER_RPM;
  const where =
    from === null
      ? `from ${ABOVE_START_RPM} above the start of the pull to ${figure(to, 0)} per minute`
      : span(from, to);
  const title = `No loss beyond ${figure(gate.beyondPct)} %, ${where}`;
  return gateResult(gate, title, bandVerdict(delta, from ?? 0, to, -gate.beyondPct, "a loss of"));
}

function span(from: number, to: number): string {
  return `${figure(from, 0)} to ${figure(to, 0)} per minute`;
}

/** Met when the band's lower edge lies at or above `limitPct` all over the region; not met when somewhere its upper edge lies below. */
function bandVerdict(
  delta: DeltaResult | null,
  from: number,
  to: number,
  limitPct: number,
  what: string,
): Verdict {
  if (!delta)
    return tooLittle("There is no comparison of both sides yet.", "Drive both sides, A B B A in twins.");
  const points = delta.rpm.flatMap((rpm, k): BandPoint[] =>
    rpm >= from && rpm <= to ? [{ rpm, low: delta.low_pct[k], high: delta.high_pct[k] }] : [],
  );
  const size = `${what} ${figure(Math.abs(limitPct))} %`;
  const level = `${figure(100 * delta.level)} % band`;
  const below = points.filter((p) => p.high !== null && p.high < limitPct);
  if (below.length > 0) {
    const worst = below.reduce((a, b) => ((b.high ?? 0) < (a.high ?? 0) ? b : a));
    const why = `At ${figure(worst.rpm, 0)} per minute the whole ${level} lies below ${figure(limitPct)} % (${figure(worst.low ?? 0)} to ${figure(worst.high ?? 0)} %).`;
    return notMet(
      why,
      limitPct < 0
        ? "Look at the change around this engine speed; make a new revision."
        : "The revision does not gain what the plan asks for; change the revision or the plan.",
    );
  }
  // Engine speeds that too few runs carry are not in the comparison at all, so holes are told by the finest step.
  const steps = delta.rpm.slice(1).map((rpm, k) => rpm - delta.rpm[k]);
  const step = steps.length > 0 ? Math.min(...steps) : 0;
  const hole = points.findIndex((p, k) => k > 0 && p.rpm - points[k - 1].rpm > 1.5 * step);
  const covered =
    points.length > 0 && points[0].rpm <= from + step && points[points.length - 1].rpm >= to - step;
  const gap = points.find((p) => p.low === null);
  if (!covered || gap || hole > 0 || !delta.simultaneous) {
    const why = !delta.simultaneous
      ? `There is no simultaneous band. ${delta.method}`
      : gap
        ? `At ${figure(gap.rpm, 0)} per minute there is no band.`
        : points.length === 0
          ? "The pulls do not reach this region."
          : covered
            ? `Too few pulls cover ${span(points[hole - 1].rpm, points[hole].rpm)}: there is no band in between.`
            : `The band covers ${span(points[0].rpm, points[points.length - 1].rpm)} only.`;
    return tooLittle(why, "Drive further twins that cover the whole region at full load.");
  }
  const open = points.filter((p) => (p.low ?? 0) < limitPct);
  if (open.length === 0) {
    const lowest = points.reduce((a, b) => ((b.low ?? 0) < (a.low ?? 0) ? b : a));
    return met(
      `All over the region the ${level} lies above ${figure(limitPct)} %; its lowest point is ${figure(lowest.low ?? 0)} % at ${figure(lowest.rpm, 0)} per minute.`,
    );
  }
  const worst = open.reduce((a, b) => ((b.low ?? 0) < (a.low ?? 0) ? b : a));
  const why = `The ${level} does not rule ${limitPct < 0 ? "out" : "in"} ${size}: at ${figure(worst.rpm, 0)} per minute it runs from ${figure(worst.low ?? 0)} to ${figure(worst.high ?? 0)} %.`;
  return tooLittle(why, "Drive further twins: the band gets narrower with every one.");
}

/** Not slower than the reference by more than x s: the whole interval of the difference must lie below. */
export function sprintGate(gate: SprintGate, { result }: GateEvidence): GateResult {
  const unit = /^[\d.]+-[\d.]+$/.test(gate.time) ? `${gate.time} km/h` : gate.time;
  const title = `${unit} not slower by more than ${figure(gate.notSlowerByS, 2)} s`;
  const times = result?.delta?.times_difference?.[gate.time];
  if (!times) {
    return gateResult(
      gate,
      title,
      tooLittle(
        `No run of both sides covers ${unit}.`,
        `Drive runs that cover ${unit}, or take this gate out of the plan.`,
      ),
    );
  }
  if (times.half_width_s === null) {
    return gateResult(
      gate,
      title,
      tooLittle(
        `One run a side can't tell its own scatter (A ${times.n_a}, B ${times.n_b}).`,
        "Drive further twins.",
      ),
    );
  }
  const low = times.difference_s - times.half_width_s;
  const high = times.difference_s + times.half_width_s;
  const why = `B takes ${figure(times.difference_s, 3)} s ± ${figure(times.half_width_s, 3)} s against A (n ${times.n_a} and ${times.n_b}); ${figure(gate.notSlowerByS, 2)} s are allowed.`;
  if (high <= gate.notSlowerByS) return gateResult(gate, title, met(why));
  if (low > gate.notSlowerByS)
    return gateResult(
      gate,
      title,
      notMet(why, "The revision is slower here; look at the delta in this region."),
    );
  return gateResult(
    gate,
    title,
    tooLittle(why, "Drive further twins: the interval gets narrower with every one."),
  );
}
