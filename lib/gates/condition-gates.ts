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
    case "alike_tyre_pressure":
      return gateResult(
        gate,
        `A and B within ${figure(gate.withinKpa)} kPa of tyre pressure`,
        alikeTyres(evidence, gate.withinKpa),
      );
    case "alike_fuel":
      return gateResult(gate, "A and B on the same fuel", sameFuel(evidence));
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
  typedFor = "run",
): Verdict {
  const runs = usableRuns(evidence);
  if (!bothSides(runs)) return noRuns();
  const unknown = runs.filter((run) => of(run) === null).length;
  if (unknown > 0)
    return tooLittle(
      `The ${name} of ${counted(unknown, "run")} is not known.`,
      `Type the ${name} of every ${typedFor}.`,
    );
  const mean = (side: string) => {
    const values = runs.flatMap((run) => (run.side === side ? [of(run) ?? 0] : []));
    return values.reduce((sum, x) => sum + x, 0) / values.length;
  };
  const difference = Math.abs(mean("B") - mean("A"));
  const why = `The mean ${name} differs by ${figure(difference)} ${unit} (A ${figure(mean("A"))}, B ${figure(mean("B"))} ${unit}); ${figure(within)} ${unit} are allowed.`;
  return difference <= within ? met(why) : notMet(why, next);
}

/** Both axles must agree; the one that agrees least speaks. */
function alikeTyres(evidence: GateEvidence, withinKpa: number): Verdict {
  const next = "Set the tyres to one pressure for both sides and drive again.";
  const axle = (name: string, of: (run: EvidenceRun) => number | null) =>
    alike(evidence, of, withinKpa, `${name} tyre pressure`, "kPa", next, "road day");
  const front = axle("front", (run) => run.tyreFrontKpa);
  const rear = axle("rear", (run) => run.tyreRearKpa);
  const worse = (["not_met", "too_little"] as const).flatMap((state) =>
    [front, rear].filter((verdict) => verdict.state === state),
  );
  return worse[0] ?? met(`${front.why} ${rear.why}`);
}

/** The same fuel notes on both sides, but for letter case and spaces. */
function sameFuel(evidence: GateEvidence): Verdict {
  const runs = usableRuns(evidence);
  if (!bothSides(runs)) return noRuns();
  const noted = (run: EvidenceRun) => (run.fuel ?? "").trim().replace(/\s+/g, " ").toLowerCase();
  const unknown = runs.filter((run) => noted(run) === "").length;
  if (unknown > 0)
    return tooLittle(
      `The fuel of ${counted(unknown, "run")} is not noted.`,
      "Note grade and batch of the fuel on every road day.",
    );
  const fuels = (side: string) =>
    [...new Set(runs.filter((run) => run.side === side).map(noted))].sort().join("; ");
  const [a, b] = [fuels("A"), fuels("B")];
  return a === b
    ? met(`The fuel noted for both sides is the same: ${a}.`)
    : notMet(
        `The fuel noted differs: A ${a}; B ${b}.`,
        "Drive both sides on one batch, or note one fuel in the same words.",
      );
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
