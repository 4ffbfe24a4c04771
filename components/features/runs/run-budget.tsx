import { UncertaintyTable } from "@/components/ui/data/uncertainty-table";
import { adviceSentence, componentName } from "@/lib/measure/curve/budget-advice";
import type { UncertaintyBudget } from "@/lib/measure/types";

/** What the ± of the run's peak power is made of, and what would shrink it most. */
export function RunBudget({ budget }: { budget: UncertaintyBudget }) {
  return (
    <>
      <UncertaintyTable
        caption="What the uncertainty of the peak power is made of"
        unit="kW"
        parts={budget.parts.map((part) => ({
          name: componentName(part.component),
          pct: part.standard_pct,
          value: part.standard_kw,
          basis: part.basis,
        }))}
        total={{ factor: budget.coverage_factor, pct: budget.expanded_pct, value: budget.expanded_kw }}
      />
      <p className="px-4 py-3 text-15 md:px-5">{adviceSentence(budget)}</p>
    </>
  );
}
