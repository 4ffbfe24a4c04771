import { deltaBand } from "@/lib/compare/band/delta-band";
import { runDesign } from "@/lib/compare/band/run-design";
import { type ComparedPull, compareSides } from "@/lib/compare/compare-sides";
import { leastSquares } from "@/lib/signal/least-squares";
import { randomStream, shuffle } from "@/lib/signal/random";
import { savitzkyGolay } from "@/lib/signal/savitzky-golay";
import type { BenchLine } from "./line";
import { python, runReference } from "./python";

const SAMPLES = 6000;
const BINS = 120;
const STEP_S = 0.01;

const random = randomStream(20);
const speedMps = Float64Array.from(
  { length: SAMPLES },
  (_, i) => 12 + 0.008 * i - 4e-7 * i * i + 0.02 * random.nextNormal(),
);
const place = Float64Array.from({ length: SAMPLES }, (_, i) => (2 * i) / (SAMPLES - 1) - 1);
const bins = Int32Array.from({ length: SAMPLES }, (_, i) => Math.floor((i * BINS) / SAMPLES));

const smoothingDesign = new Float64Array(3 * SAMPLES);

// One hot loop a function and nothing after it: Node 20 compiles what follows unseen and falls back at each call.
function addUp(slope: Float64Array, sums: Float64Array, counts: Float64Array): void {
  for (let i = 0; i < SAMPLES; i++) {
    sums[bins[i]] += slope[i];
    counts[bins[i]]++;
  }
}

function layOut(design: Float64Array): void {
  for (let i = 0; i < SAMPLES; i++) {
    design[3 * i] = 1;
    design[3 * i + 1] = place[i];
    design[3 * i + 2] = place[i] * place[i];
  }
}

/** Acceleration by Savitzky-Golay, its means in 120 bins, and a quadratic over all samples. */
function smoothing() {
  const slope = savitzkyGolay(speedMps, 21, 3, 1, STEP_S);
  const sums = new Float64Array(BINS);
  const counts = new Float64Array(BINS);
  addUp(slope, sums, counts);
  layOut(smoothingDesign);
  const means = sums.map((sum, k) => sum / counts[k]);
  return { slope, means, fit: leastSquares(smoothingDesign, slope, 3).coefficients };
}

function smoothingInputs(): Record<string, Float64Array> {
  return { y: speedMps, x: place, bins: Float64Array.from(bins), step: Float64Array.of(STEP_S) };
}

const RUNS = 16;
const POINTS = 120;
const POOL = 8;
const OPTIONS = { level: 0.95, seed: 11, resamples: 2000, pool: POOL, small: false };
const runs = [..."ABBABAABBAABABBA"].map((side, i) => ({
  id: `r${i + 1}`,
  side,
  leg: i % 2 === 0 ? ("out" as const) : ("back" as const),
  order: i + 1,
  roadDay: null,
}));
const values = Float64Array.from(
  { length: RUNS * POINTS },
  (_, i) => 5 + 1e-3 * (i % 7) + 6e-3 * random.nextNormal(),
);

function design() {
  const found = runDesign(runs, "B");
  if (!("matrix" in found)) throw new Error("the bench's own order can't be told apart");
  return found;
}

function band(): number {
  const { matrix, columns, side, order } = design();
  return deltaBand(values, POINTS, matrix, columns, side, order, OPTIONS).critical;
}

/** What the reference gets: design with the side last, values, and the very permutations that our band draws. */
function bandInputs(): Record<string, Float64Array> {
  const { matrix, columns, side } = design();
  const sideLast = [...Array(columns).keys()].sort((a, b) => Number(a === side) - Number(b === side));
  const stream = randomStream(OPTIONS.seed);
  const order = Int32Array.from({ length: RUNS }, (_, i) => i);
  const permutations = new Float64Array(OPTIONS.resamples * RUNS);
  for (let b = 0; b < OPTIONS.resamples; b++) {
    shuffle(order, stream);
    permutations.set(order, b * RUNS);
  }
  return {
    design: Float64Array.from(runs.flatMap((_, r) => sideLast.map((j) => matrix[r * columns + j]))),
    values,
    permutations,
    shape: Float64Array.of(RUNS, POINTS, POOL, OPTIONS.level),
  };
}

const rpm = Array.from({ length: POINTS }, (_, k) => 1500 + 40 * k);
const pulls: ComparedPull[] = [..."ABBABAABBAABABBAABBA"].map((side, i) => ({
  id: `r${i + 1}`,
  side,
  leg: i % 2 === 0 ? "out" : "back",
  order: i + 1,
  roadDay: null,
  engineNm: rpm.map(() => 300 * (1 + 0.004 * random.nextNormal())),
  peakKw: 150 + random.nextNormal(),
  peakNm: 300 + random.nextNormal(),
  timesS: { "80-120": 4 + 0.03 * random.nextNormal() },
}));
const compare = () =>
  compareSides(rpm, pulls, { a: "A", b: "B", basis: "day", level: 0.95, seed: 1, resamples: 2000 });

function close(what: string, ours: ArrayLike<number>, reference: readonly number[]): string {
  const miss = Math.max(
    ...reference.map((value, i) => Math.abs(ours[i] - value) / Math.max(1, Math.abs(value))),
  );
  if (!(miss <= 1e-9)) throw new Error(`${what}: off by ${miss} from the reference`);
  return `${what} equal to ${miss.toExponential(0)}`;
}

const notRun = python ? null : "no python3 with scipy on this machine";

/** Numerics: smoothing and band against scipy and numpy, and a comparison of 20 runs. */
export const lines: BenchLine[] = [
  {
    what: "slope of 6,000 samples, 120 bins, quadratic",
    ours: smoothing,
    reference: {
      name: "scipy and numpy",
      cpuMs: () => runReference("smoothing", smoothingInputs()).cpu_ms[0],
    },
    notRun,
    budget: 0.5,
    agreement: () => {
      const ours = smoothing();
      const reference = runReference("smoothing", smoothingInputs());
      return [
        close("slopes", ours.slope, reference.slope),
        close("bins", ours.means, reference.means),
        close("fit", ours.fit, reference.fit),
      ].join(", ");
    },
  },
  {
    what: "band of 2,000 resamples, 2 × 8 runs × 120 points",
    ours: band,
    reference: {
      name: "numpy in matrix products",
      cpuMs: () => runReference("band", bandInputs()).cpu_ms[0],
    },
    notRun,
    budget: 1.5,
    agreement: () => close("critical values", [band()], runReference("band", bandInputs()).critical),
  },
  {
    what: "compare 20 runs of 120 points, curves at hand",
    ours: compare,
    reference: null,
    notRun: null,
    budget: 0.05,
  },
];
