import type { ChosenCard } from "@/app/(workspace)/road-days/[roadDay]/choose-card";
import { OrderCardForm } from "@/components/features/road-days/order-card-form";
import { type OrderCardRow, OrderCardTable } from "@/components/features/road-days/order-card-table";
import { numberText } from "@/components/ui/data/number-text";
import { Card } from "@/components/ui/layout/card";
import { Disclosure } from "@/components/ui/layout/disclosure";
import { EmptyState } from "@/components/ui/status/empty-state";
import { freePlaces } from "@/lib/compare/plan/order-card";
import { cardMetres } from "@/lib/compare/plan/plan-cost";
import type { RoadDayView } from "@/lib/services/road-days/get";

type Props = { view: RoadDayView; chosen: ChosenCard | null };

function rowsOf({ runs }: RoadDayView, { a, b, names, isNullTest, card }: ChosenCard): OrderCardRow[] {
  const driven = runs.runs.filter((run) => !run.setAside);
  const [next] = freePlaces(
    card,
    driven.map((run) => run.driveOrder),
    1,
  );
  return card.places.map((place) => {
    const wanted = place.side === "A" ? a : b;
    const run = driven.find((candidate) => candidate.driveOrder === place.place);
    const asPlanned =
      run?.revisionId === wanted && run.leg === place.leg && (!isNullTest || run.letter === place.side);
    const drivenAs = run && (isNullTest ? names[run.letter ?? "A"] : `R${run.revisionNumber}`);
    return {
      ...place,
      revision: names[place.side],
      run: run
        ? {
            number: run.number,
            verdict: run.verdict,
            other: asPlanned ? null : `${drivenAs} ${run.leg}`,
          }
        : null,
      isNext: place.place === next?.place,
    };
  });
}

function countsOf({ card }: ChosenCard, stripLengthM: number | null): string {
  const metres =
    stripLengthM === null ? "" : `, ${numberText(cardMetres(card, stripLengthM))} m over the strip`;
  const writes = card.writes === 1 ? "1 write" : `${card.writes} writes`;
  const settling = card.settlingDrives === 1 ? "1 settling drive" : `${card.settlingDrives} settling drives`;
  return `${card.runs} runs, ${writes} and ${settling}${metres}. The first write falls away when side A is in the car already.`;
}

/** The next drive in one line, large enough to read at arm's length. */
function Next({ rows }: { rows: readonly OrderCardRow[] }) {
  const next = rows.find((row) => row.isNext);
  const refused = rows.filter((row) => row.run?.verdict === "refused").map((row) => row.place);
  return (
    <div className="flex flex-col gap-1">
      <p className="font-head font-semibold text-20">
        {next ? (
          <>
            Next: place {next.place}, {next.writeBefore && `write ${next.revision} and settle, then `}
            {next.revision} {next.leg}
          </>
        ) : (
          "Every place of this card is driven."
        )}
      </p>
      {refused.length > 0 && (
        <p className="text-15 text-unmet">
          To be driven again once the refused run is set aside: {refused.length === 1 ? "place" : "places"}{" "}
          {refused.join(", ")}.
        </p>
      )}
    </div>
  );
}

/** What to drive next, and how far the day has come. */
export function OrderCardSection({ view, chosen }: Props) {
  if (!chosen) {
    return (
      <Card title="Order card" id="order-card">
        <EmptyState sentence="An order card needs two revisions that are validating, in review or standing: the reference and the candidate. Start validating a second one first." />
      </Card>
    );
  }
  const { names, isNullTest, twins } = chosen;
  const rows = rowsOf(view, chosen);
  const leak = chosen.card.driftLeakRuns;
  return (
    <Card
      title="Order card"
      id="order-card"
      description={
        isNullTest
          ? "One image under two letters, in the order that two images would have: what it then shows is scatter, nothing else."
          : "Out and back on one image before any change of image; sides counterbalanced, so that steady drift cancels."
      }
    >
      <div className="flex flex-col gap-4">
        <Next rows={rows} />
        <Disclosure
          summary={`${names.A} against ${names.B}, ${twins === 1 ? "1 twin" : `${twins} twins`} a side`}
        >
          <OrderCardForm
            sides={isNullTest ? null : { revisions: view.revisions, a: chosen.a, b: chosen.b }}
            twins={twins}
          />
        </Disclosure>
        <p className="text-15">{countsOf(chosen, view.roadDay.stripLengthM)}</p>
        {leak !== 0 && (
          <p className="text-15 text-thin">
            With an odd number of twins a side some drift is left in plain means:{" "}
            {numberText(Math.abs(leak), { decimals: 2 })} runs' worth. An even number leaves none.
          </p>
        )}
        <OrderCardTable rows={rows} />
        <p className="text-13 text-ink2">
          One settling drive after each write is common practice; no source was found for it. It is not
          recorded as a run.
        </p>
      </div>
    </Card>
  );
}
