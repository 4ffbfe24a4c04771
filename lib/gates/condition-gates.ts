import { type EvidenceRun, type GateEvidence, usableRuns } from "@/lib/gates/evidence";
import type { ConditionsGate, GateResult } from "@/lib/gates/plan";
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

/** Both sides driven under alike conditions, and the air in the range of the weather factor. */
export function conditionsGate(gate: ConditionsGate, evidence: GateEvidence): GateResult {
  switch (gate.ask) {
    case "factor_in_range":
      return gateResult(gate, "Weather factor in its permitted range", factorInRange(evidence));
    case "alike_temperature":
      return gateResult(
        gate,
        `A and B within ${figure(gate.withinK)} K`,
        alike(
          evidence,
          (run) => run.tempC,
          gate.withinK,
          "air temperature",
          "K",
          "Drive both sides in turns, so that the day's warming meets both.",
        ),
      );
    case "alike_pressure":
      return gateResult(
        gate,
        `A and B within ${figure(gate.withinHpa)} hPa`,
        alike(
          evidence,
          (run) => run.pressureHpa,
          gate.withinHpa,
          "air pressure",
          "hPa",
          "Drive both sides on the same day and strip.",
        ),
      );
    case "alike_mass":
      return gateResult(
        gate,
        `A and B within ${figure(gate.withinKg)} kg`,
        alike(
          evidence,
          (run) => run.massKg,
          gate.withinKg,
          "test mass",
          "kg",
          "Refuel and load alike for both sides.",
        ),
      );
    case "alike_gear":
      return gateResult(gate, "A and B in the same gear", sameGear(evidence));
    case "twin_closure":
      return gateResult(
        gate,
        `Twins close within ${figure(gate.withinPct)} %`,
        twinClosure(gate.withinPct, evidence),
      );
  }
}

const noRuns = () =>
  tooLittle("There are no usable pulls on both sides yet.", "Drive both sides, A B B A in twins.");

function bothSides(runs: readonly EvidenceRun[]): boolean {
  return runs.some((run) => run.side === "A") && runs.some((run) => run.side === "B");
}

function factorInRange(evidence: GateEvidence): Verdict {
  const usable = new Set(usableRuns(evidence).map((run) => run.id));
  const factors = (evidence.result?.runs ?? []).flatMap((run) =>
    usable.has(run.id) && run.factor ? [{ id: run.id, factor: run.factor }] : [],
  );
  if (factors.length === 0) return noRuns();
  if (factors.every(({ factor }) => factor.id === "none"))
    return doesNotApply(`No weather factor is applied. ${factors[0].factor.why}`);
  const outside = factors.filter(({ factor }) => factor.in_range === false);
  if (outside.length > 0) {
    return notMet(
      `${counted(outside.length, "run")} of ${factors.length} lie outside: ${outside[0].factor.why}`,
      "Drive in air inside the permitted range, or decide on the difference alone.",
    );
  }
  const unknown = factors.filter(({ factor }) => factor.value === null);
  if (unknown.length > 0)
    return tooLittle(
      `The weather of ${counted(unknown.length, "run")} is not known.`,
      "Type temperature, pressure and humidity of every run.",
    );
  return met(`The factor of all ${factors.length} usable pulls is in its range.`);
}

function alike(
  evidence: GateEvidence,
  of: (run: EvidenceRun) => number | null,
  within: number,
  name: string,
  unit: string,
  next: string,
): Verdict {
  const runs = usableRuns(evidence);
  if (!bothSides(runs)) return noRuns();
  const unknown = runs.filter((run) => of(run) === null).length;
  if (unknown > 0)
    return tooLittle(
      `The ${name} of ${counted(unknown, "run")} is not known.`,
      `Type the ${name} of every run.`,
    );
  const mean = (side: string) => {
    const values = runs.flatMap((run) => (run.side === side ? [of(run) ?? 0] : []));
    return values.reduce((sum, x) => sum + x, 0) / values.length;
  };
  const difference = Math.abs(mean("B") - mean("A"));
  const why = `The mean ${name} differs by ${figure(difference)} ${unit} (A ${figure(mean("A"))}, B ${figure(mean("B"))} ${unit}); ${figure(within)} ${unit} are allowed.`;
  return difference <= within ? met(why) : notMet(why, next);
}

function sameGear(evidence: GateEvidence): Verdict {
  const runs = usableRuns(evidence);
  if (!bothSides(runs)) return noRuns();
  if (runs.some((run) => run.gear === null))
    return tooLittle("The gear of some runs is not known.", "State the gear of every pull.");
  const gears = [...new Set(runs.map((run) => run.gear))];
  return gears.length === 1
    ? met(`All usable pulls were driven in gear ${gears[0]}.`)
    : notMet(
        `Pulls were driven in gears ${gears.join(", ")}.`,
        "Set aside the pulls in the other gear, or drive both sides in one gear.",
      );
}

function twinClosure(withinPct: number, { result }: GateEvidence): Verdict {
  const closed = (result?.delta?.twins ?? []).flatMap((twin) =>
    twin.closure_pct === null ? [] : [{ ...twin, size: Math.abs(twin.closure_pct) }],
  );
  if (closed.length === 0)
    return tooLittle("There is no closed twin yet.", "Drive out and back on one image.");
  const worst = closed.reduce((a, b) => (b.size > a.size ? b : a));
  const why = `The widest of ${counted(closed.length, "twin")} (${worst.out} out, ${worst.back} back) closes within ${figure(worst.size)} %.`;
  return worst.size <= withinPct
    ? met(why)
    : notMet(why, "Look at wind and the two runs of this twin; drive it again.");
}
