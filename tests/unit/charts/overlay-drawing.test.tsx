import { renderToStaticMarkup } from "react-dom/server";
import { describe, expect, it } from "vitest";
import { OverlayChart } from "@/components/charts/overlay/overlay-chart";
import { createOverlay } from "./overlay-sample";

function draw(overrides: Parameters<typeof createOverlay>[0] = {}, view = {}) {
  const markup = renderToStaticMarkup(
    <OverlayChart data={createOverlay(overrides)} title="R15 against R14" initialView={view} />,
  );
  const box = document.createElement("div");
  box.innerHTML = markup;
  const svg = box.querySelector('svg[role="img"]');
  if (!svg) throw new Error("no drawing");
  return { markup, box, svg };
}

const lines = (svg: Element, name: string) => [...svg.querySelectorAll(`path.${name}`)];
const d = (path: Element | undefined) => path?.getAttribute("d") ?? "";

describe("OverlayChart as the server draws it", () => {
  it("carries no style attribute and no style element, which the content policy would refuse", () => {
    const { markup } = draw({}, { everyRun: true });
    expect(markup).not.toMatch(/\sstyle=/);
    expect(markup).not.toContain("<style");
  });

  it("is the same text every time", () => {
    expect(draw().markup).toBe(draw().markup);
  });

  it("names the curves at their right ends and not in a legend box", () => {
    const labels = [...draw().svg.querySelectorAll("text.chart-label")].map((text) => text.textContent);
    expect(labels).toEqual(["A R14", "B R15", "B higher", "A higher"]);
  });

  it("tells A and B apart by marker, not by ink alone", () => {
    const { svg } = draw();
    expect(svg.querySelectorAll("circle.marker-a").length).toBeGreaterThan(0);
    expect(svg.querySelectorAll("rect.marker-b").length).toBeGreaterThan(0);
  });

  it("leaves a gap a gap: no point at 6000 where neither side has a value", () => {
    const { svg } = draw();
    // Eight grid points with values: one move and seven straight pieces.
    expect(d(lines(svg, "series-a")[0]).match(/[ML]/g)).toHaveLength(8);
  });

  it("starts a new piece of line after a gap in the middle", () => {
    const [power] = createOverlay().quantities;
    if (!power) throw new Error("no quantity");
    const a = power.a.map((value, i) => (i === 3 ? null : value));
    const { svg } = draw({ quantities: [{ ...power, a }] });
    expect(d(lines(svg, "series-a")[0]).match(/M/g)).toHaveLength(2);
  });

  it("fills the difference with hatch where B is proven higher and with dots where A is, nowhere else", () => {
    const { svg } = draw();
    const fills = [...svg.querySelectorAll("path.print-exact")].map((path) => path.getAttribute("fill"));
    expect(fills).toHaveLength(2);
    expect(fills[0]).toMatch(/hatch\)$/);
    expect(fills[1]).toMatch(/dots\)$/);
  });

  it("fills nothing and marks nothing on the zero line when no stretch is outside the band", () => {
    const { svg } = draw({ regions: [] });
    expect(svg.querySelectorAll("path.print-exact")).toHaveLength(0);
    expect(svg.querySelectorAll("rect.fill-ink")).toHaveLength(0);
  });

  it("keeps a stretch of a single grid point visible", () => {
    const widths = [...draw().svg.querySelectorAll("rect.fill-ink")].map((rect) =>
      Number(rect.getAttribute("width")),
    );
    expect(widths[1]).toBe(4);
  });

  it("draws single runs only on demand", () => {
    expect(lines(draw().svg, "run-a")).toHaveLength(0);
    const { svg } = draw({}, { everyRun: true });
    expect(lines(svg, "run-a")).toHaveLength(2);
    expect(lines(svg, "run-b")).toHaveLength(1);
  });

  it("starts the upper axis at zero, and says so when a part of the range is in view and it does not", () => {
    const ticks = (svg: Element) =>
      [...svg.querySelectorAll("text.chart-tick")].map((text) => text.textContent);
    expect(ticks(draw().svg)).toContain("0");
    expect(draw().markup).not.toContain("does not start at zero");
    expect(draw({}, { range: { from: 3000, to: 4000 } }).box.textContent).toContain(
      "Zoomed to 3\u202f000–4\u202f000 1/min; the upper axis does not start at zero.",
    );
  });

  it("leaves controls and cursor out of a still figure, but not its values, its sentence and its table", () => {
    const box = document.createElement("div");
    box.innerHTML = renderToStaticMarkup(<OverlayChart data={createOverlay()} title="T" still />);
    expect(box.querySelector('[role="slider"], button, input')).toBeNull();
    expect(box.querySelector("dl")?.textContent).toContain("R15");
    expect(box.querySelectorAll("tbody tr")).toHaveLength(9);
  });

  it("prints a real table with a head for every column and a row head", () => {
    const { box } = draw();
    expect([...box.querySelectorAll('th[scope="col"]')].map((th) => th.textContent)).toEqual([
      "Engine speed, 1/min",
      "A R14, kW",
      "B R15, kW",
      "B \u2212 A",
    ]);
    expect(box.querySelectorAll('th[scope="row"]')).toHaveLength(9);
    expect(box.querySelector("caption")?.textContent).toContain("6 runs on A, 5 runs on B");
  });

  it("draws as recorded: whole, torque in absolute, zoomed, without a band", async () => {
    const none = Array.from({ length: 9 }, () => null);
    const states = {
      whole: draw().svg,
      "torque-absolute": draw({}, { quantityId: "torque", mode: "absolute" }).svg,
      zoomed: draw({}, { range: { from: 3000, to: 4500 }, everyRun: true }).svg,
      "without-band": draw({ lowPct: none, highPct: none, regions: [], nA: 2, nB: 2 }).svg,
    };
    for (const [name, svg] of Object.entries(states)) {
      const text = svg.outerHTML.replaceAll("><", ">\n<");
      await expect(text).toMatchFileSnapshot(`./drawings/overlay-${name}.svg.txt`);
    }
  });
});
