import type { Metadata } from "next";
import { saveRegionsAction } from "@/app/(workspace)/programmes/[programme]/actions";
import { RegionsForm } from "@/components/features/programmes/calibration/regions-form";
import { SettingPage } from "@/components/features/programmes/calibration/setting-page";
import { RegionsTable } from "@/components/features/programmes/calibration/setting-tables";
import { ProgrammeCrumbs } from "@/components/features/shell/programme-crumbs";
import { Card } from "@/components/ui/layout/card";
import { requireCtx } from "@/lib/auth/current";
import { orNotFound, versionOf } from "@/lib/http/page";
import { can } from "@/lib/policy/can";
import { getCalibrationSetting } from "@/lib/services/calibration-settings/get";

export const metadata: Metadata = { title: "Checksum regions" };

/** Stretches of the image whose checksum is declared; each revision's image is checked by them. */
export default async function ChecksumRegionsPage({
  params,
  searchParams,
}: PageProps<"/programmes/[programme]/checksum-regions">) {
  const ctx = await requireCtx();
  const version = versionOf((await searchParams).version);
  const setting = await orNotFound((await params).programme, (programmeId) =>
    getCalibrationSetting(ctx, { programmeId, kind: "checksum_regions", version }),
  );
  const { programme, shown } = setting;
  const may = can(ctx, "checksum_regions.version");
  return (
    <SettingPage
      above={<ProgrammeCrumbs programme={programme} then={[{ label: "Checksum regions" }]} />}
      title="Checksum regions"
      lead="Stretches of the image that carry a checksum. Every revision's image is held against them."
      path={`/programmes/${programme.id}/checksum-regions`}
      setting={setting}
      form={
        may.ok && (
          <RegionsForm
            key={shown.version}
            programmeId={programme.id}
            version={shown.version}
            regions={shown.content}
            blockedBecause={programme.archivedAt ? "This programme is archived." : null}
            action={saveRegionsAction}
          />
        )
      }
      readable={shown.content.length > 0 && <RegionsTable regions={shown.content} />}
      refused={may.ok ? null : may.reason}
      empty="No region is declared. Images are then checked by their fingerprint alone."
      aside={
        <Card title="What it shows">
          <p className="text-15">
            A region that holds says that its bytes and its stored checksum fit each other, not that the
            values are right. The gate on integrity asks that every region holds.
          </p>
        </Card>
      }
    />
  );
}
