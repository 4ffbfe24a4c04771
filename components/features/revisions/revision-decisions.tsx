import Link from "next/link";
import { DateTime } from "@/components/ui/data/date-time";
import { Card } from "@/components/ui/layout/card";

const KIND_WORDS: Record<string, string> = {
  as_found: "Adopted as found",
  promote: "Promoted",
  hold: "Held for more runs",
  turn_down: "Turned down",
  roll_back: "Stands again after a roll-back",
};

export interface RevisionDecisionsProps {
  decisions: readonly {
    id: string;
    recordNumber: number;
    kind: string;
    reason: string;
    deciderName: string;
    decidedAt: Date;
  }[];
}

/** Decisions on a revision, newest first; nothing when there are none. */
export function RevisionDecisions({ decisions }: RevisionDecisionsProps) {
  if (decisions.length === 0) return null;
  return (
    <Card title="Decisions">
      <ul className="flex flex-col gap-3">
        {decisions.map((decision) => (
          <li key={decision.id} className="flex flex-col gap-0.5 text-15">
            <span className="font-semibold">
              {KIND_WORDS[decision.kind]} ·{" "}
              <Link className="link" href={`/records/${decision.id}`}>
                Record {String(decision.recordNumber).padStart(3, "0")}
              </Link>
            </span>
            <span className="text-13 text-ink2">
              {decision.deciderName}, <DateTime at={decision.decidedAt} zone="UTC" />
            </span>
            <span>{decision.reason}</span>
          </li>
        ))}
      </ul>
    </Card>
  );
}
