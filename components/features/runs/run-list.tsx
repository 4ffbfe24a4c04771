import Link from "next/link";
import { ConsequenceMark, VerdictMark } from "@/components/features/runs/verdict-mark";
import { Quantity } from "@/components/ui/data/quantity";
import { Tag } from "@/components/ui/data/tag";
import type { RunLine } from "@/lib/services/runs/schema";

/** Facts of a run in one line, e.g. "out, pull, gear 3". */
function driveWords({ leg, kind, gear }: RunLine): string {
  return [leg, kind, gear === null ? null : `gear ${gear}`].filter(Boolean).join(", ");
}

function RunItem({ run }: { run: RunLine }) {
  return (
    <li className="grid grid-cols-[3.25rem_1fr] gap-x-3 gap-y-1 border-line border-t py-3 first:border-t-0">
      <span className="tabular text-20 text-ink2" title={`Place ${run.driveOrder} in the driven order`}>
        <span className="sr-only">Place </span>
        {run.driveOrder}
      </span>
      <div className="flex min-w-0 flex-col gap-1">
        <div className="flex flex-wrap items-center gap-x-3 gap-y-1">
          <Link href={`/runs/${run.id}`} className="link inline-flex min-h-6 items-center font-semibold">
            Run {run.number}
          </Link>
          <Tag>
            R{run.revisionNumber}
            {run.letter === "B" && "′"}
          </Tag>
          <span>{driveWords(run)}</span>
          <VerdictMark {...run} />
          {run.peakKw !== null && !run.setAside && (
            <span className="text-ink2">
              peak{" "}
              <Quantity
                value={run.peakKw}
                unit="kW"
                halfWidth={run.peakUncertaintyKw}
                decimals={1}
                orNotStated
              />
              , air of the day, this run alone
            </span>
          )}
        </div>
        {run.why.map((sentence) => (
          <p key={sentence} className="text-15">
            {sentence}
          </p>
        ))}
        {run.finding && (
          <p className="flex flex-wrap items-baseline gap-x-2 text-15">
            <ConsequenceMark consequence={run.finding.consequence} />
            <span>
              {run.finding.sentence}
              {run.notes > 1 && (
                <span className="text-ink2">
                  {" "}
                  And {run.notes - 1} more {run.notes === 2 ? "finding" : "findings"}.
                </span>
              )}
            </span>
          </p>
        )}
        {run.next && (
          <p className="text-15">
            <strong>Next: </strong>
            {run.next}
          </p>
        )}
        <p className="break-all text-13 text-ink2">
          {run.fileName} · {run.testerName}
        </p>
      </div>
    </li>
  );
}

/** Runs of a road day in the order driven, each with its verdict and the next step. */
export function RunList({ runs }: { runs: readonly RunLine[] }) {
  return (
    <ul aria-label="Runs of this road day" className="flex flex-col">
      {runs.map((run) => (
        <RunItem key={run.id} run={run} />
      ))}
    </ul>
  );
}
