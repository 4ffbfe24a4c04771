import { describe, expect, it } from "vitest";
import type { HeightProfile } from "@/lib/measure/road/height-profile";
import { type RoadProblem, roadLayout } from "@/lib/measure/road/road-equations";
import { ROAD_SOURCES, type RoadSource, roadVariance } from "@/lib/measure/road/road-variance";
import { addRow, type NormalEquations, normalEquations } from "@/lib/signal/normal-equations";
import { randomStream } from "@/lib/signal/random";
import { expectClose } from "../../support/expect-close";

const layout = roadLayout(2, 3);
const WIND = [layout.wind, layout.runWind(0), layout.runWind(1)];
const RESISTANCE = [0, 1, 2, layout.beyond];
const sourceOf = (k: number): RoadSource =>
  WIND.includes(k) ? "wind" : RESISTANCE.includes(k) ? "resistance" : "grade";

/** Only the layout matters for the variance; the gradient needs the rest and is tested through whole campaigns. */
function varianceOf(equations: NormalEquations) {
  const problem = { layout, runs: [{}, {}] } as unknown as RoadProblem;
  return roadVariance(problem, {} as HeightProfile, new Float64Array(layout.size), equations, 1);
}

/** Inverse by Gauss-Jordan: the check's own arithmetic, apart from the code under test. */
function inverse(matrix: number[][]): number[][] {
  const n = matrix.length;
  const m = matrix.map((row, i) => [...row, ...row.map((_, j) => (i === j ? 1 : 0))]);
  for (let i = 0; i < n; i++) {
    const pivot = m[i][i];
    m[i] = m[i].map((v) => v / pivot);
    for (let r = 0; r < n; r++) {
      if (r === i) continue;
      const f = m[r][i];
      m[r] = m[r].map((v, c) => v - f * m[i][c]);
    }
  }
  return m.map((row) => row.slice(n));
}

/** gᵀ·A⁻¹·g over the unknowns of some sources, the others being known exactly (Gaussian conditioning). */
function left(equations: NormalEquations, gradient: Float64Array, sources: readonly RoadSource[]): number {
  const places = [...gradient.keys()].filter((k) => sources.includes(sourceOf(k)));
  const block = places.map((i) => places.map((j) => equations.matrix[i * layout.size + j]));
  const inverted = inverse(block);
  return places.reduce(
    (sum, i, a) => sum + places.reduce((s, j, b) => s + gradient[i] * inverted[a][b] * gradient[j], 0),
    0,
  );
}

const ORDERS: RoadSource[][] = [
  ["wind", "grade", "resistance"],
  ["wind", "resistance", "grade"],
  ["grade", "wind", "resistance"],
  ["grade", "resistance", "wind"],
  ["resistance", "wind", "grade"],
  ["resistance", "grade", "wind"],
];

/** Shapley's definition: what a source takes away when it is learned, averaged over all orders of learning. */
function byDefinition(equations: NormalEquations, gradient: Float64Array, source: RoadSource): number {
  let sum = 0;
  for (const order of ORDERS) {
    const from = order.slice(order.indexOf(source));
    const after = from.slice(1);
    sum += left(equations, gradient, from) - (after.length > 0 ? left(equations, gradient, after) : 0);
  }
  return sum / ORDERS.length;
}

function randomEquations(seed: number): { equations: NormalEquations; gradient: Float64Array } {
  const random = randomStream(seed);
  const equations = normalEquations(layout.size);
  const all = Array.from({ length: layout.size }, (_, k) => k);
  for (let row = 0; row < 3 * layout.size; row++) {
    addRow(
      equations,
      all,
      all.map(() => random.nextNormal()),
      0,
      1,
    );
  }
  return { equations, gradient: Float64Array.from(all, () => random.nextNormal()) };
}

describe("roadVariance", () => {
  it.each([1, 2, 3])(
    "splits correlated unknowns by Shapley's definition, adding up to the whole (%i)",
    (seed) => {
      const { equations, gradient } = randomEquations(seed);
      const variance = varianceOf(equations);
      const parts = variance.parts(gradient);
      for (const source of ROAD_SOURCES) {
        expectClose(parts[source], byDefinition(equations, gradient, source), { rel: 1e-9 });
        expect(parts[source]).toBeGreaterThan(0);
      }
      const whole = left(equations, gradient, ROAD_SOURCES);
      expectClose(variance.total(gradient), whole, { rel: 1e-9 });
      expectClose(parts.wind + parts.grade + parts.resistance, whole, { rel: 1e-9 });
    },
  );

  it("gives uncorrelated unknowns their own variance (closed form)", () => {
    const equations = normalEquations(layout.size);
    for (let k = 0; k < layout.size; k++) addRow(equations, [k], [1], 0, 1 / (k + 1) ** 2);
    const gradient = new Float64Array(layout.size).fill(1);
    const parts = varianceOf(equations).parts(gradient);
    const sum = (source: RoadSource) =>
      [...gradient.keys()].reduce((s, k) => s + (sourceOf(k) === source ? (k + 1) ** 2 : 0), 0);
    for (const source of ROAD_SOURCES) expectClose(parts[source], sum(source), { rel: 1e-9 });
  });

  it("shares a direction that only the sum of wind and resistance is known in", () => {
    // Two unknowns told by their sum alone, each with a prior of 1: learning one tells the other. By symmetry: halves.
    const equations = normalEquations(layout.size);
    for (let k = 0; k < layout.size; k++) addRow(equations, [k], [1], 0, 1);
    addRow(equations, [0, layout.wind], [1, 1], 0, 1e6);
    const gradient = new Float64Array(layout.size);
    gradient[0] = 1;
    const variance = varianceOf(equations);
    const parts = variance.parts(gradient);
    // Var(x0) with x0 + w known: 1/2. Known wind: 0. Alone: nearly 0. So resistance and wind carry a quarter each.
    expectClose(variance.total(gradient), 0.5, { rel: 1e-5 });
    expectClose(parts.resistance, 0.25, { rel: 1e-5 });
    expectClose(parts.wind, 0.25, { rel: 1e-5 });
    expectClose(parts.grade, 0, { abs: 1e-9 });
  });
});
