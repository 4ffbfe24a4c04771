import type { Metadata, Route } from "next";
import Link from "next/link";
import { AnswerCard } from "@/components/features/comparisons/answer-card";
import { ComparisonFigure } from "@/components/features/comparisons/comparison-figure";
import { methodNotes } from "@/components/features/comparisons/method-notes";
import { PeaksTable } from "@/components/features/comparisons/peaks-table";
import { Cautions } from "@/components/features/decisions/cautions";
import { RecordCalibration } from "@/components/features/decisions/record-calibration";
import { RecordChain } from "@/components/features/decisions/record-chain";
import { RecordFacts } from "@/components/features/decisions/record-facts";
import { RecordRuns } from "@/components/features/decisions/record-runs";
import { RecordSeal } from "@/components/features/decisions/record-seal";
import { recordTitle, STALE_EVIDENCE } from "@/components/features/decisions/record-words";
import { GateList, gateCount } from "@/components/features/gates/gate-list";
import { ProgrammeCrumbs } from "@/components/features/shell/programme-crumbs";
import { LinkButton } from "@/components/ui/action/link-button";
import { Card } from "@/components/ui/layout/card";
import { PageHeading } from "@/components/ui/layout/page-heading";
import { requireCtx } from "@/lib/auth/current";
import { plottedGrid } from "@/lib/compare/plotted-grid";
import { orNotFound } from "@/lib/http/page";
import { can } from "@/lib/policy/can";
import { getRecord } from "@/lib/services/decisions/load-record";
import { recordName } from "@/lib/services/decisions/record-name";

export const metadata: Metadata = { title: "Record" };

/** A decision as it was taken: evidence, gates, waivers, signature, digests. Nothing here can be edited. */
export default async function RecordPage({ params }: PageProps<"/records/[record]">) {
  const ctx = await requireCtx();
  const record = await orNotFound((await params).record, (id) => getRecord(ctx, id));
  const { decision, programme, revision, from, compared, waivers } = record;
  const { evidence } = decision;
  const labels = { a: `R${from?.number ?? "?"}`, b: `R${revision.number}` };
  const used = new Map(
    evidence.runs.filter((run) => run.usable).map((run) => [String(run.number), run.side]),
  );
  const sideOf = (id: string) => {
    const side = used.get(id);
    return side === "A" || side === "B" ? side : null;
  };
  const grid = compared && plottedGrid(compared.result, sideOf);
  const mayRollBack = can(ctx, "decision.roll_back").ok;
  return (
    <article className="flex flex-col gap-6">
      <PageHeading
        above={
          <ProgrammeCrumbs
            programme={programme}
            then={[
              { label: `R${revision.number}`, href: `/revisions/${revision.id}` as Route },
              { label: recordName(decision.recordNumber) },
            ]}
          />
        }
        title={`${recordName(decision.recordNumber)}: ${recordTitle(decision.kind, revision.number, from?.number ?? null)}`}
        lead={`${programme.name}. ${revision.stands ? `R${revision.number} stands today.` : `R${revision.number} does not stand today.`}`}
        actions={
          revision.stands &&
          mayRollBack && (
            <LinkButton href={`/programmes/${programme.id}/roll-back` as Route}>Roll back …</LinkButton>
          )
        }
      />
      <RecordSeal record={record} />
      <div className="grid gap-6 lg:grid-cols-[minmax(0,1fr)_22rem] print:block">
        <div className="flex min-w-0 flex-col gap-6">
          {compared && (
            <AnswerCard
              result={compared.result}
              labels={labels}
              stale={evidence.stale}
              note={evidence.stale && STALE_EVIDENCE}
            />
          )}
          {compared && grid && (
            <>
              <ComparisonFigure
                grid={grid}
                labels={labels}
                title={`${labels.a} and ${labels.b} over engine speed`}
                notes={methodNotes(compared.result, compared.input.settings, {
                  sheetVersion: compared.input.sheetVersion,
                  analysisVersion: compared.input.analysisVersion,
                  inputSha256: evidence.comparisonInputSha256 ?? "",
                })}
                still
              />
              <Card title="Peaks and times" flush>
                <PeaksTable result={compared.result} labels={labels} />
              </Card>
            </>
          )}
          {evidence.runs.length > 0 && (
            <Card
              title="Runs of the evidence"
              description={evidence.stale ? STALE_EVIDENCE : "With what was left out, and why."}
              flush
            >
              <RecordRuns runs={evidence.runs} />
            </Card>
          )}
          {record.notTested.length > 0 && (
            <Card title="What was not tested">
              <ul className="list-disc pl-5 text-15">
                {record.notTested.map((sentence) => (
                  <li key={sentence}>{sentence}</li>
                ))}
              </ul>
            </Card>
          )}
        </div>
        <div className="flex min-w-0 flex-col gap-6">
          <Card title="What was decided on">
            <RecordFacts record={record} />
          </Card>
          {evidence.calibration && (
            <Card title="What changed in the values">
              <RecordCalibration calibration={evidence.calibration} />
            </Card>
          )}
          {evidence.gates.length > 0 && (
            <Card
              title="Gates"
              description={`Plan version ${evidence.gatePlanVersion ?? "–"}: ${gateCount(evidence.gates)}. Met only if the whole band or interval lies on the safe side.`}
            >
              <GateList
                gates={evidence.gates}
                waivers={new Map(waivers.map((waiver) => [waiver.gateId, waiver.reason]))}
              />
            </Card>
          )}
          <Card title="Records of this programme">
            <RecordChain chain={record.chain} currentId={decision.id} />
          </Card>
          {evidence.comparisonId && can(ctx, "comparison.view", { granted: false }).ok && (
            <p className="no-print text-13 text-ink2">
              <Link href={`/comparisons/${evidence.comparisonId}`} className="link">
                The comparison as it is today
              </Link>{" "}
              may show more runs than this record.
            </p>
          )}
          <Cautions />
        </div>
      </div>
    </article>
  );
}
