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
  const words = eventWords(entry);
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
          <div className="flex min-w-0 flex-1 flex-wrap justify-between gap-x-6 gap-y-1">
            <div className="flex min-w-0 flex-1 basis-80 flex-col gap-1">
              <p className="text-15">
                <Happening entry={entry} />
                <span className="text-ink2">, {entry.actorName}</span>
              </p>
              <EntryData data={entry.data} />
            </div>
            <div className="flex shrink-0 flex-wrap gap-x-3 text-13 text-ink2 sm:w-48 sm:flex-col sm:items-end">
              <DateTime at={entry.at} zone="UTC" precision="second" />
              <Fingerprint value={entry.sha256} copy={false} />
            </div>
          </div>
        </li>
      ))}
    </ol>
  );
}

/** Entries that follow one another, by the same person and of the same kind, told once with their number. */
function grouped(entries: readonly LedgerEntry[]): { first: LedgerEntry; count: number }[] {
  const groups: { first: LedgerEntry; count: number }[] = [];
  for (const entry of entries) {
    const last = groups.at(-1);
    if (last && last.first.event === entry.event && last.first.actorName === entry.actorName) last.count += 1;
    else groups.push({ first: entry, count: 1 });
  }
  return groups;
}

/** The same in a few words, for a part of another page. */
export function HistoryList({ entries, limit }: { entries: readonly LedgerEntry[]; limit: number }) {
  if (entries.length === 0) return <p className="text-15 text-ink2">Nothing to show.</p>;
  return (
    <ol reversed className="flex flex-col gap-2">
      {grouped(entries)
        .slice(0, limit)
        .map(({ first, count }) => (
          <li key={first.seq} className="flex flex-wrap items-baseline justify-between gap-x-4 text-15">
            <span>
              <Happening entry={first} />
              {count > 1 && <span className="text-ink2"> and {count - 1} more like it</span>}
              <span className="text-ink2">, {first.actorName}</span>
            </span>
            <span className="text-13 text-ink2">
              <DateTime at={first.at} zone="UTC" />
            </span>
          </li>
        ))}
    </ol>
  );
}
