import type { Metadata, Route } from "next";
import { createRoadDayAction } from "@/app/(workspace)/road-days/actions";
import { RoadDayForm } from "@/components/features/road-days/road-day-form";
import { ProgrammeCrumbs } from "@/components/features/shell/programme-crumbs";
import { LinkButton } from "@/components/ui/action/link-button";
import { Card } from "@/components/ui/layout/card";
import { PageHeading } from "@/components/ui/layout/page-heading";
import { requireCtx } from "@/lib/auth/current";
import { MOST_TWINS } from "@/lib/compare/plan/order-card";
import { orNotFound } from "@/lib/http/page";
import { prepareRoadDay } from "@/lib/services/road-days/get";

export const metadata: Metadata = { title: "New road day" };

const asText = (value: number | null | undefined) => (value == null ? "" : String(value));

/** Twins a side as a plan hands them over in the address; null where it says nothing that makes sense. */
function twinsOf(text: string | string[] | undefined): number | null {
  const twins = Number(text);
  return Number.isInteger(twins) && twins >= 1 && twins <= MOST_TWINS ? twins : null;
}

/** A tester or lead opens a road day; strip, crew and car are taken over from the last one. */
export default async function NewRoadDayPage({ searchParams }: PageProps<"/road-days/new">) {
  const ctx = await requireCtx();
  const { programme: id, twins } = await searchParams;
  const { programme, strips, last, drivable, sheetMassKg } = await orNotFound(id, (programmeId) =>
    prepareRoadDay(ctx, programmeId),
  );
  return (
    <div className="flex flex-col gap-6">
      <PageHeading
        above={<ProgrammeCrumbs programme={programme} then={[{ label: "New road day" }]} />}
        title="New road day"
        actions={
          <LinkButton href={`/programmes/${programme.id}/plan` as Route}>Plan how many twins</LinkButton>
        }
        lead="One day on one strip. Weather is read at the car; the safety checklist follows at the road side."
      />
      <Card>
        <RoadDayForm
          identity={{ programmeId: programme.id }}
          values={{
            day: "",
            zone: last?.zone ?? "",
            stripName: last?.stripName ?? "",
            stripLengthM: asText(last?.stripLengthM),
            driver: last?.driver ?? "",
            recorder: last?.recorder ?? "",
            tempC: "",
            pressureHpa: "",
            humidityPct: "",
            windNote: "",
            fuelNote: last?.fuelNote ?? "",
            tyrePressureFrontKpa: asText(last?.tyrePressureFrontKpa),
            tyrePressureRearKpa: asText(last?.tyrePressureRearKpa),
            massKg: asText(last?.massKg),
          }}
          strips={strips.map((strip) => strip.stripName)}
          sheetMassKg={sheetMassKg}
          submitWords="Open the road day"
          blockedBecause={null}
          purpose={{
            revisions: drivable.map(({ id, number, title }) => ({ id, number, title })),
            plannedTwins: twinsOf(twins),
          }}
          action={createRoadDayAction}
        />
      </Card>
    </div>
  );
}
