import { cleanup, fireEvent, render, screen } from "@testing-library/react";
import { renderToStaticMarkup } from "react-dom/server";
import { afterEach, describe, expect, it } from "vitest";
import { CurveChart, describeCurves } from "@/components/charts/curve-chart";
import { DeltaStrip } from "@/components/charts/delta-strip";
import { readSpanHash, spanHash, withSurroundings } from "@/components/charts/stack/span-hash";
import { describeTraces, TraceChart } from "@/components/charts/trace-chart";

afterEach(cleanup);

const TIME = Array.from({ length: 101 }, (_, i) => i / 10);
const TRACES = [
  { id: "speed", label: "Speed", unit: "km/h", decimals: 1, values: TIME.map((t) => 40 + 5 * t) },
  {
    id: "pressure",
    label: "Manifold pressure",
    unit: "kPa",
    decimals: 0,
    values: TIME.map((t) => (t > 4 && t < 5 ? null : 100)),
  },
];
const SEGMENTS = [{ kind: "pull" as const, fromS: 2, toS: 7.5 }];
const MASKS = [{ fromS: 3, toS: 3.4, why: "wheel spin", kind: "masked" as const }];

function trace() {
  return <TraceChart title="Run 12" timeS={TIME} traces={TRACES} segments={SEGMENTS} masks={MASKS} />;
}

describe("TraceChart", () => {
  it("says what was found and what was left out, with times", () => {
    expect(describeTraces({ timeS: TIME, traces: TRACES, segments: SEGMENTS, masks: MASKS })).toBe(
      "10.0 s recorded. Found: pull from 2.00 to 7.50 s. Left out: from 3.00 to 3.40 s (wheel spin).",
    );
    expect(describeTraces({ timeS: TIME, traces: TRACES })).toContain(
      "No pull, coast-down or sprint was found.",
    );
  });

  it("hatches what was left out through all panels and breaks the line at a gap", () => {
    const box = document.createElement("div");
    box.innerHTML = renderToStaticMarkup(trace());
    expect(box.querySelectorAll('rect[fill$="masked)"]')).toHaveLength(1);
    const paths = [...box.querySelectorAll("path.series-one")].map((path) => path.getAttribute("d") ?? "");
    expect(paths.map((path) => path.match(/M/g)?.length)).toEqual([1, 2]);
    expect(box.innerHTML).not.toMatch(/\sstyle=/);
  });

  it("marks what is only warned of by a hatched strip on top of each panel, and says so", () => {
    const noted = [{ fromS: 5, toS: 6, why: "jitter", kind: "noted" as const }];
    const box = document.createElement("div");
    box.innerHTML = renderToStaticMarkup(
      <TraceChart title="Run 12" timeS={TIME} traces={TRACES} masks={noted} />,
    );
    expect(box.querySelectorAll('rect[fill$="noted)"]')).toHaveLength(2);
    expect(box.querySelectorAll('rect[fill$="masked)"]')).toHaveLength(0);
    expect(describeTraces({ timeS: TIME, traces: TRACES, masks: noted })).toContain(
      "Warned of: from 5.00 to 6.00 s (jitter).",
    );
  });

  it("zooms to the span that a link asks for, with its surroundings, and again after a reset", () => {
    Element.prototype.scrollIntoView = () => undefined;
    window.location.hash = "";
    const { container } = render(<TraceChart title="Run 12" timeS={TIME} traces={TRACES} anchor="traces" />);
    expect(screen.queryByRole("button", { name: "Whole range" })).toBeNull();
    window.location.hash = spanHash("traces", 3, 3.4);
    fireEvent(window, new HashChangeEvent("hashchange"));
    fireEvent.click(screen.getByRole("button", { name: "Whole range" }));
    expect(screen.queryByRole("button", { name: "Whole range" })).toBeNull();
    const link = document.createElement("a");
    link.setAttribute("href", "#traces:3.00,3.40");
    container.append(link);
    fireEvent.click(link);
    expect(screen.getByRole("button", { name: "Whole range" })).toBeDefined();
    window.location.hash = "";
  });

  it("reads only its own address, and keeps the surroundings on the axis", () => {
    expect(readSpanHash("traces", "#traces:3.10,3.62")).toEqual({ from: 3.1, to: 3.62 });
    expect(readSpanHash("traces", "#traces%3A3.10%2C3.62")).toEqual({ from: 3.1, to: 3.62 });
    for (const other of ["#others:3,4", "#traces", "#traces:4,3", "#traces:a,b", "#traces:%", ""])
      expect(readSpanHash("traces", other)).toBeNull();
    expect(withSurroundings({ from: 0.5, to: 2.5 }, [0, 1, 2, 3, 9])).toEqual({ from: 0, to: 4.5 });
  });

  it("moves one cursor through all panels and docks the values", () => {
    const { container } = render(trace());
    fireEvent.keyDown(screen.getByRole("slider"), { key: "End" });
    fireEvent.keyDown(screen.getByRole("slider"), { key: "End" });
    expect(container.querySelector("dl")?.textContent?.replaceAll("\u202f", " ")).toBe(
      "Time10.00 sSpeed90.0 km/hManifold pressure100 kPa",
    );
    expect(container.querySelectorAll("rect.marker-b")).toHaveLength(2);
  });

  it("prints every second row of a hundred and one samples and says so", () => {
    render(trace());
    expect(screen.getByText(/one row for every 2 points/)).toBeDefined();
    expect(screen.getAllByRole("rowheader")).toHaveLength(51);
  });
});

describe("CurveChart", () => {
  const rpm = [2000, 3000, 4000];
  const power = {
    id: "power",
    label: "Engine power",
    unit: "kW",
    decimals: 1,
    values: [50, 90.25, 80],
    low: [48, 88.25, 78],
    high: [52, 92.25, 82],
  };

  it("names the highest value with its half-width and its place", () => {
    expect(describeCurves(rpm, [power]).replaceAll("\u202f", " ")).toBe(
      "Engine power: highest 90.3 ± 2.0 kW at 3 000 per minute.",
    );
    expect(describeCurves(rpm, [{ ...power, values: [null, null, null] }])).toBe("Engine power: no values.");
  });

  it("gives each quantity a panel of its own that starts at zero", () => {
    const torque = { ...power, id: "torque", label: "Engine torque", unit: "N·m", values: [240, 290, 190] };
    const box = document.createElement("div");
    box.innerHTML = renderToStaticMarkup(
      <CurveChart title="Run 12" rpm={rpm} quantities={[power, torque]} />,
    );
    const titles = [...box.querySelectorAll("text.chart-title")].map((text) => text.textContent);
    expect(titles).toEqual(["Engine power, kW", "Engine torque, N·m", "engine speed, 1/min"]);
    const zeros = [...box.querySelectorAll("text.chart-tick")].filter((text) => text.textContent === "0");
    expect(zeros).toHaveLength(2);
  });
});

describe("DeltaStrip", () => {
  it("says the verdict, losses first", () => {
    const markup = renderToStaticMarkup(
      <DeltaStrip
        rpm={[2000, 3000, 4000]}
        deltaPct={[3, 0, -3]}
        lowPct={[2, -1, -4]}
        highPct={[4, 1, -2]}
        regions={[
          { fromRpm: 2000, toRpm: 2500, verdict: "gain" },
          { fromRpm: 3600, toRpm: 4000, verdict: "loss" },
        ]}
      />,
    ).replaceAll("\u202f", " ");
    expect(markup).toContain('aria-label="A higher 3 600 to 4 000; B higher 2 000 to 2 500 per minute"');
    expect(markup).not.toMatch(/\sstyle=/);
  });
});
