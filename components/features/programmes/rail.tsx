import type { Route } from "next";
import Link from "next/link";
import type { ReactNode } from "react";
import { PlanSummary } from "@/components/features/programmes/plan-summary";
import { TestMass } from "@/components/features/programmes/sheet-view";
import { DRIVE_WORDS } from "@/components/features/programmes/sheet-words";
import { Quantity } from "@/components/ui/data/quantity";
import { Card } from "@/components/ui/layout/card";
import type { GatePlan } from "@/lib/gates/plan";
import type { VehicleSheetFigures } from "@/lib/measure/vehicle/vehicle-sheet";

const more = "link mt-2 inline-flex min-h-6 items-center text-15";

export function VehicleCard({
  programmeId,
  sheet,
}: {
  programmeId: string;
  sheet: { version: number; figures: VehicleSheetFigures };
}) {
  const { figures } = sheet;
  return (
    <Card title="Vehicle" level={2}>
      <p className="text-15">
        {figures.label}
        <br />
        {DRIVE_WORDS[figures.drive]} driven, <TestMass sheet={figures} coverage={2} />, limiter{" "}
        <Quantity value={figures.redlineRpm} unit="1/min" decimals={0} />
      </p>
      <Link href={`/programmes/${programmeId}/vehicle-sheet` as Route} className={more}>
        Vehicle sheet, version {sheet.version}
      </Link>
    </Card>
  );
}

export function GatesCard({
  programmeId,
  plan,
}: {
  programmeId: string;
  plan: { version: number; plan: GatePlan } | null;
}) {
  return (
    <Card title="Gates" level={2}>
      {plan ? <PlanSummary plan={plan.plan} /> : <p className="text-15 text-ink2">The starting plan.</p>}
      <Link href={`/programmes/${programmeId}/gates` as Route} className={more}>
        {plan ? `Gate plan, version ${plan.version}` : "Gate plan"}
      </Link>
    </Card>
  );
}

/** What is settled once about the calibration of a programme. */
export function CalibrationCard({ programmeId }: { programmeId: string }) {
  const pages = [
    ["relevance", "Emission and safety"],
    ["axis-links", "Axis links"],
    ["checksum-regions", "Checksum regions"],
  ] as const;
  return (
    <Card title="Calibration" level={2}>
      <ul className="-my-2 flex flex-col">
        {pages.map(([page, words]) => (
          <li key={page}>
            <Link
              href={`/programmes/${programmeId}/${page}` as Route}
              className="link inline-flex min-h-control items-center text-15"
            >
              {words}
            </Link>
          </li>
        ))}
      </ul>
    </Card>
  );
}

export function PeopleCard({
  people,
}: {
  people: readonly { userId: string; name: string; roles: readonly string[] }[];
}) {
  return (
    <Card title="People" level={2}>
      <ul className="flex flex-col gap-1 text-15">
        {people.map((person) => (
          <li key={person.userId} className="flex flex-wrap justify-between gap-x-3">
            <span>{person.name}</span>
            <span className="text-13 text-ink2">{person.roles.join(", ")}</span>
          </li>
        ))}
      </ul>
    </Card>
  );
}

export function RoadDaysCard({
  programmeId,
  days,
  mayPlan,
}: {
  programmeId: string;
  mayPlan: boolean;
  days: readonly { id: string; day: string; stripName: string; runs: number }[];
}) {
  return (
    <Card title="Road days" level={2}>
      {days.length === 0 ? (
        <p className="text-15 text-ink2">None yet.</p>
      ) : (
        <ul className="flex flex-col">
          {days.map((day) => (
            <li key={day.id} className="border-line border-t first:border-t-0">
              <Link
                href={`/road-days/${day.id}` as Route}
                className="flex min-h-control flex-col justify-center py-1.5 hover:underline"
              >
                <span className="tabular text-15">{day.day}</span>
                <span className="text-13 text-ink2">
                  {day.stripName}, {day.runs === 1 ? "1 run" : `${day.runs} runs`}
                </span>
              </Link>
            </li>
          ))}
        </ul>
      )}
      {mayPlan && (
        <p className="flex flex-wrap gap-x-4">
          <Link href={`/programmes/${programmeId}/plan` as Route} className={more}>
            Plan
          </Link>
          <Link href={`/programmes/${programmeId}/repeatability` as Route} className={more}>
            Own scatter
          </Link>
          <Link href={`/programmes/${programmeId}/analysis` as Route} className={more}>
            Analysis version
          </Link>
        </p>
      )}
    </Card>
  );
}

export function HistoryCard({ children, allHref }: { children: ReactNode; allHref: string | null }) {
  return (
    <Card title="What happened" level={2}>
      {children}
      {allHref && (
        <Link href={allHref as Route} className={more}>
          All of it in the ledger
        </Link>
      )}
    </Card>
  );
}
