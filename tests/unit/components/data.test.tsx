import { cleanup, render, screen } from "@testing-library/react";
import { renderToStaticMarkup } from "react-dom/server";
import { afterEach, describe, expect, it } from "vitest";
import { DateTime } from "@/components/ui/data/date-time";
import { Fingerprint } from "@/components/ui/data/fingerprint";
import { Quantity } from "@/components/ui/data/quantity";
import { type Column, Table } from "@/components/ui/data/table";

afterEach(cleanup);

const text = (markup: string) => markup.replaceAll(/<[^>]+>/g, "").replaceAll("\u202f", " ");

describe("Quantity", () => {
  it("keeps value, half-width, unit and n together, with digits that the half-width carries", () => {
    expect(
      text(renderToStaticMarkup(<Quantity value={2.317} unit="kW" halfWidth={0.8} signed n={6} />)),
    ).toBe("+2.3 ± 0.8 kW · n 6");
  });

  it("shows a gap without inventing a ±", () => {
    expect(text(renderToStaticMarkup(<Quantity value={null} unit="kW" halfWidth={0.8} />))).toBe("– kW");
  });
});

describe("Fingerprint", () => {
  const value = "3f9ac2e14b7d8890aa0c11ee5f24c7d2b6a993d01e5f7788c0ffee1234567890";

  it("is short to the eye and whole in the title", () => {
    render(<Fingerprint value={value} />);
    const code = screen.getByTitle(value);
    expect(code.textContent).toBe("3f9ac2…567890");
    expect(screen.getByRole("button", { name: "Copy fingerprint" })).toBeDefined();
  });

  it("prints whole in groups of eight on demand", () => {
    render(<Fingerprint value={value} full copy={false} />);
    expect(screen.getByTitle(value).textContent?.replaceAll(" ", "")).toBe(value);
    expect(screen.queryByRole("button")).toBeNull();
  });
});

describe("DateTime", () => {
  it("holds the same instant in UTC for machines and on hover", () => {
    const markup = renderToStaticMarkup(<DateTime at="2026-11-19T13:32:00Z" zone="Europe/Berlin" />);
    expect(markup).toContain('dateTime="2026-11-19T13:32:00.000Z"');
    expect(markup).toContain('title="2026-11-19 13:32:00 UTC"');
    expect(text(markup)).toBe("19 Nov 2026 14:32 CET");
  });

  it("prints a dash for what is no instant", () => {
    expect(text(renderToStaticMarkup(<DateTime at="soon" zone="UTC" />))).toBe("–");
  });
});

describe("Table", () => {
  const columns: Column<{ name: string; kw: number }>[] = [
    { key: "name", header: "Check", rowHeader: true, cell: (row) => row.name },
    { key: "kw", header: "Power", unit: "kW", numeric: true, cell: (row) => row.kw },
  ];

  it("has a caption, scoped heads, and a unit in the head", () => {
    render(
      <Table
        caption="Evidence"
        columns={columns}
        rows={[{ name: "Peak", kw: 190.9 }]}
        rowKey={(r) => r.name}
      />,
    );
    expect(screen.getByRole("table", { name: "Evidence" })).toBeDefined();
    expect(screen.getAllByRole("columnheader").map((head) => head.textContent)).toEqual([
      "Check",
      "Power, kW",
    ]);
    expect(screen.getByRole("rowheader").textContent).toBe("Peak");
    expect(screen.getByRole("cell").className).toContain("text-right");
  });

  it("can be reached by key where it scrolls", () => {
    render(
      <Table caption="Evidence" columns={columns} rows={[]} rowKey={(r) => r.name} empty="No runs yet." />,
    );
    expect(screen.getByRole("group", { name: "Evidence" }).tabIndex).toBe(0);
    expect(screen.getByText("No runs yet.")).toBeDefined();
  });
});
