import type { Gate, GateResult } from "@/lib/gates/plan";

/** State, reason and next step of one gate, before it is joined with what the plan says of it. */
export type Verdict = Pick<GateResult, "state" | "why" | "next">;

export const met = (why: string): Verdict => ({ state: "met", why, next: null });
export const notMet = (why: string, next: string): Verdict => ({ state: "not_met", why, next });
export const tooLittle = (why: string, next: string): Verdict => ({ state: "too_little", why, next });
export const doesNotApply = (why: string): Verdict => ({ state: "does_not_apply", why, next: null });

/** A number with thousands separated and at most `digits` decimals. */
export function figure(value: number, digits = 1): string {
  const [whole, decimals] = Math.abs(value).toFixed(digits).split(".");
  const grouped = whole.replace(/\B(?=(\d{3})+$)/g, ",");
  const tail = decimals?.replace(/0+$/, "");
  const text = tail ? `${grouped}.${tail}` : grouped;
  return value < 0 && /[1-9]/.test(text) ? `−${text}` : text;
}

/** "1 run", "3 runs". */
export function counted(n: number, noun: string): string {
  return `${n} ${noun}${n === 1 ? "" : "s"}`;
}

/** Joins a plan's gate with its title and verdict. */
export function gateResult(gate: Gate, title: string, verdict: Verdict): GateResult {
  return { id: gate.id, kind: gate.kind, level: gate.level, title, ...verdict };
}
