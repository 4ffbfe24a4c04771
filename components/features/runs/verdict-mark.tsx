import { type MarkState, StateMark } from "@/components/ui/status/state-mark";
import type { Consequence } from "@/lib/measure/types";
import type { RunLine } from "@/lib/services/runs/schema";

/** A run's verdict as icon and word. */
export function VerdictMark({ verdict, setAside }: Pick<RunLine, "verdict" | "setAside">) {
  if (setAside) return <StateMark state="does_not_apply">Set aside</StateMark>;
  switch (verdict) {
    case "waiting":
      return <StateMark state="stale">Waiting for its verdict</StateMark>;
    case "usable":
      return <StateMark state="met">Usable</StateMark>;
    case "refused":
      return <StateMark state="not_met">Refused</StateMark>;
  }
}

const CONSEQUENCE: Readonly<Record<Consequence, { state: MarkState; word: string }>> = {
  refused: { state: "not_met", word: "Refused" },
  masked: { state: "does_not_apply", word: "Left out" },
  warned: { state: "too_little", word: "Warned" },
};

/** What a finding does, as icon and word. */
export function ConsequenceMark({ consequence }: { consequence: Consequence }) {
  const { state, word } = CONSEQUENCE[consequence];
  return <StateMark state={state}>{word}</StateMark>;
}
