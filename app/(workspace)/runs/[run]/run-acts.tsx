import { bringRunBackAction, editRunNoteAction, setRunAsideAction } from "@/app/(workspace)/runs/actions";
import { ReasonForm } from "@/components/features/runs/reason-form";
import { Card } from "@/components/ui/layout/card";
import { Disclosure } from "@/components/ui/layout/disclosure";
import { Notice } from "@/components/ui/status/notice";
import type { RunView } from "@/lib/services/runs/get";

/** What can still be done with the run: set it aside, bring it back, correct its note. */
export function RunActsCard({ view }: { view: RunView }) {
  const { run, acts, cited } = view;
  const common = { runId: run.id, rowVersion: run.rowVersion };
  return (
    <Card title="Set aside, note" id="acts">
      <div className="flex flex-col gap-2">
        {cited && <Notice>{cited}</Notice>}
        <Disclosure summary={run.setAsideAt ? "Bring this run back" : "Set this run aside"}>
          {run.setAsideAt ? (
            <ReasonForm
              key={`back-${run.rowVersion}`}
              {...common}
              field="reason"
              label="Why it counts after all"
              hint="The sentence stays in the ledger. Comparisons are computed anew."
              submitWords="Bring back"
              blockedBecause={acts.bringBack}
              action={bringRunBackAction}
            />
          ) : (
            <ReasonForm
              key={`aside-${run.rowVersion}`}
              {...common}
              field="reason"
              label="Why it does not count"
              hint={`Nothing is deleted. ${run.state === "waiting" ? "Its result can't be seen yet" : "Its result can be seen"}, and that is written down too.`}
              submitWords="Set aside"
              blockedBecause={acts.setAside}
              action={setRunAsideAction}
            />
          )}
        </Disclosure>
        <Disclosure summary="Correct the note">
          <ReasonForm
            key={`note-${run.rowVersion}`}
            {...common}
            field="note"
            label="Note"
            hint="What happened on the drive, e.g. a gust, traffic, a missed shift. The ledger keeps the old note."
            initial={run.note}
            submitWords="Save the note"
            blockedBecause={acts.editNote}
            action={editRunNoteAction}
          />
        </Disclosure>
      </div>
    </Card>
  );
}
