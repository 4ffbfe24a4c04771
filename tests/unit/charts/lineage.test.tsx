import { renderToStaticMarkup } from "react-dom/server";
import { describe, expect, it } from "vitest";
import { LineageGraph } from "@/components/charts/lineage/lineage-graph";
import { lineageLayout } from "@/components/charts/lineage/lineage-layout";
import { type LineageState, RevisionMark, STATE_PHRASE } from "@/components/charts/lineage/lineage-mark";

const link = (id: string, parentId: string | null) => ({ id, parentId });

describe("lineageLayout", () => {
  it("keeps a line without branches in one lane", () => {
    const { rows, lanes } = lineageLayout([link("3", "2"), link("2", "1"), link("1", null)], "3");
    expect(lanes).toBe(1);
    expect(rows.map((row) => [row.id, row.lane, row.joins, row.continues])).toEqual([
      ["3", 0, [], true],
      ["2", 0, [0], true],
      ["1", 0, [0], false],
    ]);
  });

  it("gives the line that stands the first lane, also when newer work hangs beside it", () => {
    // R4 and R3 both come from R2, which stands.
    const { rows, lanes } = lineageLayout(
      [link("4", "2"), link("3", "2"), link("2", "1"), link("1", null)],
      "2",
    );
    expect(lanes).toBe(3);
    expect(rows.map((row) => [row.id, row.lane, row.through, row.joins])).toEqual([
      ["4", 1, [], []],
      ["3", 2, [1], []],
      ["2", 0, [], [1, 2]],
      ["1", 0, [], [0]],
    ]);
  });

  it("leads a side branch down beside the standing line and ends it at its root", () => {
    // R5 stands on R3; R4 was tried from R2.
    const { rows } = lineageLayout([link("5", "3"), link("4", "2"), link("3", "2"), link("2", null)], "5");
    expect(rows.map((row) => [row.id, row.lane, row.through, row.joins])).toEqual([
      ["5", 0, [], []],
      ["4", 1, [0], []],
      ["3", 0, [1], [0]],
      ["2", 0, [], [0, 1]],
    ]);
  });

  it("uses a lane again once its branch has ended", () => {
    const links = [
      link("6", "5"),
      link("5", "3"),
      link("4", "3"),
      link("3", "1"),
      link("2", "1"),
      link("1", null),
    ];
    const { rows, lanes } = lineageLayout(links, "6");
    expect(lanes).toBe(2);
    expect(rows.map((row) => row.lane)).toEqual([0, 0, 1, 0, 1, 0]);
  });

  it("ends a line whose parent is not in the list", () => {
    expect(lineageLayout([link("9", "8")], "9").rows[0]?.continues).toBe(false);
  });

  it("works without a standing revision", () => {
    expect(lineageLayout([link("2", "1"), link("1", null)], null).rows.map((row) => row.lane)).toEqual([
      0, 0,
    ]);
    expect(lineageLayout([], null)).toEqual({ rows: [], lanes: 1 });
  });
});

describe("LineageGraph", () => {
  const states = Object.keys(STATE_PHRASE) as LineageState[];

  it("is a list of links, newest first, with the state of each in words", () => {
    const box = document.createElement("div");
    box.innerHTML = renderToStaticMarkup(
      <LineageGraph
        label="Lineage of a programme"
        nodes={[
          {
            id: "b",
            parentId: "a",
            label: "R2",
            title: "boost ramp",
            state: "validating",
            href: "/methods",
          },
          { id: "a", parentId: null, label: "R1", title: "as found", state: "stands", href: "/cautions" },
        ]}
      />,
    );
    expect(box.querySelector("ol")?.getAttribute("aria-label")).toBe("Lineage of a programme");
    expect([...box.querySelectorAll("li")].map((row) => row.textContent)).toEqual([
      "R2boost rampvalidating",
      "R1as foundstands",
    ]);
    expect([...box.querySelectorAll("a")].map((a) => a.getAttribute("href"))).toEqual([
      "/methods",
      "/cautions",
    ]);
    expect(box.innerHTML).not.toMatch(/\sstyle=/);
  });

  it("draws a mark of its own for every state", () => {
    const marks = states.map((state) =>
      renderToStaticMarkup(<RevisionMark state={state} />).replaceAll(/(fill|stroke)-[a-z0-9]+/g, ""),
    );
    expect(new Set(marks).size).toBe(states.length);
  });
});
