import { describe, expect, it } from "vitest";
import { hendersonWeights } from "@/lib/signal/henderson";
import { localQuadratic } from "@/lib/signal/local-quadratic";
import { savitzkyGolay, savitzkyGolayWeights } from "@/lib/signal/savitzky-golay";
import { whittaker } from "@/lib/signal/whittaker";
import { checkValue, checkValues } from "../../support/check-values";

const close = (got: ArrayLike<number>, expected: ArrayLike<number>, tolerance: number) => {
  expect(got.length).toBe(expected.length);
  for (let i = 0; i < expected.length; i++)
    expect(Math.abs(got[i] - expected[i])).toBeLessThanOrEqual(tolerance);
};

describe("Savitzky-Golay weights (tables of Savitzky and Golay 1964, Steinier 1972)", () => {
  const degreeOf: Record<string, number> = { quad: 2, cubic: 3 };
  for (const value of ["sg.d0.", "sg.d1.", "sg.d2."].flatMap(checkValues)) {
    it(value.id, () => {
      const [, derivative, degree] = value.id.split(".");
      const order = Number(derivative.slice(1));
      // The table of the second derivative states d²y/dx², as the half sum of the published normalised integers.
      const got = savitzkyGolayWeights(value.inputs.N, degreeOf[degree], order);
      const expected = value.expected.num.map((n: number) => n / value.expected.norm);
      close(got, expected, value.tolerance.abs);
      if (value.expected.sumsq !== undefined) {
        expect(got.reduce((sum, w) => sum + w * w, 0)).toBeCloseTo(value.expected.sumsq, 11);
      }
    });
  }
});

describe("Savitzky-Golay filter with polynomial ends (scipy savgol_filter, mode interp)", () => {
  it.each([
    ["sg.vec.d1.5", 5, 1],
    ["sg.vec.d1.9", 9, 1],
    ["sg.vec.d0.7", 7, 0],
  ])("%s", (id, window, derivative) => {
    const value = checkValue(id);
    const y = Float64Array.from(value.inputs.y as number[]);
    close(savitzkyGolay(y, window, 2, derivative, value.inputs.dt ?? 1), value.expected, value.tolerance.abs);
  });

  it("follows a cubic exactly at both ends (closed form)", () => {
    const y = Float64Array.from({ length: 40 }, (_, i) => 2 - 0.3 * i + 0.05 * i ** 2 - 0.002 * i ** 3);
    const slope = Float64Array.from(y, (_, i) => (-0.3 + 0.1 * i - 0.006 * i ** 2) / 0.5);
    close(savitzkyGolay(y, 11, 3, 1, 0.5), slope, 1e-9);
  });

  it("has the published bias factor on a cubic: h²·f‴/6 · (3m² + 3m − 1)/5", () => {
    for (const value of checkValues("sg.bias.")) {
      const weights = savitzkyGolayWeights(value.inputs.N, 2, 1);
      const m = (value.inputs.N - 1) / 2;
      const factor = weights.reduce((sum, w, k) => sum + w * (k - m) ** 3, 0);
      expect(factor).toBeCloseTo(value.expected.factor, 10);
    }
  });

  it("passes noise on as σ/Δt·√(12/(N(N²−1)))", () => {
    for (const value of checkValues("sg.noise.")) {
      const { sigma_v: sigma, N, dt } = value.inputs;
      const gain = Math.sqrt(savitzkyGolayWeights(N, 2, 1).reduce((sum, w) => sum + w * w, 0)) / dt;
      // The record states the large-N form 12/(N³ − N), which is exact for the slope of a line.
      expect((sigma * gain) / value.expected.sd_a).toBeCloseTo(1, 9);
    }
  });

  it("refuses an even window and a series that is too short", () => {
    expect(() => savitzkyGolayWeights(6, 2)).toThrow(/odd window/);
    expect(() => savitzkyGolay(new Float64Array(4), 5, 2)).toThrow(/fewer than the window/);
  });
});

describe("Whittaker smoother (independent dense solution, numpy)", () => {
  it.each(["whittaker.10.d2", "whittaker.100.d2", "whittaker.1000.d3"])("%s", (id) => {
    const value = checkValue(id);
    const { smooth, effectiveDf } = whittaker(
      Float64Array.from(value.inputs.y as number[]),
      value.inputs.lambda,
      value.inputs.d,
    );
    close(smooth, value.expected.z, value.tolerance.abs);
    expect(effectiveDf).toBeCloseTo(value.expected.edf_trace, 8);
  });

  it("impulse response: symmetric, sum 1", () => {
    const value = checkValue("whittaker.impulse");
    const y = new Float64Array(11);
    y[value.inputs.impulse_at] = 1;
    close(whittaker(y, 10, 2).smooth, value.expected, value.tolerance.abs);
  });

  it("keeps sum and first moment with second differences, and bridges a gap of a parabola with third ones", () => {
    const y = Float64Array.from({ length: 60 }, (_, i) => Math.sin(i / 5) + (i % 7) * 0.1);
    const { smooth } = whittaker(y, 50, 2);
    const moment = (z: Float64Array, p: number) => z.reduce((sum, v, i) => sum + v * i ** p, 0);
    expect(moment(smooth, 0)).toBeCloseTo(moment(y, 0), 8);
    expect(moment(smooth, 1)).toBeCloseTo(moment(y, 1), 6);
    const parabola = Float64Array.from({ length: 30 }, (_, i) => 1 + 0.2 * i + 0.01 * i * i);
    const holed = parabola.map((v, i) => (i > 9 && i < 20 ? Number.NaN : v));
    close(whittaker(holed, 1000, 3).smooth, parabola, 1e-7);
  });
});

describe("Henderson weights (closed form; 13 terms match the published set)", () => {
  for (const value of checkValues("henderson.")) {
    it(value.id, () => close(hendersonWeights(value.inputs.N), value.expected, value.tolerance.abs));
  }
});

describe("Local quadratic with tricube weights (numpy weighted least squares)", () => {
  for (const value of checkValues("locquad.")) {
    it(value.id, () => {
      const { t, y, t0, h } = value.inputs;
      const got = localQuadratic(Float64Array.from(t as number[]), Float64Array.from(y as number[]), t0, h);
      expect(got?.value).toBeCloseTo(value.expected.value, 8);
      expect(got?.slope).toBeCloseTo(value.expected.slope, 8);
      expect(got?.halfSecondDerivative).toBeCloseTo(value.expected.half_second_derivative, 7);
    });
  }

  it("answers null where fewer than three samples carry weight", () => {
    expect(localQuadratic(Float64Array.of(0, 1, 2), Float64Array.of(1, Number.NaN, 3), 1, 5)).toBeNull();
  });
});
