import type { Metadata, Route } from "next";
import { StripScatterCard } from "@/components/features/plans/strip-scatter";
import { ProgrammeCrumbs } from "@/components/features/shell/programme-crumbs";
import { LinkButton } from "@/components/ui/action/link-button";
import { PageHeading } from "@/components/ui/layout/page-heading";
import { EmptyState } from "@/components/ui/status/empty-state";
import { requireCtx } from "@/lib/auth/current";
import { orNotFound } from "@/lib/http/page";
import { getRepeatability } from "@/lib/services/plans/get";

export const metadata: Metadata = { title: "Own scatter" };

/** How well this workshop repeats itself with this car, strip by strip and road day by road day. */
export default async function RepeatabilityPage({
  params,
}: PageProps<"/programmes/[programme]/repeatability">) {
  const ctx = await requireCtx();
  const { programme, strips } = await orNotFound((await params).programme, (id) => getRepeatability(ctx, id));
  return (
    <div className="flex flex-col gap-6">
      <PageHeading
        above={<ProgrammeCrumbs programme={programme} then={[{ label: "Own scatter" }]} />}
        title="Own scatter"
        lead="How far runs of one image differ, with side, leg and drift taken out. The smaller it is, the smaller the difference that a day can show."
        actions={<LinkButton href={`/programmes/${programme.id}/plan` as Route}>Plan</LinkButton>}
      />
      {strips.length === 0 ? (
        <EmptyState sentence="No road day yet. Drive a first comparison or a null test; its scatter then stands here." />
      ) : (
        strips.map((strip) => <StripScatterCard key={strip.stripName} strip={strip} />)
      )}
      <p className="max-w-prose text-13 text-ink2">
        r is the repeatability limit after ISO 5725: two single pulls that differ by less show no change. It
        is 1.96·√2 standard deviations where the scatter is known well; with few runs Student's t takes the
        place of 1.96. Figures come from the newest result of each comparison under the standard settings.
      </p>
    </div>
  );
}
