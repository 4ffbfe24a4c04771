import { Button } from "@/components/ui/action/button";
import { NumberInput } from "@/components/ui/form/number-input";
import type { PlanField, PlanQuery } from "@/lib/services/plans/schema";

const FIELDS: { name: PlanField; label: string; unit: string; hint: string }[] = [
  { name: "wanted", label: "Difference to show", unit: "%", hint: "Gain or loss of torque" },
  { name: "strip", label: "One leg", unit: "m", hint: "Run-up and braking room included" },
  { name: "leg", label: "Time a leg", unit: "min", hint: "With turning round" },
  { name: "write", label: "Time a write", unit: "min", hint: "Writing and proving the image" },
  { name: "fuel", label: "Fuel", unit: "l/100 km", hint: "Full load and coasting together" },
];

/** What the plan is for and what the workshop knows of its strip; asks for the page again, so that a link keeps it. */
export function PlanForm({ query }: { query: Pick<PlanQuery, "texts" | "errors"> }) {
  return (
    <form method="get" className="flex flex-col gap-4">
      <div className="grid gap-4 sm:grid-cols-2 lg:grid-cols-5">
        {FIELDS.map(({ name, label, unit, hint }) => (
          <NumberInput
            key={name}
            name={name}
            label={label}
            unit={unit}
            hint={hint}
            defaultValue={query.texts[name]}
            error={query.errors[name]}
          />
        ))}
      </div>
      <div>
        <Button type="submit" look="filled">
          Show the plan
        </Button>
      </div>
      <p className="text-13 text-ink2">
        Times and fuel start with usual values (common practice, no source). They stay in this page's address.
      </p>
    </form>
  );
}
