import type { GatePlan } from "@/lib/gates/plan";

/** A gate plan in one line: how many gates bind and how many are shown. */
export function PlanSummary({ plan }: { plan: GatePlan }) {
  const count = (level: string) => plan.gates.filter((gate) => gate.level === level).length;
  return (
    <p className="text-15">
      <strong>{count("must")}</strong> must, <strong>{count("should")}</strong> should, {count("off")} off
    </p>
  );
}
