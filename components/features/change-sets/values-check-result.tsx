import { FirstListed } from "@/components/features/change-sets/list/first-listed";
import { plainUnit } from "@/components/features/change-sets/words/figure-text";
import {
  checkSentence,
  differenceTexts,
  type LeftOut,
  leftOutOf,
  placeText,
} from "@/components/features/change-sets/words/values-check-words";
import { counted, numberText } from "@/components/ui/data/number-text";
import { type Column, Table } from "@/components/ui/data/table";
import { Disclosure } from "@/components/ui/layout/disclosure";
import { Notice } from "@/components/ui/status/notice";
import type { ValuesCheck } from "@/lib/calibration/cdf/check-values";
import type { CdfDifference } from "@/lib/calibration/cdf/compare-with-cdf";

const COLUMNS: Column<CdfDifference>[] = [
  { key: "name", header: "Name", rowHeader: true, className: "break-all", cell: ({ name }) => name },
  { key: "cell", header: "Cell", className: "whitespace-nowrap", cell: placeText },
  { key: "file", header: "In the file", numeric: true, cell: (row) => differenceTexts(row).file },
  { key: "image", header: "In the image", numeric: true, cell: (row) => differenceTexts(row).image },
  { key: "by", header: "File \u2212 image", numeric: true, cell: (row) => differenceTexts(row).difference },
  { key: "unit", header: "Unit", cell: ({ unit }) => plainUnit(unit) },
];

/** What holding a values file against the image came to: the answer, what could not be compared, then every difference. */
export function ValuesCheckResult({ fileName, check }: { fileName: string; check: ValuesCheck }) {
  const { differing, compared, equal, notInFile, problems, notes } = check;
  const leftOut = leftOutOf(check);
  const isClear = compared > 0 && equal === compared && leftOut.length === 0 && problems.length === 0;
  return (
    <div className="flex flex-col gap-3">
      <Notice live tone={isClear ? "plain" : "caution"} title={checkSentence(check)}>
        <span className="break-all">{fileName}</span>
        {compared > equal && `: ${numberText(equal)} of ${counted(compared, "name")} agree`}
      </Notice>
      {leftOut.map((one) => (
        <LeftOutNames key={one.sentence} {...one} />
      ))}
      {problems.length > 0 && (
        <Disclosure open summary="Places where the file is in doubt" aside={numberText(problems.length)}>
          <Sentences of={problems} />
        </Disclosure>
      )}
      {differing.count > 0 && (
        <Table
          caption="Values that differ. Cells are counted from 0."
          showCaption
          dense
          scroll="tall"
          columns={COLUMNS}
          rows={differing.first}
          rowKey={(_, index) => String(index)}
        />
      )}
      <FirstListed count={differing.count} listed={differing.first.length} />
      {notInFile.count > 0 && (
        <p className="text-15 text-ink2">
          {counted(notInFile.count, "name")} of the image {notInFile.count === 1 ? "is" : "are"} not in the
          file.
        </p>
      )}
      {notes.length > 0 && <Sentences of={notes} />}
    </div>
  );
}

function LeftOutNames({ sentence, listed }: LeftOut) {
  const { count, first } = listed;
  const hasReasons = first.some(({ why }) => why !== "");
  return (
    <Disclosure summary={sentence} aside={counted(count, "name")}>
      <Table
        caption={sentence}
        dense
        scroll="short"
        rows={first}
        rowKey={(_, index) => String(index)}
        columns={[
          { key: "name", header: "Name", rowHeader: true, className: "break-all", cell: (row) => row.name },
          ...(hasReasons ? [{ key: "why", header: "Why", cell: (row: { why: string }) => row.why }] : []),
        ]}
      />
      <FirstListed count={count} listed={first.length} />
    </Disclosure>
  );
}

function Sentences({ of }: { of: readonly string[] }) {
  return (
    <ul className="flex max-w-prose flex-col gap-1 text-15">
      {of.map((sentence, index) => (
        // biome-ignore lint/suspicious/noArrayIndexKey: a file may earn the same sentence twice, and the list never moves
        <li key={index}>{sentence}</li>
      ))}
    </ul>
  );
}
