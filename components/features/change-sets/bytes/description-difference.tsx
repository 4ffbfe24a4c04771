import { counted, numberText } from "@/components/ui/data/number-text";
import { Disclosure } from "@/components/ui/layout/disclosure";
import type { TextDifference } from "@/lib/calibration/changes/types";
import { cn } from "@/lib/cn";

const LINE_CLASS = {
  "+": "border-side-b bg-sunk font-semibold",
  "-": "border-side-a border-dashed bg-sunk",
  " ": "border-transparent text-ink2",
} as const;
const LINE_SIGN = { "+": "+", "-": "\u2212", " ": "\u00a0" } as const;
const LINE_WORD = { "+": "added: ", "-": "removed: ", " ": "" } as const;

/** What differs in the text of the two descriptions, folded away. */
export function DescriptionDifference({ difference }: { difference: TextDifference }) {
  const { hunks, added, removed, truncated } = difference;
  if (hunks !== null && hunks.length === 0) return null;
  const aside = `${numberText(removed)} removed, ${counted(added, "line")} added`;
  return (
    <Disclosure summary="The text of the description differs" aside={hunks === null ? undefined : aside}>
      {hunks === null ? (
        <p className="max-w-prose text-15">
          The two texts are too different to be set against each other. The values above are read by each
          revision's own description.
        </p>
      ) : (
        <div className="flex flex-col gap-3">
          {hunks.map((hunk) => (
            // biome-ignore lint/a11y/useSemanticElements: a named scroller around text, not a set of fields
            <div
              key={`${hunk.fromA}-${hunk.fromB}`}
              role="group"
              aria-label={`Line ${hunk.fromA} before, line ${hunk.fromB} after`}
              // biome-ignore lint/a11y/noNoninteractiveTabindex: what scrolls must be reachable by key (WCAG 2.1.1)
              tabIndex={0}
              className="overflow-x-auto border border-line"
            >
              <p className="px-2 py-1 text-13 text-ink2">
                line {numberText(hunk.fromA)} before, line {numberText(hunk.fromB)} after
              </p>
              <pre className="tabular w-max min-w-full text-13">
                {hunk.lines.map((line, index) => (
                  // biome-ignore lint/suspicious/noArrayIndexKey: lines repeat and never move
                  <span key={index} className={cn("block border-l-3 pr-2 pl-2", LINE_CLASS[line.kind])}>
                    <span aria-hidden="true">{LINE_SIGN[line.kind]} </span>
                    <span className="sr-only">{LINE_WORD[line.kind]}</span>
                    {line.text}
                    {"\n"}
                  </span>
                ))}
              </pre>
            </div>
          ))}
          {truncated && <p className="text-13 text-ink2">Only the first places are shown.</p>}
        </div>
      )}
    </Disclosure>
  );
}
