import type { Metadata, Route } from "next";
import Link from "next/link";
import { Checklist } from "@/app/(workspace)/road-days/[roadDay]/checklist";
import { chooseCard } from "@/app/(workspace)/road-days/[roadDay]/choose-card";
import { OrderCardSection } from "@/app/(workspace)/road-days/[roadDay]/order-card";
import { RoadDayRuns } from "@/app/(workspace)/road-days/[roadDay]/road-day-runs";
import { editRoadDayAction } from "@/app/(workspace)/road-days/actions";
import { NullTestCard } from "@/components/features/null-tests/null-test-card";
import { RoadDayFacts } from "@/components/features/road-days/road-day-facts";
import { RoadDayForm } from "@/components/features/road-days/road-day-form";
import { ProgrammeCrumbs } from "@/components/features/shell/programme-crumbs";
import { Tag } from "@/components/ui/data/tag";
import { Card } from "@/components/ui/layout/card";
import { Disclosure } from "@/components/ui/layout/disclosure";
import { PageHeading } from "@/components/ui/layout/page-heading";
import { requireCtx } from "@/lib/auth/current";
import { orNotFound } from "@/lib/http/page";
import { can } from "@/lib/policy/can";
import { getRoadDay, type RoadDayView } from "@/lib/services/road-days/get";
import { openLines } from "@/lib/services/road-days/schema";

export const metadata: Metadata = { title: "Road day" };

const asText = (value: number | null) => (value === null ? "" : String(value));

/** What the null test came to so far, with the way to the figure. */
function NullTestOutcome({
  nullTest,
  image,
}: {
  nullTest: NonNullable<RoadDayView["nullTest"]>;
  image: string;
}) {
  const { comparisonId, state, result } = nullTest;
  const more = (
    <p>
      <Link href={`/comparisons/${comparisonId}` as Route} className="link inline-flex min-h-6 items-center">
        {result ? "The figure behind it" : "The null test"}
      </Link>
      {state === "stale" && ", of earlier inputs; it is being computed anew"}.
    </p>
  );
  if (result) return <NullTestCard result={result} image={image} more={more} />;
  return (
    <Card title="Null test">
      <p className="text-15">It is computed as the runs get their verdicts.</p>
      {more}
    </Card>
  );
}

/** One day on one strip: safety first, then what to drive, the drop area, and each log's verdict as it comes. */
export default async function RoadDayPage({ params, searchParams }: PageProps<"/road-days/[roadDay]">) {
  const ctx = await requireCtx();
  const view = await orNotFound((await params).roadDay, (id) => getRoadDay(ctx, id));
  const { roadDay, programme, revisions, runs, sheetMassKg } = view;
  const chosen = chooseCard(view, await searchParams);
  const mayEdit = can(ctx, "road_day.edit");
  const mayAttach = can(ctx, "run.attach");
  const open = openLines(roadDay.checklist).length;
  const onlyRevision = revisions[0]?.id ?? "";
  const blockedBecause = !mayAttach.ok
    ? mayAttach.reason
    : open > 0
      ? `Confirm the safety checklist first: ${open} of its lines are open.`
      : revisions.length === 0
        ? "No revision is validating, in review or standing. Start validating one first."
        : null;
  const { id, rowVersion, day, zone, stripName, driver, recorder, windNote, fuelNote } = roadDay;
  return (
    <div className="flex flex-col gap-6">
      <PageHeading
        above={<ProgrammeCrumbs programme={programme} then={[{ label: `Road day ${day}` }]} />}
        title={`${day}, ${stripName}`}
        marks={
          <>
            {chosen?.isNullTest && <Tag tone="strong">null test of {chosen.names.A}</Tag>}
            {roadDay.sample && <Tag>sample</Tag>}
          </>
        }
      />
      <Checklist roadDay={roadDay} blockedBecause={mayEdit.ok ? null : mayEdit.reason} />
      <OrderCardSection view={view} chosen={chosen} />
      <RoadDayRuns
        roadDayId={id}
        revisions={chosen?.isNullTest ? revisions.filter(({ id }) => id === chosen.a) : revisions}
        sides={{ A: chosen?.a ?? onlyRevision, B: chosen?.b ?? onlyRevision }}
        card={chosen?.card ?? null}
        letters={chosen?.isNullTest ? chosen.names : null}
        gears={view.gearCount}
        gear={runs.runs.at(-1)?.gear ?? view.gearOfSheet}
        blockedBecause={blockedBecause}
        initial={runs}
      />
      {view.nullTest && chosen && <NullTestOutcome nullTest={view.nullTest} image={chosen.names.A} />}
      <Card title="Weather at the car and the car's state" id="facts">
        <RoadDayFacts roadDay={roadDay} sheetMassKg={sheetMassKg} />
        <Disclosure summary="Correct these figures" className="mt-4">
          <p className="mb-4 max-w-prose text-15 text-ink2">
            Runs that took the old weather over get the new one and are judged again. The ledger keeps the old
            figures.
          </p>
          <RoadDayForm
            key={rowVersion}
            identity={{ roadDayId: id, rowVersion }}
            values={{
              ...{ day, zone, stripName, driver, recorder, windNote, fuelNote },
              stripLengthM: asText(roadDay.stripLengthM),
              tempC: asText(roadDay.tempC),
              pressureHpa: asText(roadDay.pressureHpa),
              humidityPct: asText(roadDay.humidityPct),
              tyrePressureFrontKpa: asText(roadDay.tyrePressureFrontKpa),
              tyrePressureRearKpa: asText(roadDay.tyrePressureRearKpa),
              massKg: asText(roadDay.massKg),
            }}
            strips={[]}
            sheetMassKg={sheetMassKg}
            submitWords="Save the correction"
            blockedBecause={mayEdit.ok ? null : mayEdit.reason}
            purpose={null}
            action={editRoadDayAction}
          />
        </Disclosure>
      </Card>
    </div>
  );
}
