import { Plus } from "lucide-react";
import type { Metadata } from "next";
import Link from "next/link";
import { PolicyLink } from "@/components/features/programmes/policy-link";
import { ProgrammeTable } from "@/components/features/programmes/programme-table";
import { WaitingList } from "@/components/features/programmes/waiting-list";
import { dateTimeText } from "@/components/ui/data/date-time";
import { Card } from "@/components/ui/layout/card";
import { PageHeading } from "@/components/ui/layout/page-heading";
import { EmptyState } from "@/components/ui/status/empty-state";
import { requireCtx } from "@/lib/auth/current";
import { can } from "@/lib/policy/can";
import { listProgrammes, type ProgrammeLine } from "@/lib/services/programmes/list";

export const metadata: Metadata = { title: "Programmes" };

const day = (at: Date | null | undefined) => (at ? dateTimeText(at, "UTC", "day") : null);

const toRow = ({ id, name, goal, sample, stands, inFlight, lastRunAt }: ProgrammeLine) => ({
  ...{ id, name, goal, sample, inFlight },
  stands: stands && { ...stands, since: day(stands.stoodFrom) },
  lastRun: day(lastRunAt),
});

/** What stands, what is in flight, and what waits for the person who looks. */
export default async function ProgrammesPage({ searchParams }: PageProps<"/programmes">) {
  const ctx = await requireCtx();
  const { programmes, waiting } = await listProgrammes(ctx);
  const showsArchived = (await searchParams).show === "archived";
  const archived = programmes.filter((programme) => programme.archivedAt !== null);
  const shown = showsArchived ? archived : programmes.filter((programme) => programme.archivedAt === null);
  const create = can(ctx, "programme.edit");
  const newProgramme = (
    <PolicyLink href="/programmes/new" look="filled" icon={<Plus />} verdict={create}>
      New programme
    </PolicyLink>
  );
  return (
    <div className="flex flex-col gap-8">
      <PageHeading
        title="Programmes"
        lead="What stands, what is in flight, and what waits for you."
        actions={programmes.length > 0 && newProgramme}
      />
      {programmes.length === 0 ? (
        <EmptyState
          sentence={
            create.ok
              ? "No programme yet. A programme is one vehicle with one control unit, tuned toward one goal. Start with its vehicle sheet and the file that the vehicle runs today."
              : "No programme yet, or none was shared with you."
          }
          action={newProgramme}
        />
      ) : (
        <>
          <Card title="Waits for you" flush>
            {waiting.length === 0 ? (
              <p className="px-4 pb-4 text-ink2 md:px-5">Nothing waits for you.</p>
            ) : (
              <WaitingList items={waiting} />
            )}
          </Card>
          <Card
            title={showsArchived ? "Archived" : "All"}
            flush
            actions={
              (archived.length > 0 || showsArchived) && (
                <Link
                  href={showsArchived ? "/programmes" : "/programmes?show=archived"}
                  className="link inline-flex min-h-6 items-center pr-4 md:pr-5"
                >
                  {showsArchived ? "Back to those in work" : `Archived (${archived.length})`}
                </Link>
              )
            }
          >
            <ProgrammeTable programmes={shown.map(toRow)} />
          </Card>
        </>
      )}
    </div>
  );
}
