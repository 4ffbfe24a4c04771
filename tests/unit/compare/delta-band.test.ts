import { describe, expect, it } from "vitest";
import { deltaBand, upTo } from "@/lib/compare/band/delta-band";
import { type ComparedRun, runDesign } from "@/lib/compare/band/run-design";
import { verdictRegions } from "@/lib/compare/band/verdict-regions";
import { leastSquares } from "@/lib/signal/least-squares";
import { randomStream } from "@/lib/signal/random";

const runsOf = (order: string, legs: string): ComparedRun[] =>
  [...order].map((side, i) => ({
    id: `r${i + 1}`,
    side,
    leg: legs[i] === "+" ? "out" : "back",
    order: i + 1,
    roadDay: null,
  }));

function designOf(runs: readonly ComparedRun[]) {
  const design = runDesign(runs, "B");
  if (!("matrix" in design)) throw new Error(design.warnings.map((w) => w.code).join());
  return design;
}

const OPTIONS = { level: 0.95, seed: 1, resamples: 600, pool: 4, small: false };

/** Runs × columns of run level + smooth + white noise, drift and leg effect on top; the true side effect is `effect`. */
function simulate(
  runs: readonly ComparedRun[],
  columns: number,
  seed: number,
  effect: (k: number) => number,
): Float64Array {
  const random = randomStream(seed);
  const values = new Float64Array(runs.length * columns);
  runs.forEach((run, r) => {
    const level = 0.006 * random.nextNormal();
    const wave = 0.002 * random.nextNormal();
    const phase = 6 * random.nextUniform();
    for (let k = 0; k < columns; k++) {
      values[r * columns + k] =
        5 +
        level +
        wave * Math.sin(k / 6 + phase) +
        0.001 * random.nextNormal() -
        0.001 * r +
        (run.leg === "out" ? 0.01 : 0) +
        (run.side === "B" ? effect(k) : 0);
    }
  });
  return values;
}

describe("Simultaneous band", () => {
  it("holds the whole true curve in 95 of 100 campaigns (200 campaigns of 6 + 6; accepted 90 to 99: ± 2.5 standard errors)", () => {
    const runs = runsOf("ABBABAABABBA", "+-+-+-+-+-+-");
    const design = designOf(runs);
    const truth = (k: number) => (k > 20 ? 0.02 : 0);
    let held = 0;
    for (let seed = 1; seed <= 200; seed++) {
      const values = simulate(runs, 40, seed, truth);
      const band = deltaBand(values, 40, design.matrix, design.columns, design.side, design.order, {
        ...OPTIONS,
        seed,
      });
      held += band.effect.every((x, k) => Math.abs(x - truth(k)) <= band.critical * band.standardError[k])
        ? 1
        : 0;
    }
    expect(held / 200).toBeGreaterThanOrEqual(0.9);
    expect(held / 200).toBeLessThanOrEqual(0.99);
  });

  it("takes a linear drift and a leg effect out exactly when there is no noise", () => {
    const runs = runsOf("AABBABBA", "+-+-+-+-");
    const design = designOf(runs);
    const values = Float64Array.from(
      runs,
      (run, r) =>
        3 - 0.004 * r + (run.leg === "out" ? 0.03 : 0) + (run.side === "B" ? 0.05 : 0) + (r === 3 ? 1e-9 : 0),
    );
    const band = deltaBand(values, 1, design.matrix, design.columns, design.side, design.order, OPTIONS);
    expect(band.effect[0]).toBeCloseTo(0.05, 7);
    expect(band.orderEffect[0]).toBeCloseTo(-0.004, 7);
    expect(band.df).toBe(4);
  });

  it("is the same again with the same seed, and hardly moves with another", () => {
    const runs = runsOf("ABBABAAB", "+-+-+-+-");
    const design = designOf(runs);
    const values = simulate(runs, 30, 4, () => 0);
    const at = (seed: number) =>
      deltaBand(values, 30, design.matrix, design.columns, design.side, design.order, {
        ...OPTIONS,
        resamples: 2000,
        seed,
      }).critical;
    expect(at(7)).toBe(at(7));
    expect(Math.abs(at(7) / at(8) - 1)).toBeLessThan(0.15);
  });

  it("uses the exact degrees of freedom of each column where runs have gaps", () => {
    const runs = runsOf("ABBABAABAB", "+-+-+-+-+-");
    const design = designOf(runs);
    const values = simulate(runs, 12, 2, () => 0.01);
    for (let k = 4; k < 8; k++) values[2 * 12 + k] = Number.NaN;
    const band = deltaBand(values, 12, design.matrix, design.columns, design.side, design.order, {
      ...OPTIONS,
      pool: 0,
    });
    // Ten runs less four unknowns at eight of the twelve columns, one run less at the others: the middle one's.
    expect(band.df).toBe(10 - 4);
    const rows = runs.map((_, r) => r).filter((r) => r !== 2);
    const x = Float64Array.from(rows.flatMap((r) => [...design.matrix.subarray(4 * r, 4 * r + 4)]));
    const fit = leastSquares(
      x,
      Float64Array.from(rows, (r) => values[r * 12 + 5]),
      4,
    );
    expect(band.effect[5]).toBeCloseTo(fit.coefficients[design.side], 12);
    expect(band.standardError[5]).toBeCloseTo(fit.standardErrors[design.side], 12);
  });

  it("with three runs a side the critical value is Bonferroni's t (scipy: t.ppf(1 − 0.05/80, 2) = 28.258)", () => {
    const runs = runsOf("ABBABA", "+-+-+-");
    const design = designOf(runs);
    const band = deltaBand(
      simulate(runs, 40, 1, () => 0),
      40,
      design.matrix,
      design.columns,
      design.side,
      design.order,
      { ...OPTIONS, small: true },
    );
    expect(band.method).toBe("Bonferroni t");
    expect(band.critical).toBeCloseTo(28.258, 2);
    expect([...band.criticalAt].every((own) => own === band.critical)).toBe(true);
  });

  it("each column has the Bonferroni t of its own degrees of freedom (closed form of Student's distribution with 3)", () => {
    const runs = runsOf("ABBABAB", "+-+-+-+");
    const design = designOf(runs);
    const values = simulate(runs, 40, 1, () => 0);
    for (let k = 30; k < 40; k++) values[6 * 40 + k] = Number.NaN;
    const band = deltaBand(values, 40, design.matrix, design.columns, design.side, design.order, {
      ...OPTIONS,
      small: true,
    });
    // Seven runs less four unknowns where all reach, six at the end: scipy's t.ppf(1 − 0.05/80, 2) = 28.258 there alone.
    const x = band.criticalAt[0] / Math.sqrt(3);
    expect(0.5 + (x / (1 + x * x) + Math.atan(x)) / Math.PI).toBeCloseTo(1 - 0.05 / 80, 9);
    expect(band.criticalAt[29]).toBe(band.criticalAt[0]);
    expect(band.criticalAt[30]).toBeCloseTo(28.258, 2);
    expect(band).toMatchObject({ critical: band.criticalAt[39], df: 2 });
    expect(upTo(band)).toBe("up to ");
  });
});

describe("What the order of runs can tell", () => {
  it("warns when all A come before all B, and widens", () => {
    const bad = designOf(runsOf("AAAABBBB", "+-+-+-+-"));
    const good = designOf(runsOf("ABBABAAB", "+-+-+-+-"));
    expect(bad.warnings.map((w) => w.code)).toContain("order_cannot_separate");
    expect(good.warnings).toEqual([]);
    // Thue-Morse order against alternating legs: side is orthogonal to mean, leg and order.
    expect(good.inflation).toBeCloseTo(1, 10);
    expect(bad.inflation).toBeGreaterThan(3);
  });

  it("refuses to tell apart what goes hand in hand", () => {
    const runs = runsOf("ABABABAB", "+-+-+-+-");
    const design = runDesign(runs, "B");
    expect("matrix" in design).toBe(false);
    expect(design.warnings.map((w) => w.code)).toContain("side_not_separable");
  });

  it("says what it can't take out when legs or order are not known", () => {
    const runs = runsOf("ABBABAAB", "++++++++").map((run) => ({ ...run, order: null }));
    expect(designOf(runs).warnings.map((w) => w.code)).toEqual(["one_direction", "order_not_known"]);
    expect(designOf(runs.map((run) => ({ ...run, leg: null }))).names).toEqual(["mean", "side"]);
  });
});

describe("Verdict regions", () => {
  it("keeps stretches of one sign of at least 100 per minute", () => {
    const rpm = [2000, 2050, 2100, 2150, 2200, 2250, 2300, 2350];
    const low = [0.1, 0.2, 0.3, -1, -3, -3, -3, 0.4];
    const high = [2, 2, 2, 1, -0.1, -0.2, -0.1, 3];
    expect(verdictRegions(rpm, low, high)).toEqual([
      { from_rpm: 2000, to_rpm: 2100, verdict: "gain" },
      { from_rpm: 2200, to_rpm: 2300, verdict: "loss" },
    ]);
    expect(verdictRegions([2000, 2050], [Number.NaN, 1], [Number.NaN, 2])).toEqual([]);
  });

  it("claims nothing across engine speeds that were not compared", () => {
    const rpm = [2000, 2050, 2100, 3000, 3050, 3100];
    expect(
      verdictRegions(
        rpm,
        rpm.map(() => 1),
        rpm.map(() => 2),
      ),
    ).toEqual([
      { from_rpm: 2000, to_rpm: 2100, verdict: "gain" },
      { from_rpm: 3000, to_rpm: 3100, verdict: "gain" },
    ]);
  });
});
