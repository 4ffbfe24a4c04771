import { describe, expect, it } from "vitest";
import { MOST_TWINS, proposeOrder } from "@/lib/compare/plan/order-card";
import { cardCost, USUAL_DRIVE } from "@/lib/compare/plan/plan-cost";
import {
  bandCritical,
  bandPlaces,
  type PlanBasis,
  placesSeen,
  pooledScatter,
  STARTING_PLACES,
  scatterInterval,
} from "@/lib/compare/plan/plan-scatter";
import { planPower, shownBy, twinsFor, twinsForInterval } from "@/lib/compare/plan/plan-twins";
import { tQuantile } from "@/lib/signal/distributions";
import { leastSquares } from "@/lib/signal/least-squares";
import { randomStream } from "@/lib/signal/random";

const BASIS: PlanBasis = {
  range: { sdPct: 0.5, df: 12 },
  point: { sdPct: 0.8, df: 12 },
  places: { count: 8, comparisons: 3 },
  smoothingPct: null,
};

describe("the power of a plan", () => {
  // Smallest detectable difference in standard deviations, two-sided 5 %, power 80 %, exact noncentral t by scipy.
  it.each([
    [3, 3.071],
    [4, 2.381],
    [5, 2.024],
    [6, 1.796],
    [8, 1.507],
    [12, 1.197],
  ])("is 80 %% at the published difference of %s runs a side", (n, deltaOverSd) => {
    const df = 2 * n - 2;
    expect(planPower(deltaOverSd * Math.sqrt(n / 2), df, tQuantile(0.975, df))).toBeCloseTo(0.8, 3);
  });

  it("is what simulated road days show: the planned difference is claimed in 80 of 100", () => {
    const trials = 3000;
    const { places } = proposeOrder({ twinsPerSide: 3 });
    const shown = shownBy(3, BASIS).rangePct ?? Number.NaN;
    const sd = Math.log1p(BASIS.range.sdPct / 100);
    const random = randomStream(20, 4);
    const matrix = Float64Array.from(
      places.flatMap(({ side, leg, place }) => [
        1,
        side === "B" ? 1 : 0,
        leg === "out" ? 0.5 : -0.5,
        place - 6.5,
      ]),
    );
    let claimed = 0;
    for (let trial = 0; trial < trials; trial++) {
      const y = Float64Array.from(
        places,
        ({ side, leg, place }) =>
          (side === "B" ? Math.log1p(shown / 100) : 0) +
          (leg === "out" ? 0.004 : 0) -
          0.0007 * place +
          sd * random.nextNormal(),
      );
      const fit = leastSquares(matrix, y, 4);
      if (Math.abs(fit.coefficients[1] / fit.standardErrors[1]) > tQuantile(0.975, fit.df)) claimed++;
    }
    // Three standard errors of the simulation.
    expect(Math.abs(claimed / trials - 0.8)).toBeLessThan(3 * Math.sqrt((0.8 * 0.2) / trials));
  });
});

describe("twins a side", () => {
  it("more of them show less, and the whole curve asks for more than a range", () => {
    const rows = Array.from({ length: MOST_TWINS - 1 }, (_, i) => shownBy(i + 2, BASIS));
    for (const [i, row] of rows.entries()) {
      expect(row.curvePct).toBeGreaterThan(row.rangePct ?? Number.NaN);
      const before = rows[i - 1];
      if (before) expect(row.rangePct).toBeLessThan(before.rangePct ?? Number.NaN);
    }
    expect(shownBy(1, BASIS)).toEqual({ twins: 1, rangePct: null, curvePct: null });
  });

  it("must show a difference at one engine speed past what the band allows for smoothing, and over a range not", () => {
    const [plain, smoothed] = [null, 0.5].map((smoothingPct) => shownBy(4, { ...BASIS, smoothingPct }));
    // Ratios multiply: the allowance comes on top of what scatter asks for.
    expect(1 + (smoothed.curvePct ?? 0) / 100).toBeCloseTo(1.005 * (1 + (plain.curvePct ?? 0) / 100), 12);
    expect(smoothed.rangePct).toBe(plain.rangePct);
  });

  it("is the fewest that show what is wanted, and none where a day can't", () => {
    const { range, curve } = twinsFor(1, BASIS);
    for (const [twins, key] of [
      [range, "rangePct"],
      [curve, "curvePct"],
    ] as const) {
      expect(shownBy(twins ?? 0, BASIS)[key]).toBeLessThanOrEqual(1);
      expect(shownBy((twins ?? 0) - 1, BASIS)[key] ?? 99).toBeGreaterThan(1);
    }
    expect(twinsFor(0.01, BASIS)).toEqual({ range: null, curve: null });
    expect(() => twinsFor(0, BASIS)).toThrow(RangeError);
  });

  it("is told with what the scatter's own interval makes of it, and not for a starting value", () => {
    const between = twinsForInterval(1, BASIS);
    const { range } = twinsFor(1, BASIS);
    expect(between?.fewest.range).toBeLessThanOrEqual(range ?? 0);
    expect(between?.most.range).toBeGreaterThanOrEqual(range ?? 99);
    expect(twinsForInterval(1, { ...BASIS, range: { sdPct: 0.8, df: null } })).toBeNull();
  });
});

describe("what a plan rests on", () => {
  it("pools variances with their degrees of freedom (by hand: √((4·1 + 8·4)/12))", () => {
    const pooled = pooledScatter([
      { sdPct: 1, df: 4 },
      { sdPct: 2, df: 8 },
      { sdPct: null, df: 3 },
      { sdPct: 9, df: 0 },
    ]);
    expect(pooled?.sdPct).toBeCloseTo(Math.sqrt(3), 12);
    expect(pooled?.df).toBe(12);
    expect(pooledScatter([])).toBeNull();
  });

  it("says how well a standard deviation is known (chi-square 4.404 and 23.337 of NIST's table)", () => {
    const interval = scatterInterval({ sdPct: 1, df: 12 });
    expect(interval?.lowPct).toBeCloseTo(Math.sqrt(12 / 23.337), 4);
    expect(interval?.highPct).toBeCloseTo(Math.sqrt(12 / 4.404), 4);
    expect(scatterInterval({ sdPct: 1, df: null })).toBeNull();
  });

  it("takes the width of past bands over to another number of runs (Šidák, ten places: 2.799625)", () => {
    expect(bandCritical(10, 1e7)).toBeCloseTo(2.799625, 4);
    for (const [criticalValue, df] of [
      [3.55, 12],
      [4.85, 4],
    ])
      expect(bandCritical(bandPlaces({ criticalValue, df }), df)).toBeCloseTo(criticalValue, 8);
    expect(bandPlaces({ criticalValue: 1, df: 12 })).toBe(1);
    expect(placesSeen([])).toEqual({ count: STARTING_PLACES, comparisons: 0 });
    const [few, many] = [
      { criticalValue: 3, df: 12 },
      { criticalValue: 4, df: 12 },
    ];
    expect(placesSeen([many, few, few]).count).toBeCloseTo(bandPlaces(few), 10);
    expect(placesSeen([many, few]).count).toBeCloseTo((bandPlaces(few) + bandPlaces(many)) / 2, 10);
  });
});

describe("the cost of a card", () => {
  it("counts settling drives out and back (by hand for two twins a side)", () => {
    const card = proposeOrder({ twinsPerSide: 2 });
    // A | B B | A: three writes; 8 legs and 3 · 2 of settling, 14 in all.
    expect(cardCost(card, { ...USUAL_DRIVE, stripM: 1500 })).toEqual({
      runs: 8,
      writes: 3,
      settlingDrives: 3,
      metres: 21_000,
      minutes: 14 * 3 + 3 * 8,
      fuelL: 21 * 0.35,
    });
  });

  it("has one write where both letters are one image", () => {
    const card = proposeOrder({ twinsPerSide: 3, sameImage: true });
    expect(card.writes).toBe(1);
    expect(card.places.map((place) => place.side)).toEqual(
      proposeOrder({ twinsPerSide: 3 }).places.map((place) => place.side),
    );
  });
});
