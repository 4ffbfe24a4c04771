import { describe, expect, it } from "vitest";
import { deltaBand } from "@/lib/compare/band/delta-band";
import { randomStream } from "@/lib/signal/random";
import { checkValue } from "../../support/check-values";

const CAMPAIGNS = 300;
const simulation = checkValue("cmp.band.simulation");
const tolerance = checkValue("cmp.coverage.tol");
/** 2.5 standard errors of the difference of two simulated shares near 95 %, scaled from the record's 1.96 for its first count. */
const margin =
  (tolerance.expected[0] / 1.96) *
  2.5 *
  Math.sqrt(tolerance.inputs.R[0] / CAMPAIGNS + tolerance.inputs.R[0] / simulation.inputs.reps);

/** Share of campaigns without a change whose band holds zero at all points: run level, smooth and white noise, two sides only. */
function covered(nPerSide: number, small: boolean): number {
  const grid: number = simulation.inputs.grid;
  const n = 2 * nPerSide;
  const design = Float64Array.from({ length: 2 * n }, (_, i) => (i % 2 === 0 ? 1 : (i >> 1) % 2));
  const random = randomStream(simulation.inputs.seed);
  let held = 0;
  for (let draw = 1; draw <= CAMPAIGNS; draw++) {
    const values = new Float64Array(n * grid);
    for (let r = 0; r < n; r++) {
      const level = random.nextNormal();
      const [wave, phase] = [random.nextNormal(), 6.28 * random.nextUniform()];
      for (let k = 0; k < grid; k++)
        values[r * grid + k] = level + wave * Math.sin(k / 5 + phase) + 0.5 * random.nextNormal();
    }
    const options = { level: 0.95, seed: draw, resamples: 500, pool: 0, small };
    const band = deltaBand(values, grid, design, 2, 1, null, options);
    if (band.effect.every((x, k) => Math.abs(x) <= band.critical * band.standardError[k])) held++;
  }
  return held / CAMPAIGNS;
}

describe(`coverage of the band for two sides — ${simulation.id}, ${tolerance.id}: ${simulation.source}`, () => {
  it.each(["4", "6", "8"])("permutation with %s runs a side", (n) => {
    expect(Math.abs(covered(Number(n), false) - simulation.expected[n].perm)).toBeLessThanOrEqual(margin);
  });
  it("Bonferroni's t with three a side is too wide rather than too narrow", () => {
    const share = covered(3, true);
    expect(share).toBeGreaterThanOrEqual(simulation.expected["nA=nB=3"].bonf_t - margin);
  });
});
