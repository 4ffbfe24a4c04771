import { GATE_GROUPS, gateWords, LEVEL_WORDS } from "@/components/features/programmes/gate-words";
import { extrasText } from "@/components/features/programmes/gate-words-calibration";
import { Tag } from "@/components/ui/data/tag";
import { SectionHeading } from "@/components/ui/layout/section-heading";
import type { Gate, GatePlan } from "@/lib/gates/plan";

function numbersText(gate: Gate): string {
  const values = gate as unknown as Record<string, number | null>;
  return gateWords(gate)
    .numbers.flatMap(({ name, label, unit }) => {
      const value = values[name];
      if (value === null)
        return gate.kind === "channel_limit" || gate.kind === "step_limit" ? [] : `${label} open`;
      return `${label} ${value}${unit ? `\u202f${unit}` : ""}`;
    })
    .concat(extrasText(gate, gateWords(gate)))
    .join(", ");
}

/** One version of a gate plan, to read. */
export function GatePlanView({ plan }: { plan: GatePlan }) {
  return (
    <div className="flex flex-col gap-5">
      {GATE_GROUPS.map((group) => {
        const gates = plan.gates.filter((gate) => group.kinds.includes(gate.kind));
        if (gates.length === 0) return null;
        return (
          <div key={group.title}>
            <SectionHeading>{group.title}</SectionHeading>
            <ul className="mt-1">
              {gates.map((gate) => (
                <li
                  key={gate.id}
                  className="flex flex-wrap items-baseline justify-between gap-x-4 gap-y-1 border-line border-t py-2 first:border-t-0"
                >
                  <span className="min-w-0 text-15">
                    <span className="font-medium">{gateWords(gate).title}</span>{" "}
                    <span className="text-ink2">{numbersText(gate)}</span>
                    {gateWords(gate).note && (
                      <span className="block text-13 text-ink2">{gateWords(gate).note}</span>
                    )}
                  </span>
                  <Tag tone={gate.level === "must" ? "strong" : "plain"}>
                    {LEVEL_WORDS[gate.level].toLowerCase()}
                  </Tag>
                </li>
              ))}
            </ul>
          </div>
        );
      })}
    </div>
  );
}
