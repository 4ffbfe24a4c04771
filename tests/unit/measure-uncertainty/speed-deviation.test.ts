import { describe, expect, it } from "vitest";
import { speedDeviationMps } from "@/lib/measure/run/pull-times";
import {
  evaluateSpline,
  observe,
  solveSpline,
  splineBasis,
  splineSystem,
} from "@/lib/signal/penalised-spline";
import { randomStream } from "@/lib/signal/random";

const FROM_S = 0;
const TO_S = 8;
/** m/s at a time: a steady pull, which smoothing does not bend. */
const speedAt = (t: number) => 15 + 3 * t;

/** A smoothed pull of a channel with this many samples a second and this much white noise. */
function fitOf(rateHz: number, noiseMps: number, seed: number) {
  const random = randomStream(seed);
  const system = splineSystem(splineBasis(FROM_S, TO_S, 0.1));
  const scratch = new Float64Array(4);
  for (let i = 0; i <= TO_S * rateHz; i++) {
    const t = i / rateHz;
    observe(system, t, speedAt(t) + noiseMps * random.nextNormal(), 1 / noiseMps ** 2, scratch);
  }
  return { fit: solveSpline(system, 30), fromS: FROM_S, toS: TO_S };
}

describe("Standard deviation of the fused speed (truth: the line that the noise was added to)", () => {
  it.each([
    [10, 0.1],
    [25, 0.05],
    [10, 0.3],
  ])(
    "at %d samples a second with noise of %d m/s: what it says is what the fits scatter by",
    (rate, noise) => {
      const inner = Float64Array.from({ length: 60 }, (_, k) => 1 + k / 10);
      let squares = 0;
      const draws = 60;
      for (let seed = 1; seed <= draws; seed++) {
        const { fit } = fitOf(rate, noise, seed);
        evaluateSpline(fit, inner).forEach((v, k) => {
          squares += (v - speedAt(inner[k])) ** 2;
        });
      }
      const found = Math.sqrt(squares / (draws * inner.length));
      const stated = speedDeviationMps(fitOf(rate, noise, 1));
      // The covariance allows for bends too, which a line has none of: it is at least the scatter, and not far above.
      expect(stated).toBeGreaterThan(0.95 * found);
      expect(stated).toBeLessThan(1.6 * found);
    },
  );
});
