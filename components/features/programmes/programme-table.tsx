"use client";

import type { Route } from "next";
import Link from "next/link";
import { useState } from "react";
import { Table } from "@/components/ui/data/table";
import { Tag } from "@/components/ui/data/tag";
import { TextInput } from "@/components/ui/form/text-input";

export interface ProgrammeRow {
  id: string;
  name: string;
  goal: string;
  sample: boolean;
  stands: { id: string; number: number; title: string; since: string | null } | null;
  inFlight: { id: string; number: number; state: string }[];
  /** Day of the newest run, as text. */
  lastRun: string | null;
}

/** From so many on a filter is worth its place. */
const FILTER_FROM = 8;

const revision = (id: string) => `/revisions/${id}` as Route;

/** What stands and what is in flight, one line a programme. */
export function ProgrammeTable({ programmes }: { programmes: readonly ProgrammeRow[] }) {
  const [filter, setFilter] = useState("");
  const wanted = filter.trim().toLowerCase();
  const rows = programmes.filter((row) => `${row.name} ${row.goal}`.toLowerCase().includes(wanted));
  return (
    <div className="flex flex-col gap-3">
      {programmes.length >= FILTER_FROM && (
        <TextInput
          label="Filter by name or goal"
          type="search"
          value={filter}
          onChange={(event) => setFilter(event.target.value)}
          fieldClassName="max-w-sm px-4 md:px-5"
        />
      )}
      <Table
        caption="Programmes"
        rows={rows}
        rowKey={(row) => row.id}
        empty="No programme carries these words."
        className="px-2 md:px-3"
        columns={[
          {
            key: "name",
            header: "Name",
            rowHeader: true,
            className: "min-w-44",
            cell: (row) => (
              <>
                <Link
                  href={`/programmes/${row.id}` as Route}
                  className="inline-flex min-h-8 items-center font-semibold hover:underline"
                >
                  {row.name}
                </Link>
                {row.sample && <span className="ml-2 text-13 text-ink2">sample</span>}
                {row.goal && <p className="max-w-md truncate font-normal text-13 text-ink2">{row.goal}</p>}
              </>
            ),
          },
          {
            key: "stands",
            header: "Stands",
            className: "min-w-36",
            cell: (row) =>
              row.stands ? (
                <>
                  <Link
                    href={revision(row.stands.id)}
                    className="inline-flex min-h-8 items-center gap-2 hover:underline"
                  >
                    <Tag tone="strong">R{row.stands.number}</Tag>
                    <span>{row.stands.title}</span>
                  </Link>
                  {row.stands.since && <p className="text-13 text-ink2">since {row.stands.since}</p>}
                </>
              ) : (
                <span className="text-ink2">nothing yet</span>
              ),
          },
          {
            key: "flight",
            header: "In flight",
            className: "min-w-40",
            cell: (row) =>
              row.inFlight.length === 0 ? (
                <span className="text-ink2">–</span>
              ) : (
                <ul className="flex flex-col gap-1">
                  {row.inFlight.map((item) => (
                    <li key={item.id}>
                      <Link
                        href={revision(item.id)}
                        className="inline-flex min-h-8 items-center gap-2 hover:underline"
                      >
                        <Tag>R{item.number}</Tag>
                        <span>{item.state.replace("_", " ")}</span>
                      </Link>
                    </li>
                  ))}
                </ul>
              ),
          },
          {
            key: "run",
            header: "Last run",
            className: "whitespace-nowrap",
            cell: (row) => row.lastRun ?? <span className="text-ink2">–</span>,
          },
        ]}
      />
    </div>
  );
}
