import type { Route } from "next";
import Link from "next/link";
import type { ReactNode } from "react";
import { counted, numberText } from "@/components/ui/data/number-text";
import { Table } from "@/components/ui/data/table";
import { Disclosure } from "@/components/ui/layout/disclosure";
import type { RevisionChangesView } from "@/lib/services/change-sets/schema";

export interface CoverageNoteProps {
  coverage: RevisionChangesView["coverage"];
  linksHref: Route;
  /** A button that has it worked out, or again. */
  ask: ReactNode;
}

/** Where the runs went, in a sentence, and for which changes it can't be told and why. */
export function CoverageNote({ coverage, linksHref, ask }: CoverageNoteProps) {
  const { state, result } = coverage;
  if (state === "no_description") return null;
  return (
    <div className="flex flex-col text-15">
      <p className="max-w-prose">
        {coverageSentence(coverage)}{" "}
        <Link href={linksHref} className="link">
          Axis links
        </Link>
      </p>
      {(state === "not_asked" || state === "failed") && ask}
      {result && result.notTold.length > 0 && (
        <Disclosure summary="Where coverage can't be told" aside={counted(result.notTold.length, "change")}>
          <Table
            caption="Changes whose coverage can't be told"
            dense
            scroll="short"
            rows={result.notTold}
            rowKey={(row) => row.name}
            columns={[
              {
                key: "name",
                header: "Name",
                rowHeader: true,
                className: "break-all",
                cell: (row) => row.name,
              },
              { key: "cells", header: "Changed", numeric: true, cell: (row) => numberText(row.changedCells) },
              { key: "reason", header: "Why", cell: (row) => row.reason },
            ]}
          />
        </Disclosure>
      )}
    </div>
  );
}

function coverageSentence({ state, failure, result, moved }: RevisionChangesView["coverage"]): string {
  if (state === "no_runs") return "No usable run yet, so it can't be told where runs went.";
  if (state === "not_asked") return "Where the runs went has not been worked out for what counts now.";
  if (state === "failed") return failure ?? "Where the runs went could not be worked out.";
  if (!result) return "Where the runs went is being worked out.";
  const missing = result.changedCells - result.changedVisited;
  const runs = counted(result.runs.length, "usable run");
  const told =
    result.changedCells === 0
      ? `Coverage can't be told for any change, from ${runs}.`
      : `${numberText(missing)} of ${counted(result.changedCells, "changed cell")} not shown to be visited, over ${runs}.`;
  return moved || state === "computing"
    ? `${told} Runs or links moved since: it is being worked out anew.`
    : told;
}
