import type { Metadata, Route } from "next";
import Link from "next/link";
import { ComparisonMovesCard } from "@/components/features/analysis/comparison-moves";
import { ProgrammeCrumbs } from "@/components/features/shell/programme-crumbs";
import { Card } from "@/components/ui/layout/card";
import { PageHeading } from "@/components/ui/layout/page-heading";
import { EmptyState } from "@/components/ui/status/empty-state";
import { requireCtx } from "@/lib/auth/current";
import { orNotFound } from "@/lib/http/page";
import { type AnalysisMoves, getAnalysisMoves } from "@/lib/services/analysis/get-moves";
import { recordName } from "@/lib/services/decisions/record-name";

export const metadata: Metadata = { title: "Analysis version" };

/** What was decided on figures of an older version; the sealed records keep them. */
function OlderDecisions({ decisions, version }: Pick<AnalysisMoves, "decisions" | "version">) {
  if (decisions.length === 0) return null;
  return (
    <Card
      title="Decisions on an older version"
      description={`Their records keep the figures they were signed on; ${version} changes none of them.`}
    >
      <ul className="flex flex-col gap-1 text-15">
        {decisions.map((row) => (
          <li key={row.id}>
            <Link href={`/records/${row.id}` as Route} className="link inline-flex min-h-6 items-center">
              {recordName(row.recordNumber)}
            </Link>
            : {row.kind.replaceAll("_", " ")} R{row.revisionNumber}, on {row.analysisVersion}
            {row.stands && <strong>, which stands</strong>}.
          </li>
        ))}
      </ul>
    </Card>
  );
}

/** What the present version of the analysis moves, against what older ones said of the same runs. */
export default async function AnalysisPage({ params }: PageProps<"/programmes/[programme]/analysis">) {
  const ctx = await requireCtx();
  const view = await orNotFound((await params).programme, (id) => getAnalysisMoves(ctx, id));
  const { programme, version, comparisons, untouched, decisions } = view;
  return (
    <div className="flex flex-col gap-6">
      <PageHeading
        above={<ProgrammeCrumbs programme={programme} then={[{ label: "Analysis version" }]} />}
        title={`Analysis version ${version}`}
        lead="Every result names the version that computed it, and stays. When the version goes on, the same runs are computed anew beside it, and what moves stands here."
      />
      <OlderDecisions decisions={decisions} version={version} />
      {comparisons.length === 0 ? (
        <EmptyState
          sentence={`Nothing of this programme was ever computed under another version than ${version}.`}
        />
      ) : (
        comparisons.map((comparison) => (
          <ComparisonMovesCard key={comparison.comparisonId} comparison={comparison} version={version} />
        ))
      )}
      {comparisons.length > 0 && untouched > 0 && (
        <p className="text-15 text-ink2">
          {untouched === 1 ? "1 comparison was" : `${untouched} comparisons were`} only ever computed with{" "}
          {version}.
        </p>
      )}
    </div>
  );
}
