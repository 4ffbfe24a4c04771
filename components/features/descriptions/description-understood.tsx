import { DescriptionList } from "@/components/ui/data/description-list";
import { counted, numberText } from "@/components/ui/data/number-text";
import { Table } from "@/components/ui/data/table";
import { Disclosure } from "@/components/ui/layout/disclosure";
import { Notice } from "@/components/ui/status/notice";
import { TYPE_WORDS } from "@/lib/calibration/values/type-words";
import type { ImageReading } from "@/lib/calibration/values/types";
import type { ShownDescription } from "@/lib/services/change-sets/schema";
import type { DescriptionSummary } from "@/lib/services/descriptions/schema";

const EPK_WORDS: Record<ImageReading["epk"]["state"], string> = {
  match: "belongs to this image by its identification",
  mismatch: "names another identification than the image holds",
  none: "carries no identification to compare",
};

export interface DescriptionUnderstoodProps {
  description: ShownDescription;
  /** Null until the image was read by it. */
  epk: ImageReading["epk"] | null;
}

/** What was understood of a revision's description, or why it was refused. */
export function DescriptionUnderstood({ description, epk }: DescriptionUnderstoodProps) {
  const { fileNames, state, failure, summary } = description;
  return (
    <div className="flex flex-col gap-3">
      <ul className="text-15">
        {fileNames.map((name) => (
          <li key={name} className="break-all">
            {name}
          </li>
        ))}
      </ul>
      {state === "reading" && <Notice>It is being read. Reload the page in a moment.</Notice>}
      {state === "refused" && (
        <Notice tone="problem" title="This description is refused">
          {failure}
        </Notice>
      )}
      {summary && <Summary summary={summary} epk={epk} />}
    </div>
  );
}

function Summary({ summary, epk }: { summary: DescriptionSummary; epk: ImageReading["epk"] | null }) {
  const { version, project, modules, counts, functions, groups, missingIncludes, notes } = summary;
  const kinds = Object.entries(TYPE_WORDS).flatMap(([kind, words]) => {
    const count = counts[kind] ?? 0;
    return count > 0 ? [counted(count, ...words)] : [];
  });
  return (
    <>
      <DescriptionList
        items={[
          { term: "Standard", description: version ? `ASAP2 ${version}` : "version not stated" },
          { term: "Project", description: project },
          { term: "Module", description: modules.map(({ name }) => name).join(", ") },
          { term: "Describes", description: kinds.join(", ") || "nothing" },
          {
            term: "Named sets",
            description: `${counted(functions, "function")}, ${counted(groups, "group")}`,
          },
          ...(epk ? [{ term: "Image", description: EPK_WORDS[epk.state] }] : []),
        ]}
      />
      {missingIncludes.length > 0 && (
        <Notice tone="caution" title="Files that it includes are missing">
          {missingIncludes.join(", ")}
        </Notice>
      )}
      <NotRead summary={summary} />
      {notes.length > 0 && (
        <Disclosure summary="Notes of the reader" aside={numberText(notes.length)}>
          <ul className="flex flex-col gap-1 text-13">
            {notes.map((note) => (
              <li key={note} className="break-words">
                {note}
              </li>
            ))}
          </ul>
        </Disclosure>
      )}
    </>
  );
}

function NotRead({ summary: { notRead, notReadCount } }: { summary: DescriptionSummary }) {
  if (notReadCount === 0) return null;
  return (
    <Disclosure summary="Parts that are not read" aside={numberText(notReadCount)}>
      <Table
        caption="Parts of the description that are not read"
        dense
        scroll="short"
        rows={notRead}
        rowKey={(row, index) => `${row.line}-${index}`}
        columns={[
          {
            key: "name",
            header: "Part",
            rowHeader: true,
            className: "break-all",
            cell: (row) => `${row.keyword} ${row.name}`,
          },
          { key: "line", header: "Line", numeric: true, cell: (row) => numberText(row.line) },
          { key: "reason", header: "Why", cell: (row) => row.reason },
        ]}
      />
      {notReadCount > notRead.length && (
        <p className="text-13 text-ink2">The first {numberText(notRead.length)} are listed.</p>
      )}
    </Disclosure>
  );
}
