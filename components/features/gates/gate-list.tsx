import { Disclosure } from "@/components/ui/layout/disclosure";
import { StateMark } from "@/components/ui/status/state-mark";
import { cn } from "@/lib/cn";
import type { GateResult } from "@/lib/gates/plan";

const ORDER: Record<GateResult["state"], number> = {
  not_met: 0,
  too_little: 1,
  stale: 2,
  waived: 3,
  met: 4,
  does_not_apply: 5,
};

const LEVEL: Record<GateResult["level"], string> = { must: "must", should: "should", off: "off" };

export interface GateListProps {
  gates: readonly GateResult[];
  /** Reasons of waivers by gate, printed at the gate. */
  waivers?: ReadonlyMap<string, string>;
  /** Side by side from 640 px on, for a wide place. */
  columns?: 1 | 2;
  /** Shows what asks for nothing any more (met, does not apply) on demand only, for a narrow place. */
  foldSettled?: boolean;
}

const isSettled = ({ state }: GateResult) => state === "met" || state === "does_not_apply";

/** Gates with their state, why, and the next step; what is open stands first. */
export function GateList({ gates, waivers, columns = 1, foldSettled = false }: GateListProps) {
  const asked = gates.filter((gate) => gate.level !== "off");
  if (asked.length === 0)
    return <p className="text-15 text-ink2">No gate is asked by the plan of this programme.</p>;
  const sorted = [...asked].sort(
    (a, b) => ORDER[a.state] - ORDER[b.state] || Number(a.level !== "must") - Number(b.level !== "must"),
  );
  const open = foldSettled ? sorted.filter((gate) => !isSettled(gate)) : sorted;
  const settled = foldSettled ? sorted.filter(isSettled) : [];
  return (
    <>
      {open.length > 0 && <Gates gates={open} waivers={waivers} columns={columns} />}
      {settled.length > 0 && (
        <Disclosure summary={gateCount(settled)} className="border-line border-t pt-1">
          <Gates gates={settled} waivers={waivers} columns={columns} />
        </Disclosure>
      )}
    </>
  );
}

function Gates({ gates, waivers, columns }: Pick<GateListProps, "gates" | "waivers" | "columns">) {
  return (
    <ul className={cn("grid gap-x-8", columns === 2 && "sm:grid-cols-2")}>
      {gates.map((gate) => (
        <li key={gate.id} className="keep-together flex flex-col gap-1 border-line border-t py-3">
          <div className="flex flex-wrap items-center justify-between gap-x-3">
            <StateMark state={gate.state} />
            <span className="text-13 text-ink2">{LEVEL[gate.level]}</span>
          </div>
          <p className="font-medium text-15">{gate.title}</p>
          <p className="text-13 text-ink2">{gate.why}</p>
          {gate.next && gate.state !== "waived" && <p className="text-13">Next: {gate.next}</p>}
          {waivers?.get(gate.id) && <p className="text-13">Waived because: {waivers.get(gate.id)}</p>}
        </li>
      ))}
    </ul>
  );
}

/** How many gates stand in which state, in words: "8 met, 1 not met". */
export function gateCount(gates: readonly GateResult[]): string {
  const words: [GateResult["state"], string][] = [
    ["not_met", "not met"],
    ["too_little", "too little"],
    ["stale", "stale"],
    ["waived", "waived"],
    ["met", "met"],
    ["does_not_apply", "does not apply"],
  ];
  const asked = gates.filter((gate) => gate.level !== "off");
  const parts = words.flatMap(([state, word]) => {
    const n = asked.filter((gate) => gate.state === state).length;
    return n > 0 ? [`${n} ${word}`] : [];
  });
  return parts.join(", ") || "no gates";
}
