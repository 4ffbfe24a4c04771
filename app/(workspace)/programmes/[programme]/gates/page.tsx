import type { Metadata, Route } from "next";
import Link from "next/link";
import { saveGatePlanAction } from "@/app/(workspace)/programmes/actions";
import { GatePlanForm } from "@/components/features/programmes/gate-plan-form";
import { GatePlanView } from "@/components/features/programmes/gate-plan-view";
import { VersionList } from "@/components/features/programmes/version-list";
import { ProgrammeCrumbs } from "@/components/features/shell/programme-crumbs";
import { Card } from "@/components/ui/layout/card";
import { PageHeading } from "@/components/ui/layout/page-heading";
import { Notice } from "@/components/ui/status/notice";
import { requireCtx } from "@/lib/auth/current";
import { orNotFound, versionOf } from "@/lib/http/page";
import { can } from "@/lib/policy/can";
import { getGatePlan } from "@/lib/services/gate-plans/get";

export const metadata: Metadata = { title: "Gate plan" };

export default async function GatePlanPage({
  params,
  searchParams,
}: PageProps<"/programmes/[programme]/gates">) {
  const ctx = await requireCtx();
  const version = versionOf((await searchParams).version);
  const { programme, plan, offered, newestVersion, versions } = await orNotFound(
    (await params).programme,
    (id) => getGatePlan(ctx, id, version),
  );
  const may = can(ctx, "gate_plan.version");
  const archived = programme.archivedAt ? "This programme is archived." : null;
  const isNewest = plan.version === newestVersion;
  const path = `/programmes/${programme.id}/gates`;
  return (
    <div className="flex flex-col gap-8">
      <PageHeading
        above={<ProgrammeCrumbs programme={programme} then={[{ label: "Gate plan" }]} />}
        title={plan.version === 0 ? "Gate plan, not saved yet" : `Gate plan, version ${plan.version}`}
        lead="What a revision has to show. A must blocks a promotion unless a lead waives it with a reason; a should is shown; off is not asked."
      />
      <div className="grid gap-6 lg:grid-cols-[minmax(0,1fr)_19rem]">
        <Card>
          {!isNewest && (
            <Notice
              className="mb-5"
              title={`This is version ${plan.version}; the newest is ${newestVersion}`}
            >
              Revisions that went into review under this version keep it. It can't be changed.{" "}
              <Link href={path as Route} className="link">
                To the newest
              </Link>
            </Notice>
          )}
          {isNewest && may.ok ? (
            <GatePlanForm
              key={plan.version}
              programmeId={programme.id}
              version={plan.version}
              plan={plan.plan}
              offered={offered}
              blockedBecause={archived}
              action={saveGatePlanAction}
            />
          ) : (
            <>
              <GatePlanView plan={plan.plan} />
              {isNewest && !may.ok && <p className="mt-4 text-13 text-ink2">{may.reason}</p>}
            </>
          )}
        </Card>
        <div className="flex flex-col gap-6 self-start">
          <Card title="Versions" level={2}>
            <VersionList path={path} shown={plan.version} versions={versions} />
            <p className="mt-3 border-line border-t pt-3 text-13 text-ink2">
              A new version binds revisions that are not in review yet.
            </p>
          </Card>
          <Card title="How a limit is judged" level={2}>
            <p className="text-15">
              Met only if the whole band lies on the safe side, not met if the whole of it lies beyond, else
              too little.
            </p>
          </Card>
        </div>
      </div>
    </div>
  );
}
