import type { Metadata, Route } from "next";
import {
  applyChannelKeyAction,
  saveChannelKeyAction,
} from "@/app/(workspace)/runs/[run]/channel-key/actions";
import { ChannelKeyWork } from "@/components/features/channel-keys/channel-key-work";
import { ProgrammeCrumbs } from "@/components/features/shell/programme-crumbs";
import { dateTimeText } from "@/components/ui/data/date-time";
import { PageHeading } from "@/components/ui/layout/page-heading";
import { requireCtx } from "@/lib/auth/current";
import { orNotFound } from "@/lib/http/page";
import { getChannelKeyPage } from "@/lib/services/channel-keys/get-page";

export const metadata: Metadata = { title: "Channel key" };

/** Which column of a run's log is which channel; saved for every log with the same header. */
export default async function ChannelKeyPage({ params }: PageProps<"/runs/[run]/channel-key">) {
  const ctx = await requireCtx();
  const page = await orNotFound((await params).run, (id) => getChannelKeyPage(ctx, id));
  const { run, programme, roadDay, versions, used } = page;
  return (
    <div className="flex flex-col gap-6">
      <PageHeading
        above={
          <ProgrammeCrumbs
            programme={programme}
            then={[
              { label: `Run ${run.number}`, href: `/runs/${run.id}` as Route },
              { label: "Channel key" },
            ]}
          />
        }
        title={`Columns of ${run.logFileName}`}
      />
      <ChannelKeyWork
        versions={{
          runId: run.id,
          used,
          versions: versions.map(({ id, name, version, savedBy, savedAt }) => ({
            id,
            name,
            version,
            savedBy,
            savedAt: dateTimeText(savedAt, roadDay.zone),
          })),
          action: applyChannelKeyAction,
        }}
        form={{
          runId: run.id,
          kind: run.kind,
          engineSpeedFromSheet: page.engineSpeedFromSheet,
          initial: { preview: page.preview, missing: page.missing },
          initialKey: page.key,
          initialName: page.name,
          newestVersion: versions[0]?.version ?? 0,
          action: saveChannelKeyAction,
        }}
      />
    </div>
  );
}
