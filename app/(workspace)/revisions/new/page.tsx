import type { Metadata } from "next";
import { NewRevisionForm } from "@/app/(workspace)/revisions/new/new-revision-form";
import { ProgrammeCrumbs } from "@/components/features/shell/programme-crumbs";
import { PageHeading } from "@/components/ui/layout/page-heading";
import { Notice } from "@/components/ui/status/notice";
import { requireCtx } from "@/lib/auth/current";
import { QueryProvider } from "@/lib/client/query-provider";
import { orNotFound } from "@/lib/http/page";
import { getParentChoices } from "@/lib/services/revisions/choose-parent";

export const metadata: Metadata = { title: "Add a revision" };

/** A calibrator uploads an image as a new draft. */
export default async function NewRevisionPage({ searchParams }: PageProps<"/revisions/new">) {
  const ctx = await requireCtx();
  const { programme: id } = await searchParams;
  const { programme, parents } = await orNotFound(id, (programmeId) => getParentChoices(ctx, programmeId));
  return (
    <div className="flex flex-col gap-6">
      <PageHeading
        above={<ProgrammeCrumbs programme={programme} then={[{ label: "Add a revision" }]} />}
        title="Add a revision"
        lead="One immutable image with the reason for its change. A changed image is a new revision."
      />
      <Notice tone="caution">
        A change of calibration can destroy an engine and can make a vehicle illegal on the road: emissions
        and noise rules, type approval, insurance and warranty differ by place.
      </Notice>
      <QueryProvider>
        <NewRevisionForm programmeId={programme.id} parents={parents} />
      </QueryProvider>
    </div>
  );
}
