import type { Metadata } from "next";
import { saveMarksAction } from "@/app/(workspace)/programmes/[programme]/actions";
import { MarksForm } from "@/components/features/programmes/calibration/marks-form";
import { SettingPage } from "@/components/features/programmes/calibration/setting-page";
import { MarksTable } from "@/components/features/programmes/calibration/setting-tables";
import { ProgrammeCrumbs } from "@/components/features/shell/programme-crumbs";
import { Card } from "@/components/ui/layout/card";
import { requireCtx } from "@/lib/auth/current";
import { orNotFound, versionOf } from "@/lib/http/page";
import { can } from "@/lib/policy/can";
import { getCalibrationSetting } from "@/lib/services/calibration-settings/get";
import { knownSets } from "@/lib/services/calibration-settings/known-sets";

export const metadata: Metadata = { title: "Emission and safety" };

/** What a lead marks once as emission- or safety-relevant. */
export default async function RelevancePage({
  params,
  searchParams,
}: PageProps<"/programmes/[programme]/relevance">) {
  const ctx = await requireCtx();
  const version = versionOf((await searchParams).version);
  const setting = await orNotFound((await params).programme, (programmeId) =>
    getCalibrationSetting(ctx, { programmeId, kind: "relevance_marks", version }),
  );
  const { programme, shown } = setting;
  const may = can(ctx, "relevance_marks.version");
  return (
    <SettingPage
      above={<ProgrammeCrumbs programme={programme} then={[{ label: "Emission and safety" }]} />}
      title="Emission and safety"
      lead="Functions and characteristics that emissions or safety rest on. A revision that changes one of them is marked as such everywhere."
      path={`/programmes/${programme.id}/relevance`}
      setting={setting}
      form={
        may.ok && (
          <MarksForm
            key={shown.version}
            programmeId={programme.id}
            version={shown.version}
            marks={shown.content}
            known={await knownSets(ctx, programme.id)}
            blockedBecause={programme.archivedAt ? "This programme is archived." : null}
            action={saveMarksAction}
          />
        )
      }
      readable={shown.content.length > 0 && <MarksTable marks={shown.content} />}
      refused={may.ok ? null : may.reason}
      empty="Nothing is marked yet. A lead marks the functions that emissions or safety rest on."
      aside={
        <Card title="What a mark does">
          <p className="text-15">
            A change to something marked contradicts a declaration that nothing such is touched. For road use
            it needs a named approval document or a second lead. Nothing here says that a change is allowed:
            that is for local rules and licensed practice.
          </p>
        </Card>
      }
    />
  );
}
