import type { GateResult } from "@/lib/gates/plan";

/** Must gates that keep a revision from being promoted unless a lead waives each. */
export function openMusts(results: readonly GateResult[]): GateResult[] {
  return results.filter(
    (gate) => gate.level === "must" && gate.state !== "met" && gate.state !== "does_not_apply",
  );
}
