import type { Route } from "next";
import Link from "next/link";
import type { ReactNode } from "react";
import type { ChangeGroup } from "@/components/features/change-sets/list/change-order";
import { LookedAtMark } from "@/components/features/change-sets/walk/looked-at";
import { limitText, spreadText, structureText } from "@/components/features/change-sets/words/change-words";
import { coverageOf, visitedText } from "@/components/features/change-sets/words/coverage-words";
import { differenceOf, digitsFor, valueText } from "@/components/features/change-sets/words/figure-text";
import { counted, numberText } from "@/components/ui/data/number-text";
import { Tag } from "@/components/ui/data/tag";
import type { CharacteristicChange } from "@/lib/calibration/changes/types";
import type { Coverage } from "@/lib/calibration/coverage/types";
import { TYPE_WORDS } from "@/lib/calibration/values/type-words";
import { cn } from "@/lib/cn";

/** Rows that are drawn at most; the downloads hold all. */
const MOST_ROWS = 400;

export interface ChangeListProps {
  groups: readonly ChangeGroup[];
  /** Name of the opened change. */
  current: string | null;
  hrefOf: (name: string) => Route;
  coverage: Coverage | null;
  /** Relevance by name of change, e.g. "emission"; absent: not marked. */
  relevance: ReadonlyMap<string, string>;
  /** The bytes outside the description, as a last row. */
  bytes: { href: Route; isCurrent: boolean; text: string; digests: readonly string[] } | null;
}

/** What changed, one row a characteristic, to be opened one at a time. */
export function ChangeList({ groups, current, hrefOf, coverage, relevance, bytes }: ChangeListProps) {
  let left = MOST_ROWS;
  const total = groups.reduce((sum, group) => sum + group.changes.length, 0);
  const shown = groups.flatMap((group) => {
    const changes = group.changes.slice(0, left);
    left -= changes.length;
    return changes.length > 0 ? [{ ...group, changes, all: group.changes.length }] : [];
  });
  const grouped = shown.length > 1 || shown.some((group) => group.name !== null);
  return (
    <div data-change-list className="flex flex-col lg:max-h-[52rem] lg:overflow-y-auto">
      {shown.map((group) => (
        <section key={group.name ?? ""}>
          {grouped && (
            <h3 className="sticky top-0 z-10 flex items-baseline justify-between gap-3 border-line border-b bg-sunk px-3 py-1.5 text-13">
              <span className="min-w-0 break-words">{group.name ?? "In no function"}</span>
              <span className="shrink-0 font-normal font-sans text-ink2">{numberText(group.all)}</span>
            </h3>
          )}
          <ul>
            {group.changes.map((change) => (
              <Row key={change.name} href={hrefOf(change.name)} isCurrent={change.name === current}>
                <ChangeWords change={change} coverage={coverage} relevance={relevance.get(change.name)} />
              </Row>
            ))}
          </ul>
        </section>
      ))}
      {bytes && (
        <section>
          {grouped && (
            <h3 className="border-line border-b bg-sunk px-3 py-1.5 text-13">Outside the description</h3>
          )}
          <ul>
            <Row href={bytes.href} isCurrent={bytes.isCurrent}>
              <span className="flex items-baseline justify-between gap-3">
                <span className="font-semibold text-15">{bytes.text}</span>
                <LookedAtMark digests={bytes.digests} />
              </span>
            </Row>
          </ul>
        </section>
      )}
      {total > MOST_ROWS && (
        <p className="px-3 py-2 text-13 text-ink2">
          The {numberText(MOST_ROWS)} with the largest effect in this order are listed, of {numberText(total)}
          . The downloads hold all.
        </p>
      )}
    </div>
  );
}

function Row({ href, isCurrent, children }: { href: Route; isCurrent: boolean; children: ReactNode }) {
  return (
    <li className="border-line border-b last:border-b-0">
      <Link
        href={href}
        prefetch={false}
        aria-current={isCurrent ? "true" : undefined}
        className={cn(
          "relative flex min-h-control flex-col gap-0.5 px-3 py-2 -outline-offset-3 hover:bg-sunk",
          isCurrent &&
            "bg-sunk before:absolute before:inset-y-0 before:left-0 before:w-[3px] before:bg-action",
        )}
      >
        {children}
      </Link>
    </li>
  );
}

const KIND_WORDS = { added: "only in the new description", removed: "only in the old description" } as const;

/** A row in words: name and text, cells and spread, then what to look out for. */
function ChangeWords({
  change,
  coverage,
  relevance,
}: {
  change: CharacteristicChange;
  coverage: Coverage | null;
  relevance: string | undefined;
}) {
  const visits = coverageOf(coverage, change.name);
  const notes = [
    structureText(change) && (change.shapeChanged ? "shape changed" : "axis points moved"),
    limitText(change),
    visits?.table && visits.table.changedNeverVisited.length > 0 ? visitedText(visits.table) : null,
  ].filter((note): note is string => Boolean(note));
  return (
    <>
      <span className="flex items-baseline justify-between gap-3">
        <span className="min-w-0 break-words font-semibold text-15">{change.name}</span>
        <LookedAtMark digests={[change.digest]} />
      </span>
      {change.text && <span className="text-13 text-ink2">{change.text}</span>}
      <span className="flex flex-wrap items-baseline gap-x-3 gap-y-1 text-13">
        <Tag>{TYPE_WORDS[change.type][0]}</Tag>
        <span className="tabular">{extentText(change)}</span>
        {relevance && <Tag tone="strong">{relevance}</Tag>}
      </span>
      {notes.length > 0 && <span className="font-medium text-13">{notes.join("; ")}</span>}
    </>
  );
}

/** "38 of 224 cells, −2.0 to +9.0 kPa"; one value says before → after. */
function extentText(change: CharacteristicChange): string {
  if (change.kind !== "changed") return KIND_WORDS[change.kind];
  if (change.type === "ASCII") return "text changed";
  const differences = change.changes.flatMap((cell) => differenceOf(cell.before, cell.after) ?? []);
  const digits = digitsFor(differences, change.decimals);
  if (change.cells === 1) {
    const [before, after] = [change.before?.values[0], change.after?.values[0]].map((value) =>
      valueText(value, digits),
    );
    return `${before} → ${after}${change.unit ? `\u202f${change.unit}` : ""}`;
  }
  const spread = spreadText(change, digits);
  return `${numberText(change.changed)} of ${counted(change.cells, "cell")}${spread ? `, ${spread}` : ""}`;
}
