import { describe, expect, it } from "vitest";
import { type ComparedPull, compareSides } from "@/lib/compare/compare-sides";
import { randomStream } from "@/lib/signal/random";

const RPM = Array.from({ length: 61 }, (_, k) => 2000 + 50 * k);
const SETTINGS = { a: "A", b: "B", basis: "day" as const, level: 0.95, seed: 1, resamples: 2000 };

/** Pulls of 300 N·m with 0.4 % run scatter; side B has `gainPct` more from 3000 to 4000 per minute. */
function pulls(order: string, legs: string, gainPct: number, seed: number): ComparedPull[] {
  const random = randomStream(seed);
  return [...order].map((side, i) => {
    const level = 1 + 0.004 * random.nextNormal();
    return {
      id: `r${i + 1}`,
      side,
      leg: legs[i] === "+" ? "out" : "back",
      order: i + 1,
      roadDay: null,
      engineNm: RPM.map(
        (n) =>
          300 *
          level *
          (1 + 0.0005 * random.nextNormal()) *
          (side === "B" && n >= 3000 && n <= 4000 ? 1 + gainPct / 100 : 1),
      ),
      peakKw: 150 * level + (side === "B" ? 2 : 0),
      peakNm: 300 * level,
    };
  });
}

describe("Comparison of two sides", () => {
  it("shows a gain of 5 % where it is and nowhere else", () => {
    const delta = compareSides(RPM, pulls("ABBABAABABBA", "+-+-+-+-+-+-", 5, 3), SETTINGS);
    expect(delta?.regions).toEqual([{ from_rpm: 3000, to_rpm: 4000, verdict: "gain" }]);
    expect(delta?.simultaneous).toBe(true);
    const at = RPM.indexOf(3500);
    expect(Math.abs((delta?.pct[at] ?? 0) - 5)).toBeLessThan(0.6);
    expect(delta?.low_pct[at]).toBeLessThan(delta?.pct[at] ?? 0);
    // What a campaign could have shown is more than its half-width.
    expect(delta?.resolvable_pct[at]).toBeGreaterThan(
      ((delta?.high_pct[at] ?? 0) - (delta?.low_pct[at] ?? 0)) / 2,
    );
    expect(delta?.peak_difference?.half_width_kw).toBeGreaterThan(0);
    expect(delta?.twins.filter((twin) => twin.side === "A")).toHaveLength(3);
  });

  it("could have shown only what gets past the allowance for smoothing too", () => {
    const runs = pulls("ABBABAABABBA", "+-+-+-+-+-+-", 5, 3);
    const plain = compareSides(RPM, runs, SETTINGS);
    const smoothed = compareSides(
      RPM,
      runs.map((run) => ({ ...run, kernelRpm: RPM.map(() => 200) })),
      SETTINGS,
    );
    const half = (of: typeof plain, k: number) =>
      (Math.log1p((of?.high_pct[k] ?? 0) / 100) - Math.log1p((of?.low_pct[k] ?? 0) / 100)) / 2;
    const shown = (of: typeof plain, k: number) => Math.log1p((of?.resolvable_pct[k] ?? 0) / 100);
    // At the edge of the change the band is wider by what smoothing may have rounded off; so is what it takes to be shown.
    const edge = RPM.indexOf(3000);
    expect(half(smoothed, edge)).toBeGreaterThan(1.2 * half(plain, edge));
    expect(plain?.band?.smoothing_pct).toBe(0);
    expect(smoothed?.band?.smoothing_pct).toBeGreaterThan(0);
    RPM.forEach((_, k) => {
      expect(shown(smoothed, k) - shown(plain, k)).toBeCloseTo(half(smoothed, k) - half(plain, k), 10);
      expect(shown(smoothed, k)).toBeGreaterThan(half(smoothed, k));
    });
  });

  it("gives the difference without a band below three runs a side, and says why", () => {
    const delta = compareSides(RPM, pulls("ABBA", "+-+-", 4, 1), SETTINGS);
    expect(delta?.simultaneous).toBe(false);
    expect(delta?.low_pct.every((x) => x === null)).toBe(true);
    expect(delta?.high_pct.every((x) => x === null)).toBe(true);
    expect(delta?.regions).toEqual([]);
    expect(delta?.method).toMatch(/at least 3 usable runs a side/);
    expect(delta?.pct.every((x) => x !== null)).toBe(true);
  });

  it("gives no band where one leg alone reaches, since drift of the wind can't be told there", () => {
    const runs = pulls("ABBABAABABBA", "+-+-+-+-+-+-", 0, 1).map((run) => ({
      ...run,
      engineNm: run.engineNm.map((nm, k) => (run.leg === "back" && RPM[k] > 4000 ? null : nm)),
    }));
    const delta = compareSides(RPM, runs, SETTINGS);
    expect(delta?.rpm).toEqual(RPM.filter((n) => n <= 4000));
    expect(delta?.simultaneous).toBe(true);
  });

  it("states the degrees of freedom of the curve, not of its end that few runs reach", () => {
    const reach = new Set(["r1", "r2", "r3", "r4", "r5", "r6"]);
    const runs = pulls("ABBABAABABBA", "+--++-+-+-+-", 0, 1).map((run) => ({
      ...run,
      engineNm: run.engineNm.map((nm, k) => (RPM[k] > 4800 && !reach.has(run.id) ? null : nm)),
    }));
    // Twelve runs less mean, side, leg and order; at the end six runs less the same.
    const delta = compareSides(RPM, runs, SETTINGS);
    expect(delta?.rpm.at(-1)).toBe(5000);
    expect(delta?.band?.df).toBe(8);
  });

  it("compares nothing where the sides share no engine speed", () => {
    const runs = pulls("ABBABAABABBA", "+-+-+-+-+-+-", 0, 1).map((run) => ({
      ...run,
      engineNm: run.engineNm.map((nm, k) => (RPM[k] > 3500 === (run.side === "A") ? nm : null)),
    }));
    const delta = compareSides(RPM, runs, SETTINGS);
    expect(delta).toMatchObject({ rpm: [], pct: [], simultaneous: false, regions: [] });
    expect(delta?.method).toMatch(/^No engine speed is covered/);
  });

  it("uses Bonferroni's t when a side has three runs", () => {
    const delta = compareSides(RPM, pulls("ABBABA", "+-+-+-", 0, 1), SETTINGS);
    expect(delta?.method).toMatch(/Bonferroni t.*a side has only three runs/);
    expect(delta?.regions).toEqual([]);
  });

  it("claims nothing in at least 19 of 20 campaigns without a change (20 draws: accepted up to 3, chance of more 1.6 %)", () => {
    let claims = 0;
    for (let seed = 1; seed <= 20; seed++) {
      claims += compareSides(RPM, pulls("ABBABAAB", "+-+-+-+-", 0, seed), SETTINGS)?.regions.length ? 1 : 0;
    }
    expect(claims).toBeLessThanOrEqual(3);
  });

  it("cuts the band to where both sides have three runs", () => {
    const short = pulls("ABBABAAB", "+-+-+-+-", 0, 2).map((pull) => ({
      ...pull,
      engineNm: pull.engineNm.map((nm, k) =>
        pull.side === "B" && pull.id !== "r2" && RPM[k] > 4500 ? null : nm,
      ),
    }));
    const delta = compareSides(RPM, short, SETTINGS);
    expect(delta?.rpm.at(-1)).toBe(4500);
  });

  it("is null when a side has no run, and has no difference of peaks where a side has none", () => {
    expect(compareSides(RPM, pulls("AAAA", "+-+-", 0, 1), SETTINGS)).toBeNull();
    const delta = compareSides(
      RPM,
      pulls("ABBABAAB", "+-+-+-+-", 0, 1).map((p) => ({ ...p, peakKw: null })),
      SETTINGS,
    );
    expect(delta?.peak_difference).toBeNull();
  });
});
