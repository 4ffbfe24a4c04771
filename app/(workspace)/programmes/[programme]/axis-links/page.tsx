import type { Metadata, Route } from "next";
import Link from "next/link";
import { z } from "zod";
import { saveLinksAction } from "@/app/(workspace)/programmes/[programme]/actions";
import { LinksForm } from "@/components/features/programmes/calibration/links-form";
import { SettingPage } from "@/components/features/programmes/calibration/setting-page";
import { LinksTable } from "@/components/features/programmes/calibration/setting-tables";
import { ProgrammeCrumbs } from "@/components/features/shell/programme-crumbs";
import { Card } from "@/components/ui/layout/card";
import { requireCtx } from "@/lib/auth/current";
import { orNotFound, orRefused, versionOf } from "@/lib/http/page";
import { can } from "@/lib/policy/can";
import { getCalibrationSetting } from "@/lib/services/calibration-settings/get";
import { quantitiesToLink } from "@/lib/services/calibration-settings/quantities-to-link";

export const metadata: Metadata = { title: "Axis links" };

/** Which channel of the logs moves along which axis, remembered for the whole programme. */
export default async function AxisLinksPage({
  params,
  searchParams,
}: PageProps<"/programmes/[programme]/axis-links">) {
  const ctx = await requireCtx();
  const { version, revision, against } = await searchParams;
  const setting = await orNotFound((await params).programme, (programmeId) =>
    getCalibrationSetting(ctx, { programmeId, kind: "axis_links", version: versionOf(version) }),
  );
  const { programme, shown } = setting;
  const may = can(ctx, "axis_links.version");
  const [revisionId, againstId] = [revision, against].map((id) => z.uuid().safeParse(id).data);
  const mayCompare = can(ctx, "revision.compare_images").ok;
  const found = mayCompare
    ? await orRefused(() => quantitiesToLink(ctx, { programmeId: programme.id, revisionId, againstId }))
    : null;
  return (
    <SettingPage
      above={<ProgrammeCrumbs programme={programme} then={[{ label: "Axis links" }]} />}
      title="Axis links"
      lead="Which channel of the logs moves along which axis of the calibration. By them it is told where runs went."
      path={`/programmes/${programme.id}/axis-links`}
      setting={setting}
      form={
        may.ok && (
          <LinksForm
            key={shown.version}
            programmeId={programme.id}
            version={shown.version}
            links={shown.content}
            quantities={found?.quantities ?? []}
            blockedBecause={programme.archivedAt ? "This programme is archived." : null}
            action={saveLinksAction}
          />
        )
      }
      readable={shown.content.length > 0 && <LinksTable links={shown.content} />}
      refused={may.ok ? null : may.reason}
      empty="Nobody has linked an axis by hand yet. Quantities whose name says what they are link themselves."
      aside={
        found && (
          <Card title="Which axes">
            <p className="text-15">
              Those of what{" "}
              <Link href={`/revisions/${found.revision.id}` as Route} className="link">
                R{found.revision.number} {found.revision.title}
              </Link>{" "}
              changes, and those that are linked already. A link holds for every revision of the programme.
            </p>
          </Card>
        )
      }
    />
  );
}
