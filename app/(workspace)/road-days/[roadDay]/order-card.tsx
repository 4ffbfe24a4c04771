import type { ChosenCard } from "@/app/(workspace)/road-days/[roadDay]/choose-card";
import { OrderCardForm } from "@/components/features/road-days/order-card-form";
import { type OrderCardRow, OrderCardTable } from "@/components/features/road-days/order-card-table";
import { numberText } from "@/components/ui/data/number-text";
import { Card } from "@/components/ui/layout/card";
import { EmptyState } from "@/components/ui/status/empty-state";
import { freePlaces } from "@/lib/compare/order-card";
import type { RoadDayView } from "@/lib/services/road-days/get";

type Props = { view: RoadDayView; chosen: ChosenCard | null };

function rowsOf({ revisions, runs }: RoadDayView, { a, b, card }: ChosenCard): OrderCardRow[] {
  const driven = runs.runs.filter((run) => !run.setAside);
  const [next] = freePlaces(
    card,
    driven.map((run) => run.driveOrder),
    1,
  );
  return card.places.map((place) => {
    const wanted = revisions.find((revision) => revision.id === (place.side === "A" ? a : b));
    const run = driven.find((candidate) => candidate.driveOrder === place.place);
    const asPlanned = run?.revisionId === wanted?.id && run?.leg === place.leg;
    return {
      ...place,
      revision: `R${wanted?.number ?? "?"}`,
      run: run ? { number: run.number, other: asPlanned ? null : `R${run.revisionNumber} ${run.leg}` } : null,
      isNext: place.place === next?.place,
    };
  });
}

function countsOf({ card }: ChosenCard, stripLengthM: number | null): string {
  const metres =
    stripLengthM === null
      ? ""
      : `, ${numberText((card.runs + card.settlingDrives) * stripLengthM)} m over the strip`;
  return `${card.runs} runs, ${card.writes} writes and ${card.settlingDrives} settling drives${metres}. The first write falls away when side A is in the car already.`;
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
  const leak = chosen.card.driftLeakRuns;
  return (
    <Card
      title="Order card"
      id="order-card"
      description="Out and back on one image before any change of image; sides counterbalanced, so that steady drift cancels."
    >
      <div className="flex flex-col gap-4">
        <OrderCardForm revisions={view.revisions} a={chosen.a} b={chosen.b} twins={chosen.twins} />
        <p className="text-15">{countsOf(chosen, view.roadDay.stripLengthM)}</p>
        {leak !== 0 && (
          <p className="text-15 text-thin">
            With an odd number of twins a side some drift is left in plain means:{" "}
            {numberText(Math.abs(leak), { decimals: 2 })} runs' worth. An even number leaves none.
          </p>
        )}
        <OrderCardTable rows={rowsOf(view, chosen)} />
        <p className="text-13 text-ink2">
          One settling drive after each write is common practice; no source was found for it. It is not
          recorded as a run.
        </p>
      </div>
    </Card>
  );
}
