import { orderLeakage } from "@/lib/compare/plan/order-leakage";
import { type GateEvidence, usableRuns } from "@/lib/gates/evidence";
import type { EvidenceGate, GateResult } from "@/lib/gates/plan";
import { counted, figure, gateResult, met, notMet, tooLittle, type Verdict } from "@/lib/gates/verdict";

/** Enough runs, in an order that drift can't hide in, on enough days. */
export function evidenceGate(gate: EvidenceGate, evidence: GateEvidence): GateResult {
  switch (gate.ask) {
    case "closed_twins":
      return gateResult(
        gate,
        `At least ${counted(gate.atLeastPerSide, "closed twin")} a side`,
        closedTwins(gate.atLeastPerSide, evidence),
      );
    case "counterbalanced":
      return gateResult(gate, "Sides driven in a counterbalanced order", counterbalanced(evidence));
    case "road_days":
      return gateResult(
        gate,
        `Runs from at least ${counted(gate.atLeast, "road day")}`,
        roadDays(gate.atLeast, evidence),
      );
  }
}

function closedTwins(atLeast: number, { result }: GateEvidence): Verdict {
  const twins = (result?.delta?.twins ?? []).filter((twin) => twin.closure_pct !== null);
  const of = (side: string) => twins.filter((twin) => twin.side === side).length;
  const [a, b] = [of("A"), of("B")];
  const why = `Side A has ${counted(a, "closed twin")}, side B ${b}; ${atLeast} a side are asked for.`;
  if (Math.min(a, b) >= atLeast) return met(why);
  const missing = [
    a < atLeast ? `${atLeast - a} more on side A` : "",
    b < atLeast ? `${atLeast - b} more on side B` : "",
  ].filter(Boolean);
  return tooLittle(why, `Drive out-and-back twins: ${missing.join(", ")}.`);
}

/** A twelfth of the runs: A-B-B-A and its kin stay below, A-B-A-B and A…A-B…B do not. */
const LARGEST_LEAK_SHARE = 1 / 12;

function counterbalanced(evidence: GateEvidence): Verdict {
  const runs = usableRuns(evidence);
  if (runs.length < 4 || !["A", "B"].every((side) => runs.some((run) => run.side === side))) {
    return tooLittle(
      "There are too few usable pulls to have an order.",
      "Drive the order card: A B B A in twins.",
    );
  }
  if (runs.some((run) => run.order === null)) {
    return tooLittle(
      "Some runs have no place in the order.",
      "Give every run its place in the order driven.",
    );
  }
  // Places are counted over the usable runs of each road day: between days drift starts anew.
  const days = new Map<string, typeof runs>();
  for (const run of runs) days.set(run.roadDay ?? "", [...(days.get(run.roadDay ?? "") ?? []), run]);
  let leak = 0;
  for (const day of days.values()) {
    const sorted = [...day].sort((p, q) => (p.order ?? 0) - (q.order ?? 0));
    if (!["A", "B"].every((side) => sorted.some((run) => run.side === side))) {
      return notMet(
        "On a road day only one side was driven, so the day can't be told apart from the change.",
        "Drive both sides on the same day, A B B A in twins.",
      );
    }
    leak +=
      orderLeakage(
        sorted.map((run) => run.side),
        1,
      ) *
      (sorted.length / runs.length);
  }
  const share = Math.abs(leak) / runs.length;
  const why = `On average side B was driven ${figure(Math.abs(leak), 2)} runs ${leak >= 0 ? "later" : "earlier"} than side A, of ${runs.length} usable runs.`;
  return share < LARGEST_LEAK_SHARE
    ? met(why)
    : notMet(why, "Drive further twins so that early and late runs balance: A B B A.");
}

function roadDays(atLeast: number, evidence: GateEvidence): Verdict {
  const days = new Set(usableRuns(evidence).map((run) => run.roadDay ?? "")).size;
  const why = `The usable pulls come from ${counted(days, "road day")}.`;
  return days >= atLeast
    ? met(why)
    : tooLittle(why, `Drive on ${counted(atLeast - days, "further road day")}.`);
}
