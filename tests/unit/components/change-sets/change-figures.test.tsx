import { cleanup, render, screen } from "@testing-library/react";
import { afterEach, describe, expect, it } from "vitest";
import { DescriptionDifference } from "@/components/features/change-sets/bytes/description-difference";
import { ChangeFigure } from "@/components/features/change-sets/detail/change-figure";
import { CURVE, MAP, VALUE } from "./sample";

afterEach(cleanup);

describe("the text difference of two descriptions", () => {
  const hunk = {
    ...{ fromA: 7, fromB: 8 },
    lines: [
      { kind: " " as const, text: "/begin CHARACTERISTIC limit" },
      { kind: "-" as const, text: "0 7000" },
      { kind: "+" as const, text: "0 7200" },
    ],
  };

  it("shows each place with its lines, what is gone and what is new in words and not by colour alone", () => {
    render(<DescriptionDifference difference={{ hunks: [hunk], added: 1, removed: 1, truncated: false }} />);
    expect(screen.getByText("The text of the description differs")).toBeTruthy();
    const place = screen.getByRole("group", { name: "Line 7 before, line 8 after", hidden: true });
    const lines = [...place.querySelectorAll("pre > span")].map((line) => line.textContent?.trim());
    expect(lines).toEqual([
      expect.stringMatching(/\/begin CHARACTERISTIC limit$/),
      expect.stringMatching(/^\u2212 removed: 0 7000$/),
      expect.stringMatching(/^\+ added: 0 7200$/),
    ]);
    expect(screen.queryByText(/Only the first places/)).toBeNull();
  });

  it("is not there for equal texts, and says what it leaves out", () => {
    const none = { hunks: [], added: 0, removed: 0, truncated: false };
    const { container, rerender } = render(<DescriptionDifference difference={none} />);
    expect(container.innerHTML).toBe("");
    rerender(<DescriptionDifference difference={{ ...none, hunks: [hunk], truncated: true }} />);
    expect(screen.getByText("Only the first places are shown.")).toBeTruthy();
    rerender(<DescriptionDifference difference={{ ...none, hunks: null, truncated: true }} />);
    expect(screen.getByText(/too different to be set against each other/)).toBeTruthy();
  });
});

describe("a changed characteristic", () => {
  const drawn = (change: typeof MAP) => {
    cleanup();
    const labels = { before: "R2", after: "R3" };
    const view = { side: "difference" as const, plane: null };
    return render(<ChangeFigure {...{ change, labels, view }} coverage={null} />).container;
  };

  it("is drawn as two curves over one another, as a heat table, or as two values", () => {
    const curve = drawn(CURVE);
    const lines = ["path.series-a", "path.series-b"].map((name) =>
      curve.querySelector(`svg[role="img"] ${name}`)?.getAttribute("d"),
    );
    // Both begin at one place, since the first value is the same, and part at the second.
    expect(lines[0]?.split("L")[0]).toBe(lines[1]?.split("L")[0]);
    expect(lines[0]?.split("L")[1]).not.toBe(lines[1]?.split("L")[1]);
    const map = drawn(MAP);
    expect(map.querySelectorAll("td.heat")).toHaveLength(6);
    expect(map.querySelector("svg[role='img']")).toBeNull();
    const value = drawn(VALUE);
    expect(value.textContent).toMatch(/6\u202f400[\s\S]*6\u202f500/);
    expect(value.querySelector("td.heat")).toBeNull();
  });
});
