import Link from "next/link";
import { type RecordKind, recordTitle } from "@/components/features/decisions/record-words";
import { DateTime } from "@/components/ui/data/date-time";

export interface RecordChainProps {
  chain: readonly {
    id: string;
    kind: RecordKind;
    recordNumber: number;
    deciderName: string;
    decidedAt: Date;
    revisionNumber: number;
    fromNumber: number | null;
  }[];
  currentId: string;
}

/** Every decision of the programme, newest first; a later one supersedes, it never edits. */
export function RecordChain({ chain, currentId }: RecordChainProps) {
  return (
    <ol className="flex flex-col">
      {chain.map((entry) => {
        const title = recordTitle(entry.kind, entry.revisionNumber, entry.fromNumber);
        const number = String(entry.recordNumber).padStart(3, "0");
        return (
          <li key={entry.id} className="border-line border-t py-2 first:border-t-0 first:pt-0 text-15">
            {entry.id === currentId ? (
              <span aria-current="page" className="font-semibold">
                {number} {title}
              </span>
            ) : (
              <Link href={`/records/${entry.id}`} className="link">
                {number} {title}
              </Link>
            )}
            <span className="block text-13 text-ink2">
              {entry.deciderName}, <DateTime at={entry.decidedAt} zone="UTC" />
            </span>
          </li>
        );
      })}
    </ol>
  );
}
