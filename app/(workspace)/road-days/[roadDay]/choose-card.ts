import { type OrderCard, proposeOrder } from "@/lib/compare/order-card";
import type { RoadDayView } from "@/lib/services/road-days/get";

/** What an order card is made for. */
export interface ChosenCard {
  a: string;
  b: string;
  twins: number;
  card: OrderCard;
}

const TWINS_MOST = 12;
/** Closed twins a side that the starting gate plan asks for. */
const TWINS_USUAL = 3;

/**
 * Sides and size of the card: from the page's address, else the standing revision against the one driven or validated,
 * and as many twins as the gate plan asks for, rounded up to an even number. Null while there are not two revisions to compare.
 */
export function chooseCard(
  { revisions, twinsAsked, runs }: Pick<RoadDayView, "revisions" | "twinsAsked" | "runs">,
  query: Record<string, string | string[] | undefined>,
): ChosenCard | null {
  const ids = new Set(revisions.map((revision) => revision.id));
  const asked = (name: "a" | "b") => {
    const value = query[name];
    return typeof value === "string" && ids.has(value) ? value : undefined;
  };
  const driven = runs.runs.filter((run) => !run.setAside && ids.has(run.revisionId));
  const standing = revisions.find((revision) => revision.stands)?.id;
  const a = asked("a") ?? standing ?? driven[0]?.revisionId ?? revisions.at(-1)?.id;
  const b =
    asked("b") ??
    driven.find((run) => run.revisionId !== a)?.revisionId ??
    revisions.find((revision) => revision.id !== a)?.id;
  if (!a || !b || a === b) return null;
  const least = twinsAsked ?? TWINS_USUAL;
  // An even number a side lets steady drift cancel; a day that holds more runs already shows them all.
  const usual = Math.max(least + (least % 2), Math.ceil(driven.length / 4));
  const wanted = Number(query.twins ?? usual);
  const twins = Number.isInteger(wanted) && wanted >= 1 && wanted <= TWINS_MOST ? wanted : usual;
  return { a, b, twins, card: proposeOrder({ twinsPerSide: twins }) };
}
