import { StateMark } from "@/components/ui/status/state-mark";
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
