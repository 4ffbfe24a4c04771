import { CalendarPlus, FilePlus2, Undo2 } from "lucide-react";
import type { Metadata, Route } from "next";
import Link from "next/link";
import { ProgrammeLineage } from "@/app/(workspace)/programmes/[programme]/lineage";
import { ProgrammeManagement } from "@/app/(workspace)/programmes/[programme]/management";
import { HistoryList } from "@/components/features/ledger/ledger-list";
import { statePhrase } from "@/components/features/programmes/lineage-words";
import { PolicyLink } from "@/components/features/programmes/policy-link";
import {
  CalibrationCard,
  GatesCard,
  HistoryCard,
  PeopleCard,
  RoadDaysCard,
  VehicleCard,
} from "@/components/features/programmes/rail";
import { Tag } from "@/components/ui/data/tag";
import { Breadcrumbs } from "@/components/ui/layout/breadcrumbs";
import { Card } from "@/components/ui/layout/card";
import { PageHeading } from "@/components/ui/layout/page-heading";
import { EmptyState } from "@/components/ui/status/empty-state";
import { Notice } from "@/components/ui/status/notice";
import { requireCtx } from "@/lib/auth/current";
import { orNotFound } from "@/lib/http/page";
import { can } from "@/lib/policy/can";
import { getProgramme, type ProgrammeOverview } from "@/lib/services/programmes/get";

export const metadata: Metadata = { title: "Programme" };

/** Lines of what happened. */
const HISTORY = 8;

/** "R14 stands since 12 Nov 2026, decided by Ana": the answer that the page is opened for. */
function Standing({ overview }: { overview: ProgrammeOverview }) {
  const { standing } = overview;
  if (!standing) return <>Nothing stands yet.</>;
  const [decision] = standing.decisions;
  return (
    <>
      <Link
        href={`/revisions/${standing.id}` as Route}
        className="inline-flex items-center gap-2 hover:underline"
      >
        <Tag tone="strong">R{standing.number}</Tag>
        <span className="font-semibold text-ink">{standing.title}</span>
      </Link>{" "}
      {statePhrase(standing) ?? "stands"}
      {decision && (
        <>
          , decided by {decision.deciderName} in{" "}
          <Link href={`/records/${decision.id}` as Route} className="link">
            record {String(decision.recordNumber).padStart(3, "0")}
          </Link>
        </>
      )}
      .
    </>
  );
}

function Actions({ overview }: { overview: ProgrammeOverview }) {
  const { programme, may } = overview;
  const id = programme.id;
  return (
    <>
      <PolicyLink
        href={`/revisions/new?programme=${id}` as Route}
        verdict={may.addRevision}
        look="filled"
        icon={<FilePlus2 />}
      >
        Add revision
      </PolicyLink>
      <PolicyLink
        href={`/road-days/new?programme=${id}` as Route}
        verdict={may.addRoadDay}
        icon={<CalendarPlus />}
      >
        New road day
      </PolicyLink>
      <PolicyLink href={`/programmes/${id}/roll-back` as Route} verdict={may.rollBack} icon={<Undo2 />}>
        Roll back
      </PolicyLink>
    </>
  );
}

export default async function ProgrammePage({ params }: PageProps<"/programmes/[programme]">) {
  const ctx = await requireCtx();
  const overview = await orNotFound((await params).programme, (id) => getProgramme(ctx, id));
  const { programme, sheet, plan, lineage, people, roadDays, history, may } = overview;
  const ledger = can(ctx, "ledger.view").ok ? `/ledger?programme=${programme.id}` : null;
  return (
    <div className="flex flex-col gap-8">
      <PageHeading
        above={
          <Breadcrumbs items={[{ label: "Programmes", href: "/programmes" }, { label: programme.name }]} />
        }
        title={programme.name}
        marks={programme.sample && <Tag>sample</Tag>}
        lead={<Standing overview={overview} />}
        actions={<Actions overview={overview} />}
      />
      {programme.archivedAt && (
        <Notice tone="caution" title="This programme is archived">
          It takes nothing new and is not listed among those in work. Nothing of it was removed.
        </Notice>
      )}
      {programme.goal && <p className="-mt-4 max-w-prose text-15">Goal: {programme.goal}</p>}
      <div className="grid items-start gap-6 lg:grid-cols-[minmax(0,1fr)_19rem]">
        <div className="flex min-w-0 flex-col gap-6">
          {lineage.length === 0 ? (
            <EmptyState
              sentence="No revision yet. Start with the file that the vehicle runs today: a lead adopts it as found, and everything later is compared with it."
              action={
                <PolicyLink
                  href={`/revisions/new?programme=${programme.id}` as Route}
                  verdict={may.addRevision}
                >
                  Add the first revision
                </PolicyLink>
              }
            />
          ) : (
            <Card title="Lineage" flush description="Newest on top, one column per line of work.">
              <div className="px-1 pb-2 md:px-2">
                <ProgrammeLineage overview={overview} />
              </div>
            </Card>
          )}
          {can(ctx, "history.view").ok && (
            <HistoryCard allHref={ledger}>
              <HistoryList entries={history} limit={HISTORY} />
            </HistoryCard>
          )}
          <ProgrammeManagement ctx={ctx} overview={overview} />
        </div>
        <aside aria-label="About this programme" className="grid min-w-0 gap-6 sm:grid-cols-2 lg:grid-cols-1">
          <VehicleCard programmeId={programme.id} sheet={sheet} />
          <GatesCard programmeId={programme.id} plan={plan} />
          {can(ctx, "history.view").ok && <CalibrationCard programmeId={programme.id} />}
          <RoadDaysCard programmeId={programme.id} days={roadDays} mayPlan={can(ctx, "plan.view").ok} />
          <PeopleCard people={people} />
        </aside>
      </div>
    </div>
  );
}
