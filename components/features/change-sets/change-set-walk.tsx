import Link from "next/link";
import { DescriptionDifference } from "@/components/features/change-sets/bytes/description-difference";
import { NotReadList } from "@/components/features/change-sets/bytes/not-read-list";
import { UncoveredTable } from "@/components/features/change-sets/bytes/uncovered-table";
import { ChangeDetail } from "@/components/features/change-sets/change-detail";
import { ChangeList } from "@/components/features/change-sets/list/change-list";
import { type ListOrder, orderChanges } from "@/components/features/change-sets/list/change-order";
import {
  BYTES_KEY,
  type ChangesView,
  changeAddress,
} from "@/components/features/change-sets/list/view-address";
import { ChangeKeys, type WalkItem } from "@/components/features/change-sets/walk/change-keys";
import { LookedAtCount, LookedAtForm } from "@/components/features/change-sets/walk/looked-at";
import { coverageOf } from "@/components/features/change-sets/words/coverage-words";
import { withPlainUnits } from "@/components/features/change-sets/words/figure-text";
import { LinkButton } from "@/components/ui/action/link-button";
import { counted, numberText } from "@/components/ui/data/number-text";
import { touchedMarks } from "@/lib/calibration/changes/relevance";
import type { ChangeSet, CharacteristicChange } from "@/lib/calibration/changes/types";
import { TYPE_WORDS } from "@/lib/calibration/values/type-words";
import { cn } from "@/lib/cn";
import type { RevisionChangesView } from "@/lib/services/change-sets/schema";

export interface ChangeSetWalkProps {
  view: RevisionChangesView & { changes: ChangeSet; against: NonNullable<RevisionChangesView["against"]> };
  asked: ChangesView;
  mayLook: boolean;
}

/** The list of changes with one of them opened, and what leads from one to the next. */
export function ChangeSetWalk({ view, asked, mayLook }: ChangeSetWalkProps) {
  const { coverage, revision, against } = view;
  const set = { ...view.changes, characteristics: view.changes.characteristics.map(withPlainUnits) };
  const { order } = asked;
  const groups = orderChanges(set.characteristics, order);
  const walked = groups.flatMap((group) => group.changes);
  const hasBytes = set.uncovered.length > 0;
  const hrefOf = (change: string) => changeAddress(revision.id, { ...asked, change });
  const current =
    walked.find(({ name }) => name === asked.change) ??
    (asked.change === BYTES_KEY && hasBytes ? null : (walked[0] ?? null));
  const byteDigests = set.uncovered.map(({ digest }) => digest);
  const byteWords = `${counted(set.uncoveredBytes, "byte")} in ${counted(set.uncoveredRanges, "place")}`;
  const items: WalkItem[] = [
    ...walked.map((change) => ({
      href: hrefOf(change.name),
      digests: [change.digest],
      spoken: spokenOf(change),
    })),
    ...(hasBytes
      ? [{ href: hrefOf(BYTES_KEY), digests: byteDigests, spoken: `${byteWords} outside the description.` }]
      : []),
  ];
  const at = current ? walked.indexOf(current) : walked.length;
  const relevance = relevanceByName(set, view.marks);
  const bytes = hasBytes && <BytesDetail set={set} digests={byteDigests} mayLook={mayLook} />;
  const folds = (
    <div>
      {set.descriptionDifference && <DescriptionDifference difference={set.descriptionDifference} />}
      <NotReadList notRead={set.notRead} />
    </div>
  );
  if (walked.length === 0)
    return (
      <div className="flex flex-col gap-3">
        {bytes && (
          <section aria-labelledby="change-heading" id="change">
            {bytes}
          </section>
        )}
        {folds}
      </div>
    );
  return (
    <div className="flex flex-col gap-3">
      <div className="flex flex-wrap items-center justify-between gap-x-4 gap-y-2">
        <OrderLinks asked={asked} revisionId={revision.id} />
        {mayLook && <LookedAtCount items={items.map(({ digests }) => digests)} />}
        <ChangeKeys items={items} current={at} mayLook={mayLook} />
      </div>
      <div className="grid items-start gap-4 lg:grid-cols-[minmax(17rem,22rem)_minmax(0,1fr)]">
        <nav aria-label="Changes" className="rounded border border-line bg-surface">
          <ChangeList
            groups={groups}
            current={current?.name ?? null}
            hrefOf={hrefOf}
            coverage={coverage.result}
            relevance={relevance}
            bytes={
              hasBytes
                ? {
                    href: hrefOf(BYTES_KEY),
                    isCurrent: current === null,
                    text: byteWords,
                    digests: byteDigests,
                  }
                : null
            }
          />
        </nav>
        <section
          id="change"
          aria-labelledby="change-heading"
          className="min-w-0 rounded border border-line bg-surface p-4 md:p-5"
        >
          {current ? (
            <ChangeDetail
              key={current.digest}
              change={current}
              coverage={coverageOf(coverage.result, current.name)}
              relevance={relevance.get(current.name)}
              mayLook={mayLook}
              labels={{ before: `R${against.number}`, after: `R${revision.number}` }}
              view={{ side: asked.side, plane: asked.plane }}
            />
          ) : (
            bytes
          )}
          <Neighbours previous={items[at - 1]} next={items[at + 1]} />
        </section>
      </div>
      {folds}
    </div>
  );
}

/** The way on under the opened change, where the buttons above the list are out of sight. */
function Neighbours({ previous, next }: { previous: WalkItem | undefined; next: WalkItem | undefined }) {
  return (
    <nav aria-label="To the neighbouring changes" className="no-print mt-6 flex flex-wrap gap-2 lg:hidden">
      {previous && <LinkButton href={previous.href}>Previous change</LinkButton>}
      {next && <LinkButton href={next.href}>Next change</LinkButton>}
    </nav>
  );
}

/** Bytes that no characteristic covers; without a description all that is known. */
function BytesDetail({
  set,
  digests,
  mayLook,
}: {
  set: ChangeSet;
  digests: readonly string[];
  mayLook: boolean;
}) {
  const hasDescription = set.readBy !== "none";
  return (
    <div className="flex flex-col gap-4">
      <header className="flex flex-wrap items-start justify-between gap-3">
        <h3 id="change-heading" tabIndex={-1} className="text-20">
          {hasDescription ? "Outside the description" : "Changed bytes"}
        </h3>
        {mayLook && <LookedAtForm digests={digests} />}
      </header>
      <UncoveredTable ranges={set.uncovered} total={set.uncoveredRanges} hasDescription={hasDescription} />
    </div>
  );
}

function spokenOf(change: CharacteristicChange): string {
  const what = `${change.name}, ${TYPE_WORDS[change.type][0]}`;
  return change.cells > 1
    ? `${what}, ${numberText(change.changed)} of ${counted(change.cells, "cell")} changed.`
    : `${what}.`;
}

/** "emission", "safety" or both, by the name of a change that a mark stands for. */
function relevanceByName(set: ChangeSet, marks: RevisionChangesView["marks"]): Map<string, string> {
  const found = new Map<string, Set<string>>();
  for (const { mark, characteristics } of touchedMarks(set, marks))
    for (const name of characteristics) found.set(name, (found.get(name) ?? new Set()).add(mark.relevance));
  return new Map([...found].map(([name, kinds]) => [name, [...kinds].sort().join(", ")]));
}

const ORDERS: readonly { order: ListOrder; words: string }[] = [
  { order: "function", words: "By function" },
  { order: "effect", words: "By effect" },
];

/** Links, so that the order is part of the address and works without script. */
function OrderLinks({ asked, revisionId }: { asked: ChangesView; revisionId: string }) {
  return (
    <nav
      aria-label="Order of the list"
      className="no-print inline-flex rounded border border-edge bg-surface"
    >
      {ORDERS.map(({ order, words }, index) => {
        const here = asked.order === order;
        return (
          <Link
            key={order}
            href={changeAddress(revisionId, { ...asked, order })}
            scroll={false}
            aria-current={here ? "true" : undefined}
            className={cn(
              "relative flex min-h-control items-center px-3 font-medium text-15 text-ink2 hover:text-ink",
              index > 0 && "border-line border-l",
              here &&
                "font-semibold text-ink after:absolute after:inset-x-2 after:bottom-1.5 after:h-[3px] after:bg-action",
            )}
          >
            {words}
          </Link>
        );
      })}
    </nav>
  );
}
