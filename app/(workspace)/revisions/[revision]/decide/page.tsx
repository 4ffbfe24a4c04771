import type { Metadata, Route } from "next";
import Link from "next/link";
import { redirect } from "next/navigation";
import { openComparisonAction, recomputeAction } from "@/app/(workspace)/comparisons/actions";
import { agreeAction, decideAction } from "@/app/(workspace)/revisions/[revision]/decide/actions";
import { AnswerCard } from "@/components/features/comparisons/answer-card";
import { ComparisonFigure } from "@/components/features/comparisons/comparison-figure";
import { ComparisonStateNotice } from "@/components/features/comparisons/comparison-state-notice";
import { methodNotes } from "@/components/features/comparisons/method-notes";
import { OpenComparisonForm } from "@/components/features/comparisons/open-comparison-form";
import { PeaksTable } from "@/components/features/comparisons/peaks-table";
import { AgreeForm } from "@/components/features/decisions/agree-form";
import { Cautions } from "@/components/features/decisions/cautions";
import { DecisionForm } from "@/components/features/decisions/decision-form";
import { DeskFacts } from "@/components/features/decisions/desk-facts";
import { GateList, gateCount } from "@/components/features/gates/gate-list";
import { ProgrammeCrumbs } from "@/components/features/shell/programme-crumbs";
import { LinkButton } from "@/components/ui/action/link-button";
import { Card } from "@/components/ui/layout/card";
import { PageHeading } from "@/components/ui/layout/page-heading";
import { EmptyState } from "@/components/ui/status/empty-state";
import { requireCtx } from "@/lib/auth/current";
import { plottedGrid } from "@/lib/compare/plotted-grid";
import { orNotFound } from "@/lib/http/page";
import { can } from "@/lib/policy/can";
import { sideOfRun } from "@/lib/services/comparisons/schema";
import { blockedSteps } from "@/lib/services/decisions/blocked-steps";
import { getDecisionDesk } from "@/lib/services/decisions/load-desk";
import { openMusts } from "@/lib/services/gates/open-musts";

export const metadata: Metadata = { title: "Decision" };

/** Evidence at the left, the countersign form at the right: one view for one decision. */
export default async function DecidePage({ params }: PageProps<"/revisions/[revision]/decide">) {
  const ctx = await requireCtx();
  const desk = await orNotFound((await params).revision, (id) => getDecisionDesk(ctx, id));
  const { revision, standing, comparison, gates, programme, calibration } = desk;
  if (revision.state !== "in_review") redirect(`/revisions/${revision.id}` as Route);
  const result = comparison?.result ?? null;
  const grid = comparison && result && plottedGrid(result, sideOfRun(comparison.runs));
  const labels = { a: `R${standing?.number ?? "?"}`, b: `R${revision.number}` };
  const mayCompare = can(ctx, "comparison.create");
  const blocked = blockedSteps(desk);
  return (
    <div className="flex flex-col gap-6">
      <PageHeading
        above={
          <ProgrammeCrumbs
            programme={programme}
            then={[
              { label: `R${revision.number}`, href: `/revisions/${revision.id}` as Route },
              { label: "Decision" },
            ]}
          />
        }
        title={`Decide on R${revision.number}`}
        lead={
          standing
            ? `“${revision.title}” against R${standing.number} “${standing.title}”, which stands.`
            : `“${revision.title}”. No revision stands yet.`
        }
      />
      {comparison && (
        <ComparisonStateNotice
          view={comparison}
          blockedBecause={mayCompare.ok ? null : mayCompare.reason}
          action={recomputeAction}
        />
      )}
      <div className="grid gap-6 lg:grid-cols-[minmax(0,1fr)_25rem]">
        <div className="flex min-w-0 flex-col gap-6">
          {!comparison && standing && (
            <EmptyState
              sentence={`R${standing.number} and R${revision.number} have not been compared yet: gates rest on that comparison.`}
              action={
                <OpenComparisonForm
                  revisionAId={standing.id}
                  revisionBId={revision.id}
                  label={`Compare R${revision.number} with R${standing.number}`}
                  blockedBecause={mayCompare.ok ? null : mayCompare.reason}
                  action={openComparisonAction}
                />
              }
            />
          )}
          {result && <AnswerCard result={result} labels={labels} stale={comparison?.state === "stale"} />}
          <Card
            title="Gates"
            description={`Plan version ${gates.planVersion ?? "–"}: ${gateCount(gates.results)}`}
            actions={
              comparison && (
                <LinkButton size="compact" href={`/comparisons/${comparison.id}` as Route}>
                  All of the comparison
                </LinkButton>
              )
            }
          >
            <GateList gates={gates.results} columns={2} />
          </Card>
          {comparison && result && grid && comparison.basis && (
            <>
              <ComparisonFigure
                grid={grid}
                labels={labels}
                title={`${labels.a} and ${labels.b} over engine speed`}
                notes={methodNotes(result, comparison.settings, comparison.basis)}
              />
              <Card title="Peaks and times" flush>
                <PeaksTable result={result} labels={labels} />
              </Card>
            </>
          )}
        </div>
        <aside className="flex min-w-0 flex-col gap-6">
          <Card title="Countersign" tone="well" id="countersign">
            <DecisionForm
              key={`${revision.rowVersion} ${comparison?.inputSha256} ${comparison?.basis?.inputSha256} ${calibration.seenSha256}`}
              seen={{
                revisionId: revision.id,
                rowVersion: revision.rowVersion,
                standingRevisionId: standing?.id ?? null,
                comparisonId: comparison?.id ?? null,
                inputSha256: comparison?.inputSha256 ?? null,
                shownInputSha256: comparison?.basis?.inputSha256 ?? null,
                gatePlanVersion: gates.planVersion,
                calibrationSha256: calibration.seenSha256,
              }}
              number={revision.number}
              standingNumber={standing?.number ?? null}
              openGates={openMusts(gates.results)}
              needsApproval={calibration.needsApproval}
              agreedBy={calibration.agreements.map(({ leadName }) => leadName)}
              blocked={blocked}
              hasPassphrase={desk.hasPassphrase}
              peopleTold={desk.peopleTold}
              action={decideAction}
            />
          </Card>
          {(calibration.touched.length > 0 || calibration.untold) && (
            <Card
              title="Emission- or safety-relevant"
              description="What of the changes is marked in this programme."
            >
              <AgreeForm revisionId={revision.id} calibration={calibration} action={agreeAction} />
            </Card>
          )}
          <Card title="What is decided on">
            <DeskFacts desk={desk} />
          </Card>
          <Cautions />
          <p className="text-13 text-ink2">
            An image can be put back at any time:{" "}
            <Link href={`/programmes/${programme.id}/roll-back`} className="link">
              roll back
            </Link>
            .
          </p>
        </aside>
      </div>
    </div>
  );
}
