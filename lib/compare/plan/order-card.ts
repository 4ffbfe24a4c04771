import type { Leg } from "@/lib/measure/types";

export type Side = "A" | "B";

/** Most twins a side that fit a road day (common practice, no source); more is not one plan but several days. */
export const MOST_TWINS = 12;

/** One drive of the order card. */
export interface OrderPlace {
  /** Place in the driven order, first = 1. */
  place: number;
  /** Twin it belongs to, first = 1. */
  twin: number;
  side: Side;
  leg: Leg;
  /** Whether the side's image is written into the car before this drive, followed by one settling drive. */
  writeBefore: boolean;
}

export interface OrderCard {
  places: OrderPlace[];
  runs: number;
  /** The first write counts too; it falls away when side A is in the car already. */
  writes: number;
  /** One after each write, not recorded as a run: control units relearn after a write (common practice, no source). */
  settlingDrives: number;
  /**
   * Mean place of side B less mean place of side A. Times a drift per run it is the bias that a plain mean of each
   * side would carry; 0 = linear drift cancels. Only an odd number of twins leaves some.
   */
  driftLeakRuns: number;
}

const other = (side: Side): Side => (side === "A" ? "B" : "A");

/**
 * The sides of the twins in the order driven: pairs after the Thue–Morse sequence (A-B, B-A, B-A, A-B …), which cancels
 * linear drift at every even number of pairs; an odd last pair begins with the image in the car and so saves a write.
 */
function twinSides(twinsPerSide: number): Side[] {
  const sides: Side[] = [];
  for (let pair = 0; pair < twinsPerSide; pair++) {
    const isOddLast = twinsPerSide % 2 === 1 && pair === twinsPerSide - 1;
    const ones = pair.toString(2).replaceAll("0", "").length;
    const first: Side = isOddLast ? (sides.at(-1) ?? "A") : ones % 2 === 0 ? "A" : "B";
    sides.push(first, other(first));
  }
  return sides;
}

/**
 * What to drive, in twins: out and back on one image before any change of image, sides counterbalanced (A-B-B-A).
 * Sources of the order: drift cancellation of A-B-B-A and of the Thue–Morse order, see the leakage table in the Methods.
 * @param twinsPerSide whole number, 1 to 12
 * @param sameImage for a null test, whose two sides are one image: it is written once, not at each change of side
 * @throws RangeError outside that
 */
export function proposeOrder({
  twinsPerSide,
  sameImage = false,
}: {
  twinsPerSide: number;
  sameImage?: boolean;
}): OrderCard {
  if (!Number.isInteger(twinsPerSide) || twinsPerSide < 1 || twinsPerSide > MOST_TWINS)
    throw new RangeError(`twins a side must be a whole number from 1 to ${MOST_TWINS}, not ${twinsPerSide}`);
  const sides = twinSides(twinsPerSide);
  const places = sides.flatMap((side, index): OrderPlace[] => [
    {
      place: 2 * index + 1,
      twin: index + 1,
      side,
      leg: "out",
      writeBefore: index === 0 || (!sameImage && sides[index - 1] !== side),
    },
    { place: 2 * index + 2, twin: index + 1, side, leg: "back", writeBefore: false },
  ]);
  const meanPlace = (side: Side) => {
    const own = places.filter((place) => place.side === side);
    return own.reduce((sum, place) => sum + place.place, 0) / own.length;
  };
  const writes = places.filter((place) => place.writeBefore).length;
  return {
    places,
    runs: places.length,
    writes,
    settlingDrives: writes,
    driftLeakRuns: meanPlace("B") - meanPlace("A"),
  };
}

/**
 * The places to fill next: those of the card that no run has, in order, then further twins on the side that comes last on
 * the card, out and back.
 * @param taken places that have a run already
 * @param count how many are wanted
 */
export function freePlaces(
  card: OrderCard | null,
  taken: readonly number[],
  count: number,
): Pick<OrderPlace, "place" | "side" | "leg">[] {
  const isTaken = new Set(taken);
  const free: Pick<OrderPlace, "place" | "side" | "leg">[] = (card?.places ?? []).filter(
    ({ place }) => !isTaken.has(place),
  );
  const lastSide = card?.places.at(-1)?.side ?? "A";
  let place = Math.max(0, card?.places.length ?? 0, ...taken);
  while (free.length < count) {
    place += 1;
    free.push({ place, side: lastSide, leg: place % 2 === 1 ? "out" : "back" });
  }
  return free.slice(0, count);
}
