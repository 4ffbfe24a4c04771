import { act, cleanup, fireEvent, render, screen, within } from "@testing-library/react";
import { afterEach, beforeEach, describe, expect, it, vi } from "vitest";
import { OverlayChart } from "@/components/charts/overlay/overlay-chart";
import { createOverlay } from "./overlay-sample";

beforeEach(() => vi.useFakeTimers());
afterEach(() => {
  cleanup();
  vi.useRealTimers();
});

function show(props: Partial<Parameters<typeof OverlayChart>[0]> = {}) {
  const view = render(<OverlayChart data={createOverlay()} title="R15 against R14" {...props} />);
  const slider = screen.getByRole("slider");
  const press = (key: string, more = {}) => fireEvent.keyDown(slider, { key, ...more });
  const strip = () => view.container.querySelector("dl")?.textContent?.replaceAll("\u202f", " ") ?? "";
  return { ...view, slider, press, strip };
}

describe("the cursor of OverlayChart", () => {
  it("rests on the largest proven difference and says so", () => {
    expect(show().strip()).toContain("3 000 1/minat the largest difference");
  });

  it("moves one grid point by arrow, ten with Shift, to the ends with Home and End", () => {
    const { press, strip } = show();
    press("Home");
    press("Home");
    expect(strip()).toContain("2 000 1/minunder the cursor");
    press("ArrowRight");
    expect(strip()).toContain("2 500 1/min");
    press("ArrowLeft");
    press("ArrowLeft");
    expect(strip()).toContain("2 000 1/min");
    press("ArrowRight", { shiftKey: true });
    expect(strip()).toContain("6 000 1/min");
    press("End");
    expect(strip()).toContain("6 000 1/min");
  });

  it("goes back to rest with Escape", () => {
    const { press, strip } = show();
    press("End");
    press("Escape");
    expect(strip()).toContain("at the largest difference");
  });

  it("shows A, B and B − A with half-width and runs, digits by the half-width", () => {
    const { press, strip } = show();
    press("Home");
    press("Home");
    // 200 N·m at 2000 1/min = 41.888 kW; 0.2 % more on B; half-width 1.2 %.
    expect(strip()).toContain("A R1441.9 kW6 runs");
    expect(strip()).toContain("B R1542.0 kW5 runs");
    expect(strip()).toContain("+0.2 ± 1.2 %no difference shown");
  });

  it("shows a dash and no number in a gap", () => {
    const { press, strip } = show();
    press("End");
    press("End");
    expect(strip()).toContain("A R14– kW");
  });

  it("speaks the point politely, once the keys have rested", () => {
    const { press } = show();
    const live = screen.getByRole("status");
    press("Home");
    press("Home");
    press("ArrowRight");
    act(() => vi.advanceTimersByTime(200));
    expect(live.textContent).toBe("");
    act(() => vi.advanceTimersByTime(200));
    expect(live.textContent?.replaceAll("\u202f", " ")).toBe(
      "2 500 per minute, A 62.8, B 63.3 kW, difference plus 0.8 plus or minus 1.2 %",
    );
  });

  it("gives the slider its place in words", () => {
    const { press, slider } = show();
    expect(slider.getAttribute("aria-valuetext")).toBe("resting");
    press("Home");
    press("Home");
    expect(slider.getAttribute("aria-valuenow")).toBe("2000");
    expect(slider.getAttribute("aria-valuetext")).toBe("2\u202f000 per minute");
  });

  it("leaves the curves alone while it moves", () => {
    const { press, container } = show();
    const drawing = container.querySelector('svg[role="img"]');
    if (!drawing) throw new Error("no drawing");
    const seen: MutationRecord[] = [];
    const observer = new MutationObserver((records) => seen.push(...records));
    observer.observe(drawing, { subtree: true, childList: true, attributes: true, characterData: true });
    for (let i = 0; i < 4; i += 1) press("ArrowRight");
    seen.push(...observer.takeRecords());
    expect(seen).toHaveLength(0);
    expect(container.querySelectorAll("circle.marker-a[r='5']")).toHaveLength(1);
    // The observer does see the curves: another quantity redraws them.
    press("]");
    seen.push(...observer.takeRecords());
    expect(seen.length).toBeGreaterThan(0);
  });
});

describe("the view of OverlayChart", () => {
  it("switches quantity and difference, and tells the page so", () => {
    const told = vi.fn();
    const { strip } = show({ onViewChange: told });
    fireEvent.click(screen.getByLabelText("N·m"));
    expect(told).toHaveBeenLastCalledWith(expect.objectContaining({ quantityId: "torque" }));
    expect(strip()).toContain("A R14260.0 N·m");
    fireEvent.click(screen.getByLabelText("Δ N·m"));
    expect(told).toHaveBeenLastCalledWith(expect.objectContaining({ mode: "absolute" }));
    // 3 % of 260 N·m = 7.8; half-width 1.2 % of 260 = 3.12, so tenths are not shown beyond one digit.
    expect(strip()).toContain("+8 ± 3 N·m");
  });

  it("steps through the quantities with [ and ]", () => {
    const told = vi.fn();
    const { press } = show({ onViewChange: told });
    press("]");
    expect(told).toHaveBeenLastCalledWith(expect.objectContaining({ quantityId: "torque" }));
    press("[");
    expect(told).toHaveBeenLastCalledWith(expect.objectContaining({ quantityId: "power" }));
  });

  it("opens the values table with t, but not while a number is typed", () => {
    const { press, container } = show();
    const table = screen.getByText("Values table").closest("details");
    fireEvent.keyDown(screen.getByLabelText("From"), { key: "t" });
    expect(table?.open).toBe(false);
    press("t");
    expect(table?.open).toBe(true);
    expect(within(container).getAllByRole("row").length).toBeGreaterThan(9);
  });

  it("takes a typed range with a comma or a space in it, and gives the whole range back", () => {
    const told = vi.fn();
    show({ onViewChange: told });
    fireEvent.change(screen.getByLabelText("From"), { target: { value: "3 000,0" } });
    fireEvent.change(screen.getByLabelText("To"), { target: { value: "4000" } });
    fireEvent.click(screen.getByRole("button", { name: "Show this range" }));
    expect(told).toHaveBeenLastCalledWith(expect.objectContaining({ range: { from: 3000, to: 4000 } }));
    fireEvent.click(screen.getByRole("button", { name: "Whole range" }));
    expect(told).toHaveBeenLastCalledWith(expect.objectContaining({ range: null }));
    expect(screen.queryByRole("button", { name: "Whole range" })).toBeNull();
  });

  it("refuses a range that runs backwards, in words", () => {
    show();
    fireEvent.change(screen.getByLabelText("From"), { target: { value: "4000" } });
    fireEvent.change(screen.getByLabelText("To"), { target: { value: "3000" } });
    fireEvent.click(screen.getByRole("button", { name: "Show this range" }));
    expect(screen.getByRole("alert").textContent).toContain("the smaller one first");
  });
});
