import { Download } from "lucide-react";
import type { Metadata, Route } from "next";
import { RunActsCard } from "@/app/(workspace)/runs/[run]/run-acts";
import { RunBasis } from "@/app/(workspace)/runs/[run]/run-basis";
import { RefusedRowsCard } from "@/components/features/runs/refused-rows";
import { RunBudget } from "@/components/features/runs/run-budget";
import { RunCurveChart, RunTraceChart } from "@/components/features/runs/run-charts";
import { RunFacts } from "@/components/features/runs/run-facts";
import { RunPeak } from "@/components/features/runs/run-figures";
import { RunTimes } from "@/components/features/runs/run-times";
import { RunWatch } from "@/components/features/runs/run-watch";
import { VerdictCard } from "@/components/features/runs/verdict-card";
import { ProgrammeCrumbs } from "@/components/features/shell/programme-crumbs";
import { buttonStyle } from "@/components/ui/action/button-style";
import { dateTimeText } from "@/components/ui/data/date-time";
import { Tag } from "@/components/ui/data/tag";
import { Card } from "@/components/ui/layout/card";
import { PageHeading } from "@/components/ui/layout/page-heading";
import { requireCtx } from "@/lib/auth/current";
import { orNotFound } from "@/lib/http/page";
import { getRun, type RunView } from "@/lib/services/runs/get";

export const metadata: Metadata = { title: "Run" };

function setAsideOf({ run, roadDay, setAsideByName }: RunView) {
  if (!run.setAsideAt) return null;
  return {
    by: setAsideByName ?? "somebody",
    at: dateTimeText(run.setAsideAt, roadDay.zone),
    reason: run.setAsideReason ?? "",
    resultWasVisible: run.resultWasVisible ?? false,
  };
}

/** The log's file as it came; a plain link, since the answer is a download. */
function LogLink({ runId, blockedBecause }: { runId: string; blockedBecause: string | null }) {
  if (blockedBecause !== null) return <p className="text-13 text-ink2">{blockedBecause}</p>;
  return (
    <a href={`/api/runs/${runId}/log`} download className={buttonStyle("outlined", "normal", false)}>
      <Download aria-hidden size={18} />
      Download the log
    </a>
  );
}

/** One run: what it is, whether it counts, what it shows, and what that was computed with. */
export default async function RunPage({ params }: PageProps<"/runs/[run]">) {
  const ctx = await requireCtx();
  const view = await orNotFound((await params).run, (id) => getRun(ctx, id));
  const { run, programme, revision, roadDay, verdict, acts } = view;
  const result = verdict?.result;
  return (
    <div className="flex flex-col gap-6">
      <PageHeading
        above={
          <ProgrammeCrumbs
            programme={programme}
            then={[
              { label: `Road day ${roadDay.day}`, href: `/road-days/${roadDay.id}` as Route },
              { label: `Run ${run.number}` },
            ]}
          />
        }
        title={`Run ${run.number}`}
        marks={
          <>
            <Tag tone="strong">R{revision.number}</Tag>
            <Tag>{run.leg}</Tag>
            <Tag>{run.kind}</Tag>
            {run.sample && <Tag>sample</Tag>}
          </>
        }
        actions={<LogLink runId={run.id} blockedBecause={acts.download} />}
      />
      {run.state === "waiting" && <RunWatch runId={run.id} roadDayId={run.roadDayId} />}
      <div className="grid items-start gap-6 lg:grid-cols-2">
        <div className="flex flex-col gap-6">
          <VerdictCard
            verdict={run.state}
            reasons={result?.reasons ?? []}
            notes={result?.notes ?? []}
            next={view.next}
            hasTraces={verdict?.traces != null}
            setAside={setAsideOf(view)}
          />
          {verdict?.traces?.refusedRows && (
            <RefusedRowsCard
              runId={run.id}
              refused={verdict.traces.refusedRows}
              blockedBecause={acts.download}
            />
          )}
          {result?.usable && (
            <Card title="Figures of this run alone" description="± is about 95 %." id="figures">
              <div className="flex flex-col gap-6">
                <RunPeak result={result} />
                <RunTimes result={result} />
              </div>
            </Card>
          )}
        </div>
        <div className="flex flex-col gap-6">
          <Card title="What this run is" id="facts">
            <RunFacts run={run} revision={revision} roadDay={roadDay} testerName={view.testerName} />
          </Card>
          <RunBasis view={view} />
        </div>
      </div>
      {result?.usable && result.peak?.budget && (
        <Card
          title="What the ± of the peak power is made of"
          description="Standard uncertainties of this run’s own figure; the parts are added as squares."
          id="budget"
          flush
        >
          <RunBudget budget={result.peak.budget} />
        </Card>
      )}
      {result?.usable && <RunCurveChart result={result} />}
      {verdict?.traces && <RunTraceChart traces={verdict.traces} notes={verdict.result.notes} />}
      <RunActsCard view={view} />
    </div>
  );
}
