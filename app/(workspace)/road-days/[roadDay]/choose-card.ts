import { MOST_TWINS, type OrderCard, proposeOrder } from "@/lib/compare/plan/order-card";
import type { RoadDayView } from "@/lib/services/road-days/get";

/** What an order card is made for. */
export interface ChosenCard {
  a: string;
  b: string;
  /** How each side is called, e.g. "R14" and "R15"; "R14" and "R14′" on a null test. */
  names: { A: string; B: string };
  isNullTest: boolean;
  twins: number;
  card: OrderCard;
}

/** Closed twins a side that the starting gate plan asks for. */
const TWINS_USUAL = 3;

type View = Pick<RoadDayView, "revisions" | "twinsAsked" | "runs"> & {
  roadDay: Pick<RoadDayView["roadDay"], "nullTestRevisionId" | "nullTestRewrites" | "plannedTwins">;
};

/** Both sides of the card with their names: of the page's address, else the standing revision against the one driven or validated. */
function chooseSides(
  { roadDay, revisions, runs }: View,
  query: Record<string, string | string[] | undefined>,
): Pick<ChosenCard, "a" | "b" | "names"> | null {
  const numbers = new Map(revisions.map(({ id, number }) => [id, number]));
  const only = roadDay.nullTestRevisionId;
  if (only !== null) {
    const number = numbers.get(only) ?? runs.runs.find((run) => run.revisionId === only)?.revisionNumber;
    return { a: only, b: only, names: { A: `R${number ?? "?"}`, B: `R${number ?? "?"}′` } };
  }
  const asked = (name: "a" | "b") => {
    const value = query[name];
    return typeof value === "string" && numbers.has(value) ? value : undefined;
  };
  const driven = runs.runs.filter((run) => !run.setAside && numbers.has(run.revisionId));
  const standing = revisions.find((revision) => revision.stands)?.id;
  const a = asked("a") ?? standing ?? driven[0]?.revisionId ?? revisions.at(-1)?.id;
  const b =
    asked("b") ??
    driven.find((run) => run.revisionId !== a)?.revisionId ??
    revisions.find((revision) => revision.id !== a)?.id;
  if (!a || !b || a === b) return null;
  return { a, b, names: { A: `R${numbers.get(a) ?? "?"}`, B: `R${numbers.get(b) ?? "?"}` } };
}

/**
 * Sides and size of the card: as many twins as the page's address says, else as the day was planned with, else as the gate
 * plan asks for, rounded up to an even number. Null while there are not two sides to compare.
 */
export function chooseCard(
  view: View,
  query: Record<string, string | string[] | undefined>,
): ChosenCard | null {
  const { roadDay, twinsAsked, runs } = view;
  const sides = chooseSides(view, query);
  if (!sides) return null;
  const least = twinsAsked ?? TWINS_USUAL;
  const driven = runs.runs.filter((run) => !run.setAside).length;
  // An even number a side lets steady drift cancel; a day that holds more runs already shows them all.
  const usual = roadDay.plannedTwins ?? Math.max(least + (least % 2), Math.ceil(driven / 4));
  const wanted = Number(query.twins ?? usual);
  const twins = Number.isInteger(wanted) && wanted >= 1 && wanted <= MOST_TWINS ? wanted : usual;
  const isNullTest = roadDay.nullTestRevisionId !== null;
  const sameImage = isNullTest && !roadDay.nullTestRewrites;
  return { ...sides, isNullTest, twins, card: proposeOrder({ twinsPerSide: twins, sameImage }) };
}
