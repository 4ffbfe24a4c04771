import type { Metadata } from "next";
import { createProgrammeAction } from "@/app/(workspace)/programmes/actions";
import { NewProgrammeForm } from "@/components/features/programmes/new-programme-form";
import { Breadcrumbs } from "@/components/ui/layout/breadcrumbs";
import { PageHeading } from "@/components/ui/layout/page-heading";
import { requireCtx } from "@/lib/auth/current";
import { orRefused } from "@/lib/http/page";
import { authorise } from "@/lib/services/ctx";

export const metadata: Metadata = { title: "New programme" };

export default async function NewProgrammePage() {
  const ctx = await requireCtx();
  await orRefused(async () => authorise(ctx, "programme.edit"));
  return (
    <div className="flex flex-col gap-8">
      <PageHeading
        above={
          <Breadcrumbs items={[{ label: "Programmes", href: "/programmes" }, { label: "New programme" }]} />
        }
        title="New programme"
        lead="The vehicle sheet is what the computation needs to know of the car. Each figure can be corrected later: that makes a new version, and every result names the one it used."
      />
      <NewProgrammeForm action={createProgrammeAction} />
    </div>
  );
}
