import { readFileSync } from "node:fs";
import { describe, expect, it } from "vitest";

describe("the ramp", () => {
  const css = readFileSync(new URL("../../../app/tokens.css", import.meta.url), "utf8");
  /** Lightness, chroma and hue of a token in the light and in the dark scheme. */
  const token = (name: string) => {
    const pair = new RegExp(`--${name}: light-dark\\(oklch\\(([^)]*)\\), oklch\\(([^)]*)\\)\\)`).exec(css);
    if (!pair) throw new Error(`no --${name}`);
    return [pair[1], pair[2]].map((text) => text.split(" ").map(Number));
  };
  /** OKLCH to linear sRGB by Ottosson's published matrices, and to relative luminance by WCAG 2.2; outside of sRGB it is cut. */
  const luminance = ([lightness, chroma, hue]: number[]) => {
    const angle = (hue * Math.PI) / 180;
    const [a, b] = [chroma * Math.cos(angle), chroma * Math.sin(angle)];
    const l = (lightness + 0.3963377774 * a + 0.2158037573 * b) ** 3;
    const m = (lightness - 0.1055613458 * a - 0.0638541728 * b) ** 3;
    const s = (lightness - 0.0894841775 * a - 1.291485548 * b) ** 3;
    const cut = (part: number) => Math.min(1, Math.max(0, part));
    const red = cut(4.0767416621 * l - 3.3077115913 * m + 0.2309699292 * s);
    const green = cut(-1.2684380046 * l + 2.6097574011 * m - 0.3413193965 * s);
    const blue = cut(-0.0041960863 * l - 0.7034186147 * m + 1.707614701 * s);
    return 0.2126 * red + 0.7152 * green + 0.0722 * blue;
  };
  const STEPS = ["a3", "a2", "a1", "0", "b1", "b2", "b3"];

  it("has a number of 4.5 to 1 on every step in both schemes (WCAG 2.2, 1.4.3)", () => {
    const ends = { a3: "on-heat-a3", b3: "on-heat-b3" } as Record<string, string>;
    for (const step of STEPS)
      for (const scheme of [0, 1]) {
        const [cell, text] = [`heat-${step}`, ends[step] ?? "ink"].map((name) =>
          luminance(token(name)[scheme]),
        );
        const contrast = (Math.max(cell, text) + 0.05) / (Math.min(cell, text) + 0.05);
        expect(contrast, `${step} of scheme ${scheme}`).toBeGreaterThanOrEqual(4.5);
      }
  });

  it("leaves its middle in even steps to either side: amber for less, plum for more", () => {
    for (const scheme of [0, 1]) {
      const away = STEPS.map((step) =>
        Math.abs(token(`heat-${step}`)[scheme][0] - token("heat-0")[scheme][0]),
      );
      expect(away.slice(0, 3)).toEqual([...away.slice(0, 3)].sort((p, q) => q - p));
      expect(away.slice(4)).toEqual([...away.slice(4)].sort((p, q) => p - q));
      expect(new Set(away.slice(0, 4)).size).toBe(4);
      for (const step of ["a1", "a2", "a3"]) expect(token(`heat-${step}`)[scheme][2]).toBeLessThan(90);
      for (const step of ["b1", "b2", "b3"]) expect(token(`heat-${step}`)[scheme][2]).toBeGreaterThan(310);
    }
  });
});
