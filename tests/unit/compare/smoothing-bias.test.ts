import { describe, expect, it } from "vitest";
import { smoothingBias } from "@/lib/compare/band/smoothing-bias";

const rpm = Array.from({ length: 201 }, (_, k) => 2000 + 20 * k);

describe("What smoothing may have rounded off", () => {
  it("is nothing on a straight line, ends included, and nothing where no width is known", () => {
    const line = rpm.map((n) => 0.01 + 1e-5 * n);
    expect(
      Math.max(
        ...smoothingBias(
          rpm,
          line,
          rpm.map(() => 150),
        ),
      ),
    ).toBeLessThan(2e-4);
    const wave = rpm.map((n) => Math.sin(n / 100));
    expect(
      Math.max(
        ...smoothingBias(
          rpm,
          wave,
          rpm.map(() => Number.NaN),
        ),
      ),
    ).toBe(0);
  });
  it("of a wave is 1 − 1/(1 + (ω·w)⁶) of its height (closed form of the kernel's response)", () => {
    for (const width of [60, 100, 160]) {
      const omega = (2 * Math.PI) / 800;
      const wave = rpm.map((n) => Math.sin(omega * n));
      const middle = smoothingBias(
        rpm,
        wave,
        rpm.map(() => width),
      ).slice(80, 121);
      expect(Math.max(...middle)).toBeCloseTo(1 - 1 / (1 + (omega * width) ** 6), 2);
    }
  });
});
