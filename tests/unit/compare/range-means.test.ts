import { describe, expect, it } from "vitest";
import { type RunDesign, runDesign } from "@/lib/compare/band/run-design";
import { compareChannels, type LoadedPull } from "@/lib/compare/compare-channels";
import { defaultRanges, rangeMeans } from "@/lib/compare/range-means";
import { randomStream } from "@/lib/signal/random";
import { channelBetween, fullLoad } from "../gates/full-load-sample";

const RPM = Array.from({ length: 61 }, (_, k) => 2000 + 50 * k);
const SETTINGS = { a: "A", b: "B", level: 0.95 };

/** Pulls without noise but for their level; B has 4 % more from 3000 to 4000 per minute. */
function pulls(order: string, seed: number, sigma = 0.004) {
  const random = randomStream(seed, 5);
  return [...order].map((side, i) => {
    const level = 1 + sigma * random.nextNormal();
    return {
      ...{ id: `r${i + 1}`, side, leg: i % 2 === 0 ? ("out" as const) : ("back" as const) },
      ...{ order: i + 1, roadDay: null },
      engineNm: RPM.map(
        (n): number | null => 300 * level * (side === "B" && n >= 3000 && n <= 4000 ? 1.04 : 1),
      ),
    };
  });
}

const designOf = (runs: ReturnType<typeof pulls>) => runDesign(runs, "B") as RunDesign;

describe("Mean difference over a range", () => {
  it("averages the difference: 4 % over a third of the points is ln 1.04 times their share", () => {
    const runs = pulls("ABBABAAB", 1, 0);
    const [whole, inside, outside] = rangeMeans(
      RPM,
      runs,
      [
        [2000, 5000],
        [3000, 4000],
        [4050, 5000],
      ],
      designOf(runs),
      SETTINGS,
    );
    expect(whole.pct).toBeCloseTo(100 * Math.expm1((Math.log(1.04) * 21) / 61), 6);
    expect(inside.pct).toBeCloseTo(4, 6);
    expect(outside.pct).toBeCloseTo(0, 6);
    expect([whole.n_a, whole.n_b]).toEqual([4, 4]);
  });

  it("holds the truth in at least 180 of 200 draws (nominal 95 %: chance of fewer 0.2 %) and could show more than its half-width", () => {
    let held = 0;
    for (let seed = 1; seed <= 200; seed++) {
      const runs = pulls("ABBABAABABBA", seed);
      const [mean] = rangeMeans(RPM, runs, [[3000, 4000]], designOf(runs), SETTINGS);
      held += (mean.low_pct ?? 9) <= 4 && 4 <= (mean.high_pct ?? -9) ? 1 : 0;
      expect(mean.resolvable_pct).toBeGreaterThan(((mean.high_pct ?? 0) - (mean.low_pct ?? 0)) / 2);
    }
    expect(held).toBeGreaterThanOrEqual(180);
  });

  it("is not shifted by a masked stretch, and leaves out a run that covers less than 80 %", () => {
    const runs = pulls("ABBABAAB", 1, 0);
    const tilted = runs.map((run, r) => ({
      ...run,
      engineNm: run.engineNm.map((nm, k) =>
        nm === null || (r === 1 && RPM[k] < 2400) || (r === 2 && RPM[k] < 3000) ? null : nm * (1 - k / 200),
      ),
    }));
    const [mean] = rangeMeans(RPM, tilted, [[2000, 5000]], designOf(runs), SETTINGS);
    expect(mean.pct).toBeCloseTo(100 * Math.expm1((Math.log(1.04) * 21) / 61), 1);
    expect([mean.n_a, mean.n_b]).toEqual([4, 3]);
  });

  it("gives the plain difference without an interval where no model can be had", () => {
    const [mean] = rangeMeans(RPM, pulls("AB", 1, 0), [[3000, 4000]], null, SETTINGS);
    expect(mean.pct).toBeCloseTo(4, 6);
    expect([mean.low_pct, mean.high_pct, mean.resolvable_pct]).toEqual([null, null, null]);
  });

  it("looks at the whole range and its thirds by itself", () => {
    expect(defaultRanges(RPM)).toEqual([
      [2000, 5000],
      [2000, 3000],
      [3000, 4000],
      [4000, 5000],
    ]);
    expect(defaultRanges([2000])).toEqual([]);
  });
});

describe("Difference of an engine channel", () => {
  const GRID = [2000, 2200, 2400, 2600];
  const loaded = (order: string, lambdaOf: (side: string, run: number) => number): LoadedPull[] =>
    pulls(order, 1).map((run, i) => {
      const value = lambdaOf(run.side, i);
      const lambda = {
        ...channelBetween(value - 0.01, value + 0.01),
        values: GRID.map((_, k) => value + 0.001 * k),
      };
      return { ...run, fullLoad: fullLoad({ rpm: GRID, channels: { lambda } }) };
    });
  const settings = { ...SETTINGS, engine: "spark ignition" as const };

  it("finds what B is leaner by, in lambda, with a band and the worst value's own ±", () => {
    const random = randomStream(4, 4);
    const found = compareChannels(
      loaded("ABBABAABABBA", (side) => 0.86 + (side === "B" ? 0.02 : 0) + 0.001 * random.nextNormal()),
      settings,
    ).lambda;
    expect(found?.difference[0]).toBeCloseTo(0.02, 2);
    expect(found?.simultaneous).toBe(true);
    expect(found?.low[0]).toBeGreaterThan(0.01);
    expect(found?.high[0]).toBeLessThan(0.03);
    expect(found?.worst.of).toBe("max");
    expect(found?.worst.mean_difference).toBeCloseTo(0.02, 2);
    expect(found?.worst.half_width).toBeGreaterThan(0);
    expect(found?.method).toMatch(/Bonferroni t/);
  });

  it("of a diesel's lambda the lowest is the worst", () => {
    const found = compareChannels(
      loaded("ABBA", () => 1.3),
      { ...settings, engine: "compression ignition" },
    ).lambda;
    expect(found?.worst.of).toBe("min");
    expect(found?.simultaneous).toBe(false);
    expect(found?.low).toEqual([null, null, null, null]);
  });

  it("claims no band for a channel whose runs do not scatter at all", () => {
    const found = compareChannels(
      loaded("ABBABAAB", () => 0.86),
      settings,
    ).lambda;
    expect(found?.simultaneous).toBe(false);
    expect(found?.method).toMatch(/does not scatter/);
  });

  it("says that the sides share no engine speed, not that nothing scatters", () => {
    const runs = loaded("ABBABAAB", () => 0.86).map((run) =>
      run.side === "B" ? { ...run, fullLoad: { ...run.fullLoad, rpm: GRID.map((rpm) => rpm + 2000) } } : run,
    );
    const found = compareChannels(runs, settings).lambda;
    expect(found).toMatchObject({ rpm: [], difference: [], simultaneous: false });
    expect(found?.method).toMatch(/^Nothing to compare: no engine speed carries this channel/);
  });

  it("leaves out what one side does not carry", () => {
    const runs = loaded("ABBA", () => 0.86).map((run) =>
      run.side === "B" ? { ...run, fullLoad: fullLoad({ rpm: GRID, channels: {} }) } : run,
    );
    expect(compareChannels(runs, settings)).toEqual({});
  });
});
