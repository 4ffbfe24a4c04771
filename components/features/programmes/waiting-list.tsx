import type { Route } from "next";
import Link from "next/link";
import { Tag } from "@/components/ui/data/tag";

export interface WaitingItem {
  programmeName: string;
  revisionId: string;
  revisionNumber: number;
  revisionTitle: string;
  runs: number;
  step: string;
}

const WORDS: Record<string, string> = {
  decide: "Decide",
  "start validating": "Start validating",
  "ask for a decision": "Ask for a decision",
  "drive its runs": "Drive its runs",
};

const runsText = (runs: number) => (runs === 0 ? "no runs yet" : runs === 1 ? "1 run" : `${runs} runs`);

function place(item: WaitingItem): Route {
  return (
    item.step === "decide" ? `/revisions/${item.revisionId}/decide` : `/revisions/${item.revisionId}`
  ) as Route;
}

/** What waits for the person who looks at the page, each with its next step. */
export function WaitingList({ items }: { items: readonly WaitingItem[] }) {
  return (
    <ul className="flex flex-col">
      {items.map((item) => (
        <li key={item.revisionId} className="border-line border-t first:border-t-0">
          <Link
            href={place(item)}
            className="group flex min-h-control flex-wrap items-center gap-x-4 gap-y-1 px-4 py-3 hover:bg-sunk md:px-5"
          >
            <span className="min-w-0 basis-full font-semibold sm:basis-44">{item.programmeName}</span>
            <span className="flex min-w-0 items-center gap-2.5">
              <Tag>R{item.revisionNumber}</Tag>
              <span className="truncate">{item.revisionTitle}</span>
            </span>
            <span className="text-13 text-ink2">{runsText(item.runs)}</span>
            <span className="ml-auto font-semibold text-action group-hover:underline">
              {WORDS[item.step] ?? item.step}
            </span>
          </Link>
        </li>
      ))}
    </ul>
  );
}
