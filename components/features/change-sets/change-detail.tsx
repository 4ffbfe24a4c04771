import { AxisChange } from "@/components/features/change-sets/detail/axis-change";
import { ChangeFigure, type ChangeFigureProps } from "@/components/features/change-sets/detail/change-figure";
import { LookedAtForm } from "@/components/features/change-sets/walk/looked-at";
import { limitText } from "@/components/features/change-sets/words/change-words";
import { type ChangeCoverage, visitedText } from "@/components/features/change-sets/words/coverage-words";
import { addressText } from "@/components/ui/data/address-text";
import { counted, numberText } from "@/components/ui/data/number-text";
import { Tag } from "@/components/ui/data/tag";
import { TYPE_WORDS } from "@/lib/calibration/values/type-words";

export interface ChangeDetailProps extends Omit<ChangeFigureProps, "coverage"> {
  coverage: ChangeCoverage | null;
  relevance: string | undefined;
  mayLook: boolean;
}

const KIND_SENTENCES = {
  changed: null,
  added: "Only the description of this revision knows it: there is nothing before.",
  removed: "Only the earlier description knows it: there is nothing after.",
} as const;

/** One change, opened: what it is, how far it goes, and its figure. */
export function ChangeDetail({ change, coverage, relevance, mayLook, ...figure }: ChangeDetailProps) {
  const { type, cells, changed, functions, groups, unit } = change;
  const facts = [
    change.kind === "changed" && cells > 1
      ? `${numberText(changed)} of ${counted(cells, "cell")} changed`
      : null,
    unit ? `in ${unit}` : null,
    `at ${addressText(change.address)}`,
    functions.length > 0 ? `function ${functions.join(", ")}` : null,
    groups.length > 0 ? `group ${groups.join(", ")}` : null,
  ].filter((fact) => fact !== null);
  const notes = [
    KIND_SENTENCES[change.kind],
    sentence(limitText(change)),
    sentence(coverage?.table ? visitedText(coverage.table) : null),
    coverage?.reason ? `Coverage can't be told: ${coverage.reason}` : null,
    change.before === null && change.after === null
      ? "It is not shown cell by cell: too many cells changed altogether. The files of all values below hold it."
      : null,
  ].filter((note) => note !== null);
  return (
    <div className="flex flex-col gap-4">
      <header className="flex flex-wrap items-start justify-between gap-3">
        <div className="min-w-0 flex-1 basis-72">
          <div className="flex flex-wrap items-center gap-x-3 gap-y-1">
            <h3 id="change-heading" tabIndex={-1} className="min-w-0 break-words text-20">
              {change.name}
            </h3>
            <Tag>{TYPE_WORDS[type][0]}</Tag>
            {relevance && <Tag tone="strong">{relevance}</Tag>}
          </div>
          {change.text && <p className="text-15">{change.text}</p>}
          <p className="text-13 text-ink2">{facts.join(" · ")}</p>
        </div>
        {mayLook && <LookedAtForm digests={[change.digest]} />}
      </header>
      {notes.length > 0 && (
        <ul className="flex max-w-prose flex-col text-15">
          {notes.map((note) => (
            <li key={note}>{note}</li>
          ))}
        </ul>
      )}
      <AxisChange change={change} />
      <ChangeFigure change={change} coverage={coverage?.table ?? null} {...figure} />
    </div>
  );
}

/** A part of a sentence with its capital and full stop. */
function sentence(part: string | null): string | null {
  return part && `${part[0]?.toUpperCase()}${part.slice(1)}.`;
}
