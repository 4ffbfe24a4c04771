import type { Route } from "next";
import Link from "next/link";
import { numberText } from "@/components/ui/data/number-text";
import { Quantity } from "@/components/ui/data/quantity";
import { Table } from "@/components/ui/data/table";
import { Card } from "@/components/ui/layout/card";
import { STATE_WORD } from "@/components/ui/status/state-mark";
import type { MovedValue, ResultMove } from "@/lib/compare/result-moves";
import type { DeltaRegion } from "@/lib/measure/types";
import type { ComparisonMoves } from "@/lib/services/analysis/schema";
import { FACTOR_WORDS } from "@/lib/services/comparisons/schema";

function Value({ move, of }: { move: ResultMove; of: MovedValue }) {
  const { value, halfWidth } = of;
  return <Quantity value={value} halfWidth={halfWidth} unit="" signed={move.isDifference} orNotStated />;
}

/** Losses before gains. */
const regionsText = (regions: readonly DeltaRegion[]) =>
  regions.length === 0
    ? "nothing shown"
    : (["loss", "gain"] as const)
        .flatMap((first) => regions.filter(({ verdict }) => verdict === first))
        .map(
          ({ verdict, from_rpm, to_rpm }) =>
            `${verdict} ${numberText(from_rpm)}–${numberText(to_rpm)} per minute`,
        )
        .join(", ");

/** Verdict regions, runs and gates, each as "before → now" or as unchanged. */
function Words({ moves, gates }: Pick<ComparisonMoves, "moves" | "gates">) {
  if (!moves) return null;
  const before = regionsText(moves.regions.before);
  const after = regionsText(moves.regions.after);
  return (
    <ul className="flex list-disc flex-col gap-1 px-4 py-3 pl-9 text-15 md:px-5 md:pl-10">
      <li>Verdict by engine speed: {before === after ? `${after}, as before` : `${before} → ${after}`}.</li>
      {moves.runs.map((run) => (
        <li key={run.id}>
          Run {run.id} {run.usableAfter ? "was refused and counts now" : "counted and is refused now"}.
        </li>
      ))}
      {gates?.length === 0 && <li>Every gate of the newest plan is as before.</li>}
      {gates?.map((gate) => (
        <li key={gate.id}>
          Gate “{gate.title}”: {STATE_WORD[gate.before].toLowerCase()} →{" "}
          {STATE_WORD[gate.after].toLowerCase()}.
        </li>
      ))}
    </ul>
  );
}

const WAITS: Record<Exclude<ComparisonMoves["state"], "told">, string> = {
  "being computed": "Not computed under the new version yet; the worker does it by itself.",
  "other input":
    "Runs, settings or the vehicle sheet have changed since, so what the version alone moves can't be told.",
};

/** What the new version moves in one comparison. */
export function ComparisonMovesCard({
  comparison,
  version,
}: {
  comparison: ComparisonMoves;
  version: string;
}) {
  const { labels, settings, state, moves, gates, oldVersion } = comparison;
  return (
    <Card
      title={
        <Link href={`/comparisons/${comparison.comparisonId}` as Route} className="link">
          {labels.a} against {labels.b}
        </Link>
      }
      description={`${comparison.isNullTest ? "Null test. " : ""}${FACTOR_WORDS[settings.factor]}, grid ${settings.rpm_step} per minute. Computed with ${oldVersion} before.`}
      flush
    >
      {state !== "told" || !moves ? (
        <p className="px-4 pb-4 text-15 text-ink2 md:px-5">
          {WAITS[state === "told" ? "being computed" : state]}
        </p>
      ) : (
        <>
          <Words moves={moves} gates={gates} />
          <Table
            caption={`Figures of ${labels.a} against ${labels.b} under both versions`}
            dense
            rows={moves.figures}
            rowKey={(move) => move.what}
            columns={[
              {
                key: "what",
                header: "Quantity",
                rowHeader: true,
                cell: (move) => `${move.what}, ${move.unit}`,
              },
              {
                key: "before",
                header: oldVersion,
                numeric: true,
                cell: (move) => <Value move={move} of={move.before} />,
              },
              {
                key: "after",
                header: version,
                numeric: true,
                cell: (move) => <Value move={move} of={move.after} />,
              },
              {
                key: "moved",
                header: "Moved by",
                numeric: true,
                cell: ({ before, after }) => (
                  <Quantity
                    value={before.value === null || after.value === null ? null : after.value - before.value}
                    unit=""
                    decimals={2}
                    signed
                  />
                ),
              },
            ]}
          />
        </>
      )}
    </Card>
  );
}
