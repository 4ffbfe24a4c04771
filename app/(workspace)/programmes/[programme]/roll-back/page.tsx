import type { Metadata } from "next";
import { rollBackAction } from "@/app/(workspace)/programmes/[programme]/roll-back/actions";
import { Cautions } from "@/components/features/decisions/cautions";
import { EarlierList } from "@/components/features/decisions/earlier-list";
import { RollBackChanges } from "@/components/features/decisions/roll-back-changes";
import { RollBackForm } from "@/components/features/decisions/roll-back-form";
import { ProgrammeCrumbs } from "@/components/features/shell/programme-crumbs";
import { Card } from "@/components/ui/layout/card";
import { PageHeading } from "@/components/ui/layout/page-heading";
import { EmptyState } from "@/components/ui/status/empty-state";
import { requireCtx } from "@/lib/auth/current";
import { orNotFound } from "@/lib/http/page";
import { getRollBackDesk, previewRollBack } from "@/lib/services/decisions/load-roll-back";

export const metadata: Metadata = { title: "Roll back" };

/** Choose an earlier revision, see what changes back, confirm: three steps on one page. */
export default async function RollBackPage({
  params,
  searchParams,
}: PageProps<"/programmes/[programme]/roll-back">) {
  const ctx = await requireCtx();
  const desk = await orNotFound((await params).programme, (id) => getRollBackDesk(ctx, id));
  const { programme, standing, earlier, may } = desk;
  const { to } = await searchParams;
  const preview =
    to === undefined || standing === null
      ? null
      : await orNotFound(to, (id) => previewRollBack(ctx, desk, id));
  const barred = preview?.target.barredAt ? `R${preview.target.number} is barred.` : null;
  return (
    <div className="flex flex-col gap-6">
      <PageHeading
        above={<ProgrammeCrumbs programme={programme} then={[{ label: "Roll back" }]} />}
        title="Roll back"
        lead={
          standing
            ? `R${standing.number} “${standing.title}” stands. One lead can put an earlier revision back at once, with a reason; no gate is asked, and nothing is erased.`
            : "No revision stands, so there is nothing to roll back from."
        }
      />
      {earlier.length === 0 || standing === null ? (
        <EmptyState sentence="No other revision has stood in this programme yet. When one has, it is listed here and can be put back." />
      ) : (
        <div className="grid gap-6 lg:grid-cols-[minmax(0,1fr)_25rem]">
          <div className="flex min-w-0 flex-col gap-6">
            <Card title="Stood earlier" flush>
              <EarlierList
                programmeId={programme.id}
                earlier={earlier}
                chosenId={preview?.target.id ?? null}
              />
            </Card>
            {preview && (
              <Card
                title={`What changes back: from R${standing.number} to R${preview.target.number}`}
                description="Compared byte by byte on what both images hold."
              >
                <RollBackChanges preview={preview} />
              </Card>
            )}
          </div>
          <aside className="flex min-w-0 flex-col gap-6">
            {preview ? (
              <Card title="Confirm" tone="well">
                <RollBackForm
                  key={preview.target.id}
                  programmeId={programme.id}
                  toRevisionId={preview.target.id}
                  standingRevisionId={standing.id}
                  toNumber={preview.target.number}
                  standingNumber={standing.number}
                  blockedBecause={barred ?? (may.ok ? null : may.reason)}
                  hasPassphrase={desk.hasPassphrase}
                  action={rollBackAction}
                />
              </Card>
            ) : (
              <p className="text-15 text-ink2">Choose a revision to see what would change back.</p>
            )}
            <Cautions />
          </aside>
        </div>
      )}
    </div>
  );
}
