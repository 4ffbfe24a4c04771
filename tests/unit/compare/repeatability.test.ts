import { describe, expect, it } from "vitest";
import { proposeOrder } from "@/lib/compare/plan/order-card";
import { type RepeatedPull, repeatability } from "@/lib/compare/plan/repeatability";
import { randomStream } from "@/lib/signal/random";

const RPM = Array.from({ length: 21 }, (_, k) => 2000 + 200 * k);

/** A road day in the order of the card: side B gains 3 %, the way back 1 %, each run loses 0.1 %, and what is given besides. */
function roadDay(twinsPerSide: number, extra: (run: number, k: number) => number, day = "d"): RepeatedPull[] {
  return proposeOrder({ twinsPerSide }).places.map(({ place, side, leg }, run) => ({
    id: `${day}${place}`,
    side,
    leg,
    order: place,
    roadDay: day,
    engineNm: RPM.map(
      (rpm, k) =>
        (250 + rpm / 100) *
        Math.exp((side === "B" ? 0.03 : 0) + (leg === "back" ? 0.01 : 0) - 0.001 * place + extra(run, k)),
    ),
  }));
}

describe("repeatability", () => {
  it("is nothing where only side, leg and drift differ", () => {
    const [result] = repeatability(
      RPM,
      roadDay(2, () => 0),
    );
    expect(result).toMatchObject({ road_day: "d", runs: 8, df: 4 });
    expect(result.sd_point_pct).toBeLessThan(1e-9);
    expect(result.sd_range_pct).toBeLessThan(1e-9);
    // The closure keeps the leg: 1 % less 0.1 % of drift, in logarithms.
    expect(result.closure.twins).toBe(4);
    expect(result.closure.largest_pct).toBeCloseTo(100 * Math.expm1(0.009), 6);
    expect(result.closure.rms_pct).toBeCloseTo(100 * Math.expm1(0.009), 6);
  });

  it("finds the scatter that was put in: levels at 0.5 %, and white noise that a range averages out", () => {
    const random = randomStream(7, 3);
    const days = 200;
    let point = 0;
    let range = 0;
    for (let day = 0; day < days; day++) {
      const levels = Array.from({ length: 12 }, () => 0.005 * random.nextNormal());
      const [result] = repeatability(
        RPM,
        roadDay(3, (run) => levels[run] + 0.004 * random.nextNormal()),
      );
      point += Math.log1p((result.sd_point_pct ?? 0) / 100) ** 2 / days;
      range += Math.log1p((result.sd_range_pct ?? 0) / 100) ** 2 / days;
    }
    // Closed form: variances add; over 5 points of a range the white part is a fifth. 200 days of 8 df: 1.8 % standard error.
    expect(Math.abs(Math.sqrt(point) / Math.hypot(0.005, 0.004) - 1)).toBeLessThan(0.06);
    expect(Math.abs(Math.sqrt(range) / Math.hypot(0.005, 0.004 / Math.sqrt(5)) - 1)).toBeLessThan(0.06);
  });

  it("keeps road days apart", () => {
    const random = randomStream(8, 3);
    const noisy = Array.from({ length: 8 }, () => 0.02 * random.nextNormal());
    const results = repeatability(RPM, [
      ...roadDay(2, () => 0, "quiet"),
      ...roadDay(2, (run) => noisy[run], "gusty"),
    ]);
    expect(results.map((result) => result.road_day)).toEqual(["quiet", "gusty"]);
    expect(results[0].sd_point_pct).toBeLessThan(1e-9);
    expect(results[1].sd_point_pct).toBeGreaterThan(0.3);
  });

  it("leaves a run out only where it has a gap", () => {
    const pulls = roadDay(2, () => 0).map((pull, run) =>
      run === 3 ? { ...pull, engineNm: pull.engineNm.map((nm, k) => (k < 5 ? null : nm)) } : pull,
    );
    const [result] = repeatability(RPM, pulls);
    expect(result).toMatchObject({ runs: 8, df: 4 });
    expect(result.sd_point_pct).toBeLessThan(1e-9);
  });

  it("says nothing of a day with no more runs than unknowns, or with none", () => {
    const [result] = repeatability(RPM, roadDay(1, () => 0).slice(0, 3));
    expect(result).toMatchObject({ runs: 3, df: 0, sd_point_pct: null, sd_range_pct: null });
    expect(repeatability(RPM, [])).toEqual([]);
  });
});
