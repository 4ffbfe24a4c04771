import type { Route } from "next";
import Link from "next/link";
import type { Warning } from "@/components/features/change-sets/words/warnings";
import { ToneSign } from "@/components/ui/status/tone-sign";

type Place = NonNullable<Warning["to"]>;

const LINK_WORDS: Record<Place, string> = {
  bytes: "See the bytes",
  regions: "Checksum regions",
  marks: "What is marked",
};

export interface WarningListProps {
  warnings: readonly Warning[];
  hrefs: Record<Place, Route>;
}

/** What must be known before the list is read; nothing where there is nothing. */
export function WarningList({ warnings, hrefs }: WarningListProps) {
  if (warnings.length === 0) return null;
  return (
    <ul aria-label="Know this first" className="flex flex-col rounded border border-line bg-surface">
      {warnings.map(({ tone, title, text, to }) => (
        <li
          key={`${title}${text}`}
          className="flex gap-3 border-line border-t px-3 py-2 text-15 first:border-t-0"
        >
          <ToneSign tone={tone} />
          <p className="min-w-0 max-w-prose">
            <strong className="font-semibold">{title}.</strong> {text}{" "}
            {to && (
              <Link href={hrefs[to]} className="link">
                {LINK_WORDS[to]}
              </Link>
            )}
          </p>
        </li>
      ))}
    </ul>
  );
}
