import { confirmChecklistAction } from "@/app/(workspace)/road-days/actions";
import { ChecklistForm, type ChecklistLine } from "@/components/features/road-days/checklist-form";
import { dateTimeText } from "@/components/ui/data/date-time";
import { Card } from "@/components/ui/layout/card";
import { Disclosure } from "@/components/ui/layout/disclosure";
import { Notice } from "@/components/ui/status/notice";
import { StateMark } from "@/components/ui/status/state-mark";
import type { RoadDayView } from "@/lib/services/road-days/get";
import { CHECKLIST } from "@/lib/services/road-days/schema";

function linesOf({ checklist, zone }: RoadDayView["roadDay"]): ChecklistLine[] {
  return CHECKLIST.map(({ item, text }) => {
    const answer = checklist.find((line) => line.item === item);
    const confirmed = answer?.confirmed ?? false;
    const at = answer?.at ? `, ${dateTimeText(new Date(answer.at), zone)}` : "";
    return { item, text, confirmed, by: confirmed && answer?.byName ? `${answer.byName}${at}` : null };
  });
}

/** Safety before speed: open while a line is open, folded once all are confirmed. */
export function Checklist({
  roadDay,
  blockedBecause,
}: {
  roadDay: RoadDayView["roadDay"];
  blockedBecause: string | null;
}) {
  const lines = linesOf(roadDay);
  const open = lines.filter((line) => !line.confirmed).length;
  const form = (
    <ChecklistForm
      // A new set of answers makes a new form, so that what is ticked is what is kept.
      key={lines.map((line) => (line.confirmed ? "1" : "0")).join("")}
      roadDayId={roadDay.id}
      lines={lines}
      blockedBecause={blockedBecause}
      action={confirmChecklistAction}
    />
  );
  if (open === 0) {
    return (
      <Card id="checklist">
        <Disclosure
          summary={<StateMark state="met">Safety checklist confirmed</StateMark>}
          aside={`${lines.length} of ${lines.length}`}
        >
          {form}
        </Disclosure>
      </Card>
    );
  }
  return (
    <Card
      id="checklist"
      title="Safety checklist"
      description={`${open} of ${lines.length} lines are open. Runs can be attached once all are confirmed.`}
    >
      <div className="roadside flex flex-col gap-4">
        <Notice tone="caution">
          Testing at speed is dangerous. Drive only where it is allowed, never alone, and stop in any doubt.
          Twinpass measures and records; it approves nothing.
        </Notice>
        {form}
      </div>
    </Card>
  );
}
