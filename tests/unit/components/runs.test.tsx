import { cleanup, render, screen, within } from "@testing-library/react";
import { afterEach, describe, expect, it, vi } from "vitest";
import { type OrderCardRow, OrderCardTable } from "@/components/features/road-days/order-card-table";
import { RunFields } from "@/components/features/runs/run-fields";
import { RunPeak } from "@/components/features/runs/run-figures";
import { RunList } from "@/components/features/runs/run-list";
import { VerdictCard } from "@/components/features/runs/verdict-card";
import type { RunLine } from "@/lib/services/runs/schema";

afterEach(cleanup);

const LINE: RunLine = {
  id: "6f0c0c5e-2a0b-4d52-9f0f-0a4b2d1c9e11",
  number: 12,
  driveOrder: 3,
  leg: "back",
  kind: "pull",
  gear: 3,
  revisionId: "6f0c0c5e-2a0b-4d52-9f0f-0a4b2d1c9e12",
  letter: null,
  revisionNumber: 15,
  testerName: "A tester",
  fileName: "pull-03.csv",
  verdict: "usable",
  setAside: false,
  why: [],
  next: null,
  notes: 0,
  finding: null,
  peakKw: 184.06,
  peakUncertaintyKw: 5.52,
};

describe("RunList", () => {
  it("names the run, what was in the car, how it was driven, and its verdict in a word", () => {
    render(<RunList runs={[LINE]} />);
    const [item] = screen.getAllByRole("listitem");
    expect(item?.textContent).toContain("R15");
    expect(item?.textContent).toContain("back, pull, gear 3");
    expect(item?.textContent).toContain("Usable");
    expect(item?.textContent).toMatch(/peak 184\.1 ± 5\.5\u202fkW, air of the day/);
    expect(screen.getByRole("link", { name: "Run 12" }).getAttribute("href")).toBe(`/runs/${LINE.id}`);
  });

  it("says why a run is refused and what to do next", () => {
    const refused = {
      verdict: "refused",
      why: ["No column is a time."],
      next: "Export again.",
      peakKw: null,
      peakUncertaintyKw: null,
    } as const;
    render(<RunList runs={[{ ...LINE, ...refused, why: [...refused.why] }]} />);
    expect(screen.getByText("Refused")).toBeTruthy();
    expect(screen.getByText("No column is a time.")).toBeTruthy();
    expect(screen.getByText("Export again.")).toBeTruthy();
  });

  it("says so where no ± of a peak is stated", () => {
    render(<RunList runs={[{ ...LINE, peakUncertaintyKw: null }]} />);
    expect(screen.getByRole("listitem").textContent).toContain("kW (± not stated)");
  });

  it("tells the worst finding at once, and how many more there are", () => {
    const finding = { consequence: "masked", sentence: "The driven wheels spin." } as const;
    render(<RunList runs={[{ ...LINE, finding, notes: 3 }]} />);
    expect(screen.getByText("Left out")).toBeTruthy();
    expect(screen.getByRole("listitem").textContent).toContain(
      "The driven wheels spin. And 2 more findings.",
    );
  });

  it("shows no figure of a run that is set aside", () => {
    render(<RunList runs={[{ ...LINE, setAside: true, why: ["a gust"] }]} />);
    expect(screen.getByText("Set aside")).toBeTruthy();
    expect(screen.queryByText(/peak/)).toBeNull();
  });
});

describe("VerdictCard", () => {
  const shown = { verdict: "usable", reasons: [], notes: [], next: null, setAside: null } as const;

  const notes = [
    { code: "jitter", message: "Rows come early or late.", consequence: "warned" as const },
    { code: "lift", message: "The pedal falls.", from_s: 6, to_s: 6.6, consequence: "masked" as const },
    { code: "wheel_spin", message: "The driven wheels spun.", from_s: 3.1, to_s: 3.64 },
  ];

  it("lists findings by consequence, what is left out first, each with its code and span", () => {
    render(<VerdictCard {...shown} notes={notes} />);
    const sections = screen.getAllByRole("region", { name: /Left out|Warned/ });
    expect(sections.map((one) => within(one).getByRole("heading").textContent)).toEqual([
      expect.stringContaining("Left out"),
      expect.stringContaining("Warned"),
    ]);
    const items = within(sections[0]).getAllByRole("listitem");
    expect(items.map((item) => item.textContent)).toEqual([
      "The driven wheels spun.3.10 to 3.64 swheel_spin",
      "The pedal falls.6.00 to 6.60 slift",
    ]);
    expect(within(sections[1]).getByRole("listitem").textContent).toBe(
      "Rows come early or late.whole logjitter",
    );
  });

  it("tells what refuses a run before all else", () => {
    const reasons = [{ code: "pull_too_short", message: "The pull covers 20 %." }];
    render(<VerdictCard {...shown} verdict="refused" reasons={reasons} notes={notes} />);
    const [first] = screen.getAllByRole("region", { name: /Refused|Left out|Warned/ });
    expect(first.textContent).toContain("pull_too_short");
  });

  it("links a span to the traces where the page draws them", () => {
    render(<VerdictCard {...shown} notes={notes} hasTraces />);
    const link = screen.getByRole("link", { name: "Show in the traces: 3.10 to 3.64 s" });
    expect(link.getAttribute("href")).toBe("#traces:3.10,3.64");
  });

  it("says so where nothing was found", () => {
    render(<VerdictCard {...shown} />);
    expect(screen.getByText(/Nothing was found against this run/)).toBeTruthy();
  });

  it("says whether the result could be seen when the run was set aside", () => {
    const aside = { by: "A lead", at: "1 Jan 2030", reason: "a gust" };
    render(<VerdictCard {...shown} setAside={{ ...aside, resultWasVisible: true }} />);
    expect(screen.getByText(/Its result could be seen then/)).toBeTruthy();
    cleanup();
    render(<VerdictCard {...shown} setAside={{ ...aside, resultWasVisible: false }} />);
    expect(screen.getByText(/could not be seen yet/)).toBeTruthy();
  });
});

describe("RunPeak", () => {
  const peak = {
    engine_kw: 184,
    engine_kw_rpm: 6000,
    engine_nm: 320,
    engine_nm_rpm: 3500,
    uncertainty_kw: 5.5,
  };
  const factor = {
    id: "din70020",
    value: 0.98,
    in_range: null,
    applied: true,
    why: "Chosen by hand.",
  } as const;

  it("names the air, gives the ± that is known, and says that the factor is not in the peak", () => {
    render(<RunPeak result={{ id: "1", usable: true, reasons: [], notes: [], peak, factor }} />);
    expect(screen.getByText("Peak power, crank estimate, air of the day")).toBeTruthy();
    expect(screen.getByText(/± 5\.5/)).toBeTruthy();
    expect(screen.getByText(/320\.0/).textContent).toContain("(± not stated)");
    expect(screen.getByText(/The peak above does not carry it\./)).toBeTruthy();
  });
});

describe("OrderCardTable", () => {
  const row: OrderCardRow = {
    ...{ place: 3, twin: 2, revision: "R15", side: "B", leg: "out" },
    ...{ writeBefore: true, run: null, isNext: true },
  };

  it("says what to write before the next drive", () => {
    render(<OrderCardTable rows={[row]} />);
    expect(screen.getByRole("row", { name: /next/ }).textContent).toMatch(/write R15, settle.*R15 out/);
  });

  it("tells a place driven as planned, otherwise, or refused apart", () => {
    const driven = (place: number, verdict: "usable" | "refused", other: string | null): OrderCardRow => ({
      ...row,
      place,
      isNext: false,
      run: { number: place, verdict, other },
    });
    render(
      <OrderCardTable
        rows={[driven(1, "usable", null), driven(2, "usable", "R14 back"), driven(3, "refused", null)]}
      />,
    );
    expect(screen.getByText("run 1")).toBeTruthy();
    expect(screen.getByText("run 2, but R14 back")).toBeTruthy();
    expect(screen.getByText("run 3 refused")).toBeTruthy();
  });
});

describe("RunFields", () => {
  it("hands every change on and shows where the order card says otherwise", () => {
    const onChange = vi.fn();
    render(
      <RunFields
        fileName="pull.csv"
        values={{ revisionId: "a", driveOrder: "1", leg: "out", kind: "pull", gear: "3" }}
        revisions={[{ id: "a", number: 14, title: "standing" }]}
        gears={6}
        cardSays="The order card has R15 out at place 1."
        onChange={onChange}
      />,
    );
    screen.getByLabelText("BACK").click();
    expect(onChange).toHaveBeenCalledWith({ leg: "back" });
    expect(screen.getByText(/R15 out at place 1/)).toBeTruthy();
    expect(screen.getByRole("combobox", { name: "Gear" }).querySelectorAll("option")).toHaveLength(7);
  });
});
