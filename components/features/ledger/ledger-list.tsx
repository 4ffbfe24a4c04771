import type { Route } from "next";
import Link from "next/link";
import { EntryData } from "@/components/features/ledger/entry-data";
import { eventWords, subjectPath } from "@/components/features/ledger/event-words";
import { DateTime } from "@/components/ui/data/date-time";
import { Fingerprint } from "@/components/ui/data/fingerprint";

export interface LedgerEntry {
  seq: number;
  at: Date;
  actorName: string;
  event: string;
  subjectType: string;
  subjectId: string | null;
  data: Record<string, unknown>;
  sha256: string;
}

function Happening({ entry }: { entry: LedgerEntry }) {
  const path = subjectPath(entry.subjectType, entry.subjectId);
  const words = eventWords(entry.event, entry.data);
  return path ? (
    <Link href={path as Route} className="font-semibold hover:underline">
      {words}
    </Link>
  ) : (
    <span className="font-semibold">{words}</span>
  );
}

/** Entries of the ledger, newest first: who did what, when, with what it changed and its digest. */
export function LedgerList({ entries }: { entries: readonly LedgerEntry[] }) {
  return (
    <ol reversed className="flex flex-col">
      {entries.map((entry) => (
        <li
          key={entry.seq}
          id={`entry-${entry.seq}`}
          className="keep-together flex gap-3 border-line border-t px-4 py-3 first:border-t-0 md:px-5"
        >
          <span className="tabular w-12 shrink-0 pt-0.5 text-right text-13 text-ink2">{entry.seq}</span>
          <div className="flex min-w-0 flex-1 flex-col gap-1">
            <div className="flex flex-wrap items-baseline gap-x-3">
              <p className="text-15">
                <Happening entry={entry} />
                <span className="text-ink2">, {entry.actorName}</span>
              </p>
              <span className="text-13 text-ink2 sm:ml-auto">
                <DateTime at={entry.at} zone="UTC" precision="second" />
              </span>
            </div>
            <EntryData data={entry.data} />
            <p className="flex flex-wrap items-center gap-x-3 text-13 text-ink2">
              <code className="tabular text-[0.92em]">{entry.event}</code>
              <Fingerprint value={entry.sha256} copy={false} />
            </p>
          </div>
        </li>
      ))}
    </ol>
  );
}

/** The same in a few words, for the margin of a page. */
export function HistoryList({ entries }: { entries: readonly LedgerEntry[] }) {
  if (entries.length === 0) return <p className="text-15 text-ink2">Nothing to show.</p>;
  return (
    <ol reversed className="flex flex-col gap-2">
      {entries.map((entry) => (
        <li key={entry.seq} className="text-15">
          <Happening entry={entry} />
          <p className="text-13 text-ink2">
            {entry.actorName}, <DateTime at={entry.at} zone="UTC" />
          </p>
        </li>
      ))}
    </ol>
  );
}
