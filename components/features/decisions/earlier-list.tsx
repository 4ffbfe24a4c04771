import Link from "next/link";
import { DateTime } from "@/components/ui/data/date-time";
import { Table } from "@/components/ui/data/table";
import { Tag } from "@/components/ui/data/tag";

interface Earlier {
  id: string;
  number: number;
  title: string;
  state: string;
  asFound: boolean;
  stoodFrom: Date | null;
  stoodUntil: Date | null;
  barredAt: Date | null;
  barredReason: string | null;
  authorName: string | null;
}

export interface EarlierListProps {
  programmeId: string;
  earlier: readonly Earlier[];
  chosenId: string | null;
}

function left(revision: Earlier): string {
  if (revision.barredAt) return `barred: ${revision.barredReason ?? "no reason was kept"}`;
  if (revision.state === "rolled_back") return "was left by a roll-back";
  return "was superseded";
}

/** Revisions that stood before; a barred one is listed and can't be chosen. */
export function EarlierList({ programmeId, earlier, chosenId }: EarlierListProps) {
  return (
    <Table
      caption="Revisions that stood earlier"
      rows={earlier}
      rowKey={(revision) => revision.id}
      isSelected={(revision) => revision.id === chosenId}
      columns={[
        {
          key: "revision",
          header: "Revision",
          rowHeader: true,
          cell: (revision) => (
            <span className="flex flex-wrap items-baseline gap-2">
              <Tag tone="strong">R{revision.number}</Tag>
              <span>{revision.title}</span>
              {revision.asFound && <span className="text-13 text-ink2">as found</span>}
            </span>
          ),
        },
        {
          key: "stood",
          header: "Last stood, UTC",
          cell: (revision) => (
            <>
              {revision.stoodFrom && <DateTime at={revision.stoodFrom} zone="UTC" />} to{" "}
              {revision.stoodUntil ? <DateTime at={revision.stoodUntil} zone="UTC" /> : "–"}
            </>
          ),
        },
        { key: "left", header: "Then", cell: left },
        { key: "author", header: "Made by", cell: (revision) => revision.authorName ?? "somebody" },
        {
          key: "choose",
          header: <span className="sr-only">Choose</span>,
          cell: (revision) =>
            revision.barredAt ? (
              <span className="text-13 text-ink2">can't be chosen</span>
            ) : revision.id === chosenId ? (
              <span className="font-semibold text-15">chosen</span>
            ) : (
              <Link
                href={`/programmes/${programmeId}/roll-back?to=${revision.id}`}
                className="link inline-flex min-h-control items-center"
              >
                See what changes<span className="sr-only"> with R{revision.number}</span>
              </Link>
            ),
        },
      ]}
    />
  );
}
