import { cleanup, fireEvent, render, screen } from "@testing-library/react";
import fc from "fast-check";
import { afterEach, describe, expect, it } from "vitest";
import { CharacteristicCurve } from "@/components/charts/characteristic/characteristic-curve";
import { curveAt, joinCurves } from "@/components/charts/characteristic/join-curves";

afterEach(cleanup);

describe("curveAt", () => {
  const curve = { x: [0, 10, 10, 20], y: [1, 2, 4, 0] };

  // Closed form: a straight line between neighbours, the end values beyond the ends.
  it("reads straight between points, holds the ends, and takes the later of two points at one place", () => {
    expect([-5, 0, 5, 10, 15, 20, 99].map((x) => curveAt(curve, x))).toEqual([1, 1, 1.5, 4, 2, 0, 0]);
  });

  it("has no value beside a gap, and none at all without points", () => {
    expect([0, 4, 5].map((x) => curveAt({ x: [0, 5], y: [null, 3] }, x))).toEqual([null, null, 3]);
    expect(curveAt({ x: [], y: [] }, 1)).toBeNull();
  });
});

describe("joinCurves", () => {
  it("gives back each curve's own values at its own points, whatever the other's points are", () => {
    const curve = fc
      .uniqueArray(fc.integer({ min: -50, max: 50 }), { minLength: 1, maxLength: 12 })
      .chain((points) =>
        fc.record({
          x: fc.constant([...points].sort((p, q) => p - q)),
          y: fc.array(fc.integer({ min: -9, max: 9 }), {
            minLength: points.length,
            maxLength: points.length,
          }),
        }),
      );
    fc.assert(
      fc.property(curve, curve, (a, b) => {
        const joined = joinCurves(a, b);
        expect(joined.x).toEqual([...joined.x].sort((p, q) => p - q));
        for (const [side, own] of [
          [a, joined.a],
          [b, joined.b],
        ] as const) {
          side.x.forEach((x, i) => {
            expect(own[joined.x.indexOf(x)]).toBe(side.y[i]);
          });
        }
      }),
    );
  });

  it("has no difference where one side is absent", () => {
    expect(joinCurves(null, { x: [1, 2], y: [3, 4] })).toEqual({
      x: [1, 2],
      a: [null, null],
      b: [3, 4],
      delta: [null, null],
    });
  });
});

describe("CharacteristicCurve", () => {
  const props = {
    title: "Lambda limit",
    unit: "1",
    decimals: 2,
    axis: { name: "Engine speed", unit: "1/min", decimals: 0 },
    labelA: "R2",
    labelB: "R3",
    summary: "1 of 3 points changed.",
    table: <p>the values</p>,
  };
  /** Inside the drawing: the docked values show samples of the same lines. */
  const drawing = (box: Element, selector: string) =>
    box.querySelector('svg[role="img"]')?.querySelectorAll(selector);
  const a = { x: [1000, 2000, 3000], y: [0.9, 0.85, 0.8] };

  it("draws A dashed with round points, B solid with square ones, and the difference on the same axis", () => {
    const { container } = render(<CharacteristicCurve {...props} a={a} b={{ ...a, y: [0.9, 0.87, 0.8] }} />);
    expect(drawing(container, "path.series-a, path.series-b, path.series-delta")).toHaveLength(3);
    expect(drawing(container, "circle.marker-a")).toHaveLength(3);
    expect(drawing(container, "rect.marker-b")).toHaveLength(3);
    expect(screen.getByText("A R2", { selector: "text" })).toBeTruthy();
    expect(
      screen.getByRole("img", { name: /Lambda limit over Engine speed\. 1 of 3 points changed\./ }),
    ).toBeTruthy();
    expect(container.innerHTML).not.toMatch(/\sstyle=/);
  });

  it("rests at the largest difference and follows the cursor by key", () => {
    const { container } = render(<CharacteristicCurve {...props} a={a} b={{ ...a, y: [0.9, 0.87, 0.8] }} />);
    const strip = () => container.querySelector("dl")?.textContent ?? "";
    expect(strip()).toContain("2\u202f000");
    expect(strip()).toContain("+0.02");
    fireEvent.keyDown(screen.getByRole("slider"), { key: "End" });
    fireEvent.keyDown(screen.getByRole("slider"), { key: "End" });
    expect(strip()).toContain("3\u202f000");
  });

  it("draws no difference where only one side knows the curve", () => {
    const { container } = render(<CharacteristicCurve {...props} a={null} b={a} />);
    expect(drawing(container, "path.series-a, path.series-delta")).toHaveLength(0);
    expect(drawing(container, "path.series-b")).toHaveLength(1);
    expect(screen.getByText("at the first point")).toBeTruthy();
    expect(screen.queryByText("at the largest difference")).toBeNull();
  });
});
