import type { Metadata, Route } from "next";
import Link from "next/link";
import { saveVehicleSheetAction } from "@/app/(workspace)/programmes/actions";
import { VehicleSheetForm } from "@/components/features/programmes/sheet-form";
import { VehicleSheetView } from "@/components/features/programmes/sheet-view";
import { VersionList } from "@/components/features/programmes/version-list";
import { ProgrammeCrumbs } from "@/components/features/shell/programme-crumbs";
import { Card } from "@/components/ui/layout/card";
import { PageHeading } from "@/components/ui/layout/page-heading";
import { Notice } from "@/components/ui/status/notice";
import { requireCtx } from "@/lib/auth/current";
import { orNotFound, versionOf } from "@/lib/http/page";
import { can } from "@/lib/policy/can";
import { getVehicleSheet } from "@/lib/services/vehicle-sheets/get";

export const metadata: Metadata = { title: "Vehicle sheet" };

export default async function VehicleSheetPage({
  params,
  searchParams,
}: PageProps<"/programmes/[programme]/vehicle-sheet">) {
  const ctx = await requireCtx();
  const version = versionOf((await searchParams).version);
  const { programme, sheet, newestVersion, versions } = await orNotFound((await params).programme, (id) =>
    getVehicleSheet(ctx, id, version),
  );
  const may = can(ctx, "vehicle.version");
  const archived = programme.archivedAt ? "This programme is archived." : null;
  const isNewest = sheet.version === newestVersion;
  const path = `/programmes/${programme.id}/vehicle-sheet`;
  return (
    <div className="flex flex-col gap-8">
      <PageHeading
        above={<ProgrammeCrumbs programme={programme} then={[{ label: "Vehicle sheet" }]} />}
        title={`Vehicle sheet, version ${sheet.version}`}
        lead="What the computation needs to know of the car, each figure with its unit and its standard uncertainty."
      />
      <div className="grid gap-6 lg:grid-cols-[minmax(0,1fr)_19rem]">
        <Card>
          {!isNewest && (
            <Notice
              className="mb-5"
              title={`This is version ${sheet.version}; the newest is ${newestVersion}`}
            >
              Results that name this version were computed with it. It can't be changed.{" "}
              <Link href={path as Route} className="link">
                To the newest
              </Link>
            </Notice>
          )}
          {isNewest && may.ok ? (
            <VehicleSheetForm
              key={sheet.version}
              programmeId={programme.id}
              version={sheet.version}
              figures={sheet.figures}
              blockedBecause={archived}
              action={saveVehicleSheetAction}
            />
          ) : (
            <>
              <VehicleSheetView sheet={sheet.figures} />
              {isNewest && !may.ok && <p className="mt-4 text-13 text-ink2">{may.reason}</p>}
            </>
          )}
        </Card>
        <Card title="Versions" level={2} className="self-start">
          <VersionList path={path} shown={sheet.version} versions={versions} />
          <p className="mt-3 border-line border-t pt-3 text-13 text-ink2">
            Saving adds a version and has the comparisons of this programme computed anew; records keep the
            version they were decided on.
          </p>
        </Card>
      </div>
    </div>
  );
}
