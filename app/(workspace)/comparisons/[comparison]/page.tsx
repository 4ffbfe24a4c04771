import type { Metadata, Route } from "next";
import Link from "next/link";
import { changeSettingsAction, recomputeAction } from "@/app/(workspace)/comparisons/actions";
import { AnswerCard } from "@/components/features/comparisons/answer-card";
import { ComparisonFigure } from "@/components/features/comparisons/comparison-figure";
import { ComparisonStateNotice } from "@/components/features/comparisons/comparison-state-notice";
import { ConditionsTable } from "@/components/features/comparisons/conditions-table";
import { EngineSection } from "@/components/features/comparisons/engine/engine-section";
import { viewFromParameters } from "@/components/features/comparisons/figure-view";
import { methodNotes } from "@/components/features/comparisons/method-notes";
import { PeaksTable } from "@/components/features/comparisons/peaks-table";
import { RangeMeansTable } from "@/components/features/comparisons/range-means-table";
import { RunsTable } from "@/components/features/comparisons/runs-table";
import { SettingsForm } from "@/components/features/comparisons/settings-form";
import { SideBudgets } from "@/components/features/comparisons/side-budgets";
import { TwinsTable } from "@/components/features/comparisons/twins-table";
import { GateList, gateCount } from "@/components/features/gates/gate-list";
import { NullTestCard } from "@/components/features/null-tests/null-test-card";
import { ProgrammeCrumbs } from "@/components/features/shell/programme-crumbs";
import { buttonStyle } from "@/components/ui/action/button-style";
import { LinkButton } from "@/components/ui/action/link-button";
import { Card } from "@/components/ui/layout/card";
import { PageHeading } from "@/components/ui/layout/page-heading";
import { Tabs } from "@/components/ui/layout/tabs";
import { requireCtx } from "@/lib/auth/current";
import { plottedGrid } from "@/lib/compare/plotted-grid";
import { orNotFound } from "@/lib/http/page";
import { can } from "@/lib/policy/can";
import { getComparison } from "@/lib/services/comparisons/load";
import { FACTOR_WORDS, sideLabels, sideOfRun } from "@/lib/services/comparisons/schema";
import { gateStatus } from "@/lib/services/gates/status";

export const metadata: Metadata = { title: "Comparison" };

/** Side A against side B: the answer, the figure, the evidence behind it, and the gates beside it. */
export default async function ComparisonPage({
  params,
  searchParams,
}: PageProps<"/comparisons/[comparison]">) {
  const ctx = await requireCtx();
  const view = await orNotFound((await params).comparison, (id) => getComparison(ctx, id));
  const parameters = await searchParams;
  const maySettings = can(ctx, "comparison.settings");
  const blockedBecause = maySettings.ok ? null : maySettings.reason;
  const gates = maySettings.ok ? await gateStatus(ctx, { revisionId: view.b.id }) : null;
  const gatesHere = gates?.comparisonId === view.id ? gates : null;
  const { result } = view;
  const labels = sideLabels(view);
  const isNullTest = view.nullTestRoadDayId !== null;
  const grid = result && plottedGrid(result, sideOfRun(view.runs));
  return (
    <div className="flex flex-col gap-6">
      <PageHeading
        above={
          <ProgrammeCrumbs programme={view.programme} then={[{ label: `${labels.a} and ${labels.b}` }]} />
        }
        title={`${labels.a} against ${labels.b}`}
        lead={
          isNullTest ? (
            <>
              Null test of{" "}
              <Link href={`/revisions/${view.a.id}`} className="link">
                {labels.a} “{view.a.title}”
              </Link>{" "}
              on one{" "}
              <Link href={`/road-days/${view.nullTestRoadDayId}` as Route} className="link">
                road day
              </Link>
              : both sides are the same image, so nothing may be claimed. No gate rests on it.
            </>
          ) : (
            <>
              A is{" "}
              <Link href={`/revisions/${view.a.id}`} className="link">
                {labels.a} “{view.a.title}”
              </Link>
              {view.a.stands && ", which stands"}. B is{" "}
              <Link href={`/revisions/${view.b.id}`} className="link">
                {labels.b} “{view.b.title}”
              </Link>
              {view.b.stands && ", which stands"}.
            </>
          )
        }
        actions={
          view.state === "ready" && (
            <a
              href={`/api/comparisons/${view.id}/csv`}
              download
              className={buttonStyle("outlined", "normal", false)}
            >
              Save as CSV
            </a>
          )
        }
      />
      <ComparisonStateNotice view={view} blockedBecause={blockedBecause} action={recomputeAction} />
      <div className="grid gap-6 lg:grid-cols-[minmax(0,1fr)_20rem]">
        <div className="flex min-w-0 flex-col gap-6">
          {result && isNullTest && <NullTestCard result={result} image={labels.a} />}
          {result && !isNullTest && (
            <AnswerCard result={result} labels={labels} stale={view.state === "stale"} />
          )}
          {result && grid && view.basis && (
            <ComparisonFigure
              grid={grid}
              labels={labels}
              title={`${labels.a} and ${labels.b} over engine speed`}
              notes={methodNotes(result, view.settings, view.basis)}
              initialView={viewFromParameters(parameters)}
              keepInAddress
            />
          )}
          {result?.delta && (
            <Card
              title="Mean difference by range"
              description="Torque, over the compared range and its thirds."
              flush
            >
              <RangeMeansTable means={result.delta.range_means ?? []} level={result.delta.level} />
            </Card>
          )}
          {result && (
            <Card title="Peaks and times" flush>
              <PeaksTable result={result} labels={labels} />
            </Card>
          )}
          {result && (
            <Card
              title="What the ± of each peak is made of"
              description="Standard uncertainties of a side’s own figure. In the difference most of them cancel."
              id="budget"
              flush
            >
              <SideBudgets result={result} labels={labels} />
            </Card>
          )}
          {result && (
            <Card
              title="Engine at full load"
              description="Worst values first. What a log does not carry is listed, never taken as fine."
              id="engine"
              flush
            >
              <EngineSection result={result} labels={labels} />
            </Card>
          )}
          <Card title="What it rests on">
            <Tabs
              label="What the comparison rests on"
              tabs={[
                { id: "runs", label: "Runs", content: <RunsTable runs={view.runs} /> },
                {
                  id: "conditions",
                  label: "Conditions",
                  content: <ConditionsTable conditions={view.conditions} labels={labels} />,
                },
                ...(result?.delta
                  ? [{ id: "twins", label: "Twins", content: <TwinsTable delta={result.delta} /> }]
                  : []),
              ]}
            />
          </Card>
        </div>
        <aside className="flex min-w-0 flex-col gap-6">
          {view.b.state === "in_review" && !isNullTest && (
            <Card title="Decide" tone="well">
              <p className="mb-3 text-15">
                {labels.b} is in review. The lead decides on it beside this evidence.
              </p>
              <LinkButton look="filled" href={`/revisions/${view.b.id}/decide` as Route}>
                Open decision
              </LinkButton>
            </Card>
          )}
          {gatesHere && (
            <Card
              title="Gates"
              description={`Plan version ${gatesHere.planVersion ?? "–"}: ${gateCount(gatesHere.results)}`}
            >
              <GateList gates={gatesHere.results} foldSettled />
            </Card>
          )}
          <Card title="Settings">
            <SettingsForm
              comparisonId={view.id}
              factor={view.settings.factor}
              rpmStep={view.settings.rpm_step}
              blockedBecause={blockedBecause}
              action={changeSettingsAction}
            />
            {view.others.length > 0 && (
              <ul className="mt-4 flex flex-col gap-1 border-line border-t pt-3 text-15">
                {view.others.map((other) => (
                  <li key={other.id}>
                    <Link href={`/comparisons/${other.id}`} className="link">
                      {FACTOR_WORDS[other.settings.factor]}, grid {other.settings.rpm_step}
                    </Link>
                  </li>
                ))}
              </ul>
            )}
          </Card>
        </aside>
      </div>
    </div>
  );
}
