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

function Name({ row }: { row: ProgrammeRow }) {
  return (
    <>
      <Link
        href={`/programmes/${row.id}` as Route}
        className="inline-flex min-h-8 items-center font-semibold hover:underline"
      >
        {row.name}
      </Link>
      {row.sample && <span className="ml-2 text-13 text-ink2">sample</span>}
      {row.goal && <p className="max-w-md font-normal text-13 text-ink2 sm:truncate">{row.goal}</p>}
    </>
  );
}

function Stands({ row }: { row: ProgrammeRow }) {
  if (!row.stands) return <span className="text-ink2">nothing yet</span>;
  return (
    <>
      <Link href={revision(row.stands.id)} className="inline-flex min-h-8 items-center gap-2 hover:underline">
        <Tag tone="strong">R{row.stands.number}</Tag>
        <span>{row.stands.title}</span>
      </Link>
      {row.stands.since && <p className="text-13 text-ink2">since {row.stands.since}</p>}
    </>
  );
}

function InFlight({ row }: { row: ProgrammeRow }) {
  if (row.inFlight.length === 0) return <span className="text-ink2">–</span>;
  return (
    <ul className="flex flex-col gap-1">
      {row.inFlight.map((item) => (
        <li key={item.id}>
          <Link href={revision(item.id)} className="inline-flex min-h-8 items-center gap-2 hover:underline">
            <Tag>R{item.number}</Tag>
            <span>{item.state.replace("_", " ")}</span>
          </Link>
        </li>
      ))}
    </ul>
  );
}

/** The same on a phone: one sheet a programme, nothing to swipe. */
function ProgrammeSheets({ rows }: { rows: readonly ProgrammeRow[] }) {
  return (
    <ul className="sm:hidden">
      {rows.map((row) => (
        <li key={row.id} className="flex flex-col gap-2 border-line border-t px-4 py-3 first:border-t-0">
          <div>
            <Name row={row} />
          </div>
          <dl className="grid grid-cols-[5rem_1fr] gap-x-3 gap-y-1 text-15">
            <dt className="pt-1 text-ink2">Stands</dt>
            <dd>
              <Stands row={row} />
            </dd>
            <dt className="pt-1 text-ink2">In flight</dt>
            <dd>
              <InFlight row={row} />
            </dd>
            <dt className="text-ink2">Last run</dt>
            <dd>{row.lastRun ?? <span className="text-ink2">–</span>}</dd>
          </dl>
        </li>
      ))}
    </ul>
  );
}

/** What stands and what is in flight, one line a programme. */
export function ProgrammeTable({ programmes }: { programmes: readonly ProgrammeRow[] }) {
  const [filter, setFilter] = useState("");
  const wanted = filter.trim().toLowerCase();
  const empty = wanted ? "No programme carries these words." : "None here.";
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
      {rows.length === 0 && <p className="px-4 pb-4 text-ink2 sm:hidden">{empty}</p>}
      <ProgrammeSheets rows={rows} />
      <Table
        caption="Programmes"
        rows={rows}
        rowKey={(row) => row.id}
        empty={empty}
        className="hidden px-2 sm:block md:px-3"
        columns={[
          {
            key: "name",
            header: "Name",
            rowHeader: true,
            className: "min-w-44",
            cell: (row) => <Name row={row} />,
          },
          { key: "stands", header: "Stands", className: "min-w-36", cell: (row) => <Stands row={row} /> },
          {
            key: "flight",
            header: "In flight",
            className: "min-w-40",
            cell: (row) => <InFlight row={row} />,
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
