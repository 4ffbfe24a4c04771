import type { Metadata, Route } from "next";
import { PlanAnswer } from "@/components/features/plans/plan-answer";
import { PlanForm } from "@/components/features/plans/plan-form";
import { PlanTable } from "@/components/features/plans/plan-table";
import { PolicyLink } from "@/components/features/programmes/policy-link";
import { OrderCardTable } from "@/components/features/road-days/order-card-table";
import { ProgrammeCrumbs } from "@/components/features/shell/programme-crumbs";
import { LinkButton } from "@/components/ui/action/link-button";
import { numberText } from "@/components/ui/data/number-text";
import { Card } from "@/components/ui/layout/card";
import { PageHeading } from "@/components/ui/layout/page-heading";
import { requireCtx } from "@/lib/auth/current";
import { orNotFound } from "@/lib/http/page";
import { getPlan } from "@/lib/services/plans/get";
import type { PlanView } from "@/lib/services/plans/schema";

export const metadata: Metadata = { title: "Plan" };

/** Address of this page with the same figures and another number of twins. */
function hrefFor({ programme, query }: PlanView, twins: number): string {
  return `/programmes/${programme.id}/plan?${new URLSearchParams({ ...query.texts, twins: String(twins) })}`;
}

function costText({ chosen }: PlanView): string {
  const { runs, writes, settlingDrives, minutes, fuelL, metres } = chosen.cost;
  return `${runs} runs, ${writes} writes, ${settlingDrives} settling drives; about ${numberText(minutes)} minutes, ${numberText(fuelL, { decimals: 1 })} l of fuel and ${numberText(metres)} m over the strip. The way there is not counted.`;
}

/** Before driving: how many twins a side show a difference, in which order, and what they cost. */
export default async function PlanPage({ params, searchParams }: PageProps<"/programmes/[programme]/plan">) {
  const ctx = await requireCtx();
  const query = await searchParams;
  const view = await orNotFound((await params).programme, (id) => getPlan(ctx, id, query));
  const { programme, chosen, card, rows } = view;
  const listed = rows.some((row) => row.twins === chosen.twins)
    ? rows
    : [...rows, chosen].sort((a, b) => a.twins - b.twins);
  return (
    <div className="flex flex-col gap-6">
      <PageHeading
        above={<ProgrammeCrumbs programme={programme} then={[{ label: "Plan" }]} />}
        title="Plan"
        lead="How many twins a side show the difference you look for, in which order, and what they cost."
        actions={
          <>
            <PolicyLink
              href={`/road-days/new?programme=${programme.id}&twins=${chosen.twins}` as Route}
              verdict={view.mayOpenRoadDay}
              look="filled"
            >
              Use this for a road day
            </PolicyLink>
            <LinkButton href={`/programmes/${programme.id}/repeatability` as Route}>Own scatter</LinkButton>
          </>
        }
      />
      <Card title="What you want to show">
        <PlanForm query={view.query} />
      </Card>
      <PlanAnswer view={view} />
      <Card
        title="What a number of twins shows and costs"
        description="Choose a number to see its order card."
        flush
      >
        <PlanTable rows={listed} chosen={chosen.twins} hrefFor={(twins) => hrefFor(view, twins)} />
      </Card>
      <Card
        title={`Order card, ${chosen.twins === 1 ? "1 twin" : `${chosen.twins} twins`} a side`}
        description={costText(view)}
        id="order-card"
      >
        <OrderCardTable
          rows={card.places.map((place) => ({ ...place, revision: place.side, run: null, isNext: false }))}
        />
        <p className="mt-3 text-13 text-ink2">
          A is the reference, B the candidate. The first write falls away when A is in the car already. One
          settling drive, out and back, after each write is common practice; no source was found for it.
        </p>
      </Card>
    </div>
  );
}
