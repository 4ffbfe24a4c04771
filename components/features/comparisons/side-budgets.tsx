import { numberText } from "@/components/ui/data/number-text";
import { UncertaintyTable } from "@/components/ui/data/uncertainty-table";
import { Disclosure } from "@/components/ui/layout/disclosure";
import { adviceSentence, componentName } from "@/lib/measure/curve/budget-advice";
import type { CampaignResult } from "@/lib/measure/types";

/** What the ± of each side's own peak power is made of. The difference of the sides has a ± of its own, where most of it cancels. */
export function SideBudgets({
  result,
  labels,
}: {
  result: CampaignResult;
  labels: { a: string; b: string };
}) {
  const sides = [["A", labels.a] as const, ["B", labels.b] as const].flatMap(([side, label]) => {
    const peak = result.sides[side]?.peak;
    return peak?.budget ? [{ side, label, n: result.sides[side].n, budget: peak.budget }] : [];
  });
  if (sides.length === 0) {
    return (
      <p className="px-4 pb-4 text-15 text-ink2 md:px-5">
        No budget: it takes a coast-down, and a result of an analysis version that states one. Recompute the
        comparison.
      </p>
    );
  }
  return (
    <div className="flex flex-col divide-y divide-line">
      {sides.map(({ side, label, n, budget }) => (
        <div key={side} className="px-4 py-3 md:px-5">
          <p className="text-15">
            <strong>
              {side}, {label}: ± {numberText(budget.expanded_pct, { decimals: 1 })} %
            </strong>{" "}
            of its peak power (n {n}). {adviceSentence(budget)}
          </p>
          <Disclosure summary="Every part">
            <UncertaintyTable
              caption={`${side}, ${label}: peak power of ${n} run${n === 1 ? "" : "s"}`}
              unit="kW"
              parts={budget.parts.map((part) => ({
                name: componentName(part.component),
                pct: part.standard_pct,
                value: part.standard_kw,
                basis: part.basis,
              }))}
              total={{
                factor: budget.coverage_factor,
                pct: budget.expanded_pct,
                value: budget.expanded_kw,
              }}
            />
          </Disclosure>
        </div>
      ))}
    </div>
  );
}
