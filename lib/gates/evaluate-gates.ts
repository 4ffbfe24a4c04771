import { coverageGate } from "@/lib/gates/calibration/coverage-gate";
import { declarationGate } from "@/lib/gates/calibration/declaration-gate";
import { integrityGate } from "@/lib/gates/calibration/integrity-gate";
import { stepLimitGate } from "@/lib/gates/calibration/step-limit-gate";
import { touchedGate } from "@/lib/gates/calibration/touched-gate";
import { channelLimitGate } from "@/lib/gates/channel-gates";
import { conditionsGate } from "@/lib/gates/condition-gates";
import { gainGate, noLossGate, sprintGate } from "@/lib/gates/delta-gates";
import type { GateEvidence } from "@/lib/gates/evidence";
import { evidenceGate } from "@/lib/gates/evidence-gates";
import type { Gate, GatePlan, GateResult } from "@/lib/gates/plan";
import { smoothCurveGate } from "@/lib/gates/smooth-gate";

/**
 * Evaluates every gate that a plan asks for; a gate that is off is left out. Rule for every limit: met only when the whole band
 * or interval lies on the safe side, not met when the whole of it lies beyond, else too little. Waived and stale are given by
 * whoever keeps the decision. Same plan and evidence, same results.
 */
export function evaluateGates(plan: GatePlan, evidence: GateEvidence): GateResult[] {
  return plan.gates.filter((gate) => gate.level !== "off").map((gate) => evaluate(gate, evidence));
}

function evaluate(gate: Gate, evidence: GateEvidence): GateResult {
  switch (gate.kind) {
    case "evidence":
      return evidenceGate(gate, evidence);
    case "conditions":
      return conditionsGate(gate, evidence);
    case "gain":
      return gainGate(gate, evidence);
    case "no_loss":
      return noLossGate(gate, evidence);
    case "sprint":
      return sprintGate(gate, evidence);
    case "channel_limit":
      return channelLimitGate(gate, evidence);
    case "smooth_curve":
      return smoothCurveGate(gate, evidence);
    case "touched":
      return touchedGate(gate, evidence);
    case "step_limit":
      return stepLimitGate(gate, evidence);
    case "coverage":
      return coverageGate(gate, evidence);
    case "integrity":
      return integrityGate(gate, evidence);
    case "declaration":
      return declarationGate(gate, evidence);
  }
}
