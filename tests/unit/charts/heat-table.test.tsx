import { cleanup, render, screen } from "@testing-library/react";
import { renderToStaticMarkup } from "react-dom/server";
import { afterEach, describe, expect, it } from "vitest";
import { heatStep } from "@/components/charts/heat/heat-ramp";
import { HeatTable, type HeatTableProps } from "@/components/charts/heat/heat-table";
import { firstChange } from "@/components/charts/heat/use-start-at-change";

afterEach(cleanup);

describe("heatStep", () => {
  it("steps by thirds of the largest difference, plain for none", () => {
    expect([-9, -6.1, -6, -3, -0.1, 0, null, 0.1, 3.1, 9].map((value) => heatStep(value, 9))).toEqual([
      ...["heat-a3", "heat-a3", "heat-a2", "heat-a1", "heat-a1", "heat-0", "heat-0"],
      ...["heat-b1", "heat-b2", "heat-b3"],
    ]);
  });
});

const TABLE: HeatTableProps = {
  caption: "Target pressure, after − before, in kPa",
  x: { head: "Engine speed, 1/min", points: ["1\u202f000", "2\u202f000"], was: [null, "1\u202f900"] },
  y: { head: "Pedal, %", points: ["50", "100"] },
  cells: [
    [
      { text: "·", step: "heat-0" },
      { text: "+1.5", step: "heat-b3", isUnvisited: true, mark: { glyph: "▲", words: "above the limit" } },
    ],
    [
      { text: "off → on", step: "heat-0", isEdged: true },
      { text: "–", step: "heat-0", below: "4.2\u202fs, 3×" },
    ],
  ],
};

describe("HeatTable", () => {
  it("prints every cell with its marks in words, and axis points as heads, a moved one with the old one", () => {
    render(<HeatTable {...TABLE} />);
    expect(screen.getAllByRole("cell").map((cell) => cell.textContent)).toEqual([
      "·",
      "▲ above the limit: +1.5, not visited",
      "off → on",
      "–4.2\u202fs, 3×",
    ]);
    expect(screen.getAllByRole("rowheader").map((head) => head.textContent)).toEqual(["50", "100"]);
    const heads = screen.getAllByRole("columnheader").map((head) => head.textContent);
    expect(heads).toEqual(["Pedal, %", "Engine speed, 1/min", "1\u202f000", "1\u202f900, now 2\u202f000"]);
  });

  it("tells ink, corner and edge by classes alone: the content policy refuses style attributes", () => {
    const box = document.createElement("div");
    box.innerHTML = renderToStaticMarkup(<HeatTable {...TABLE} />);
    const classes = [...box.querySelectorAll("td")].map((cell) => cell.className);
    expect(classes).toEqual([
      "heat heat-0",
      "heat heat-b3 heat-unvisited",
      "heat heat-0 heat-edged",
      "heat heat-0",
    ]);
    expect(box.innerHTML).not.toMatch(/\sstyle=/);
  });

  it("names its only row where there is no second axis", () => {
    render(<HeatTable {...TABLE} y={null} rowHead="after − before" cells={TABLE.cells.slice(0, 1)} />);
    expect(screen.getAllByRole("rowheader").map((head) => head.textContent)).toEqual(["after − before"]);
  });
});

describe("firstChange", () => {
  const plain = { text: "·", step: "heat-0" } as const;
  it("is the first row and the first column that hold a change, whichever cells they meet in", () => {
    const rise = { text: "+1", step: "heat-b1" } as const;
    expect(
      firstChange([
        [plain, plain, plain],
        [plain, plain, rise],
        [plain, rise, plain],
      ]),
    ).toEqual({ row: 1, column: 1 });
    expect(firstChange([[plain]])).toBeNull();
  });
});
