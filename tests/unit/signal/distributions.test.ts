import { describe, expect, it } from "vitest";
import { normalCdf, normalQuantile, tCdf, tQuantile } from "@/lib/signal/distributions";
import { noncentralTCdf } from "@/lib/signal/noncentral-t";

const within = (got: number, expected: number, relative: number) =>
  expect(Math.abs(got - expected)).toBeLessThanOrEqual(relative * Math.abs(expected));

describe("Distributions (expected values: scipy 1.17.1)", () => {
  it.each([
    [-8, 6.22096057427174e-16],
    [-3.5, 0.00023262907903552502],
    [-1, 0.15865525393145707],
    [-0.1, 0.460172162722971],
    [0.3, 0.6179114221889526],
    [1.96, 0.9750021048517795],
    [4, 0.9999683287581669],
  ])("normal distribution at %d", (x, p) => within(normalCdf(x), p, 1e-12));

  it.each([
    [1e-10, -6.361340902404056],
    [0.001, -3.090232306167813],
    [0.3, -0.5244005127080409],
    [0.8, 0.8416212335729143],
    [0.975, 1.959963984540054],
    [0.9999, 3.719016485455709],
  ])("normal quantile at %d", (p, z) => within(normalQuantile(p), z, 1e-11));

  it.each([
    [-2.5, 3, 0.04385332350403278],
    [0.7, 1, 0.6944001122142147],
    [4, 8.5, 0.9982541553155827],
    [-30, 2, 0.0005546313409798295],
  ])("t distribution at %d with %d degrees of freedom", (t, df, p) => within(tCdf(t, df), p, 1e-12));

  it.each([
    [0.975, 2, 4.302652729749462],
    [0.9995, 4, 8.610301581379522],
    [0.8, 8.934, 0.8837264193115834],
    [1e-7, 6, -26.286699970757763],
    [0.6, 200, 0.25368437919014747],
  ])("t quantile at %d with %d degrees of freedom", (p, df, t) => within(tQuantile(p, df), t, 1e-11));

  it.each([
    [2.1, 10, 1.5, 0.6897680934422801],
    [0.5, 4, 2, 0.06580201891188447],
    [5, 30, 4, 0.7896094247891845],
    [-1, 8, 1, 0.02781028439687544],
    [3, 3, 0, 0.9711655571887814],
  ])("noncentral t at %d, df %d, delta %d", (t, df, delta, p) =>
    within(noncentralTCdf(t, df, delta), p, 1e-9),
  );

  it("quantiles invert the distribution and answer the ends", () => {
    for (const p of [0.0003, 0.1, 0.5, 0.77, 0.99999]) {
      within(normalCdf(normalQuantile(p)), p, 1e-12);
      within(tCdf(tQuantile(p, 5), 5), p, 1e-12);
    }
    expect(normalQuantile(0)).toBe(-Infinity);
    expect(tQuantile(1, 3)).toBe(Infinity);
    expect(tQuantile(1.5, 3)).toBeNaN();
  });
});
