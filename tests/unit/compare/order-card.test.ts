import fc from "fast-check";
import { describe, expect, test } from "vitest";
import { freePlaces, type OrderCard, proposeOrder } from "@/lib/compare/plan/order-card";

const twins = (card: OrderCard) =>
  card.places
    .filter((place) => place.leg === "out")
    .map((place) => place.side)
    .join("");

describe("proposeOrder", () => {
  // Leakage of linear drift, mean place of B less mean place of A: A-B-B-A and A-B-B-A-B-A-A-B give 0
  // (closed form, sum of places of each side equal).
  test.each([
    [1, "AB", 2, 2],
    [2, "ABBA", 3, 0],
    [3, "ABBAAB", 4, 2 / 3],
    [4, "ABBABAAB", 6, 0],
  ])("%i twins a side are driven as %s with %i writes", (twinsPerSide, order, writes, leak) => {
    const card = proposeOrder({ twinsPerSide });
    expect(twins(card)).toBe(order);
    expect(card.writes).toBe(writes);
    expect(card.settlingDrives).toBe(writes);
    expect(card.runs).toBe(4 * twinsPerSide);
    expect(card.driftLeakRuns).toBeCloseTo(leak, 12);
  });

  test("cancels quadratic drift too with four twins a side (Thue–Morse, Prouhet's theorem)", () => {
    const { places } = proposeOrder({ twinsPerSide: 4 });
    const sum = (side: "A" | "B", power: number) =>
      places
        .filter((place) => place.side === side && place.leg === "out")
        .reduce((total, place) => total + place.twin ** power, 0);
    expect(sum("A", 1)).toBe(sum("B", 1));
    expect(sum("A", 2)).toBe(sum("B", 2));
  });

  test("always: twins whole, sides equal, writes only where the image changes, little drift left", () => {
    fc.assert(
      fc.property(fc.integer({ min: 1, max: 12 }), (twinsPerSide) => {
        const { places, driftLeakRuns } = proposeOrder({ twinsPerSide });
        expect(places.map((place) => place.place)).toEqual(places.map((_, i) => i + 1));
        for (let i = 0; i < places.length; i += 2) {
          const [out, back] = [places[i], places[i + 1]];
          expect([out?.leg, back?.leg]).toEqual(["out", "back"]);
          expect(out?.side).toBe(back?.side);
          expect(out?.twin).toBe(back?.twin);
          expect(back?.writeBefore).toBe(false);
          expect(out?.writeBefore).toBe(i === 0 || places[i - 1]?.side !== out?.side);
        }
        expect(places.filter((place) => place.side === "A")).toHaveLength(2 * twinsPerSide);
        if (twinsPerSide % 2 === 0) expect(driftLeakRuns).toBe(0);
        else expect(Math.abs(driftLeakRuns)).toBeCloseTo(2 / twinsPerSide, 12);
      }),
    );
  });

  test.each([0, 1.5, 13, Number.NaN])("refuses %d twins", (twinsPerSide) => {
    expect(() => proposeOrder({ twinsPerSide })).toThrow(RangeError);
  });
});

describe("freePlaces", () => {
  const card = proposeOrder({ twinsPerSide: 1 });

  test("gives the card's places that no run has, in order", () => {
    expect(freePlaces(card, [1, 3], 2)).toMatchObject([
      { place: 2, side: "A", leg: "back" },
      { place: 4, side: "B", leg: "back" },
    ]);
  });

  test("goes on after the card and after what was driven, out and back", () => {
    expect(freePlaces(card, [1, 2, 3, 4, 6], 2)).toEqual([
      { place: 7, side: "B", leg: "out" },
      { place: 8, side: "B", leg: "back" },
    ]);
    expect(freePlaces(null, [], 1)).toEqual([{ place: 1, side: "A", leg: "out" }]);
  });
});
