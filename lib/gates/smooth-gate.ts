import type { GateEvidence } from "@/lib/gates/evidence";
import type { GateResult, SmoothCurveGate } from "@/lib/gates/plan";
import { figure, gateResult, met, notMet, tooLittle, type Verdict } from "@/lib/gates/verdict";
import type { Smoothness } from "@/lib/measure/engine/smoothness-types";

/**
 * No ripple or spike of B's mean curve beyond x % of its local fit: met when deviation and interval lie inside everywhere, not
 * met when a whole interval lies beyond, else too little.
 */
export function smoothCurveGate(gate: SmoothCurveGate, { result }: GateEvidence): GateResult {
  const title = `No ripple or spike beyond ${figure(gate.withinPct)} % of the local fit`;
  const side = result?.sides.B;
  if (!side)
    return gateResult(
      gate,
      title,
      tooLittle("There is no usable pull on side B yet.", "Drive both sides, A B B A in twins."),
    );
  if (side.smoothness === undefined)
    return gateResult(
      gate,
      title,
      tooLittle("This result was computed before curves were looked through.", "Recompute the comparison."),
    );
  return gateResult(gate, title, side.smoothness ? verdictOn(side.smoothness, gate.withinPct) : few());
}

const few = () =>
  tooLittle(
    "Fewer than three pulls on side B can't tell ripple from scatter.",
    "Drive further twins on side B.",
  );

function verdictOn(smoothness: Smoothness, withinPct: number): Verdict {
  const points = smoothness.rpm.flatMap((rpm, k) => {
    const [deviation, half] = [smoothness.deviation_pct[k], smoothness.half_width_pct[k]];
    return deviation === null || half === null ? [] : [{ rpm, deviation, half, size: Math.abs(deviation) }];
  });
  if (points.length === 0) return few();
  const last = points[points.length - 1];
  const worstBy = (of: (point: (typeof points)[number]) => number) =>
    points.reduce((a, b) => (of(b) > of(a) ? b : a));
  const at = ({ rpm, deviation, half }: (typeof points)[number]) =>
    `At ${figure(rpm, 0)} per minute the mean curve of B lies ${figure(deviation)} ± ${figure(half)} % off its local fit`;
  const clear = worstBy((point) => point.size - point.half);
  if (clear.size - clear.half > withinPct)
    return notMet(`${at(clear)}.`, "Look at the maps around this engine speed; make a new revision.");
  const open = worstBy((point) => point.size + point.half);
  const judged = `judged from ${figure(points[0].rpm, 0)} to ${figure(last.rpm, 0)} per minute`;
  const unjudged = smoothness.rpm.find(
    (rpm, k) => rpm > points[0].rpm && rpm < last.rpm && smoothness.deviation_pct[k] === null,
  );
  if (open.size + open.half <= withinPct && unjudged !== undefined)
    return tooLittle(
      `${at(open)}; ${judged}, but not at ${figure(unjudged, 0)} per minute, where too few pulls give a curve.`,
      "Drive further twins that cover the whole range at full load.",
    );
  return open.size + open.half <= withinPct
    ? met(`${at(open)}, nowhere more; ${judged}.`)
    : tooLittle(`${at(open)}; ${judged}.`, "Drive further twins: the interval gets narrower with every one.");
}
