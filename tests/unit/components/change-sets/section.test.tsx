import { act, cleanup, fireEvent, render, screen, waitFor, within } from "@testing-library/react";
import { renderToStaticMarkup } from "react-dom/server";
import { afterEach, beforeEach, describe, expect, it, vi } from "vitest";
import { ChangeSetSection } from "@/components/features/change-sets/change-set-section";
import { BYTES_KEY, viewFromParameters } from "@/components/features/change-sets/list/view-address";
import type { RevisionChangesView } from "@/lib/services/change-sets/schema";
import { axis, BYTES, CURVE, change, changeSet, MAP, side, VALUE, view } from "./sample";

const push = vi.fn();
vi.mock("next/navigation", () => ({ useRouter: () => ({ push, refresh: vi.fn() }) }));

beforeEach(() => {
  push.mockReset();
  window.localStorage.clear();
});
afterEach(cleanup);

const look = vi.fn(
  async (_: unknown, _form: FormData): Promise<{ ok: boolean; message?: string }> => ({ ok: true }),
);

function section(shown: RevisionChangesView, parameters: Record<string, string> = {}) {
  return (
    <ChangeSetSection
      view={shown}
      asked={viewFromParameters(parameters)}
      refused={{ ask: null, look: null }}
      actions={{ ask: async () => ({ ok: true }), look }}
      downloads={null}
      watch={<p>watching</p>}
      describe={<p>Add a description.</p>}
    />
  );
}

const withBytes = () =>
  view({ changes: changeSet({ uncovered: [BYTES], uncoveredRanges: 1, uncoveredBytes: 4 }) });
const rows = () => within(screen.getByRole("navigation", { name: "Changes" })).getAllByRole("link");

describe("the list and the opened change", () => {
  it("opens the first one, lists all by function, the bytes outside last", () => {
    render(section(withBytes()));
    expect(
      screen.getByText(/^1 map, 1 curve and 1 value differ from R2; 4 cells; 4 bytes outside/),
    ).toBeTruthy();
    expect(rows().map((row) => row.querySelector("span")?.textContent)).toEqual([
      ...["Boost.Target", "Fuel.Lambda", "Limit_Speed", "4 bytes in 1 place"],
    ]);
    expect(rows()[0]?.getAttribute("aria-current")).toBe("true");
    expect(rows()[0]?.textContent).toContain("2 of 6 cells, \u22122.0 to +9.0\u202fkPa");
    expect(rows()[2]?.textContent).toContain("6\u202f400 → 6\u202f500\u202f1/min");
    expect(screen.getByRole("heading", { name: "Boost.Target" })).toBeTruthy();
    expect(screen.getByRole("table", { name: "Boost.Target, after − before, in kPa" })).toBeTruthy();
  });

  it("opens what the address names, and keeps the rest of the view in every link", () => {
    render(section(withBytes(), { change: "Fuel.Lambda", order: "effect", against: "a" }));
    expect(screen.getByRole("heading", { level: 3, name: "Fuel.Lambda" })).toBeTruthy();
    expect(rows()[0]?.getAttribute("href")).toBe(
      "/revisions/11111111-1111-4111-8111-111111111111?change=Boost.Target&against=a&order=effect#change",
    );
  });

  it("shows the bytes that no characteristic covers, with their segment and surroundings", () => {
    render(section(withBytes(), { change: BYTES_KEY }));
    const line = within(
      screen.getByRole("table", { name: "Changed bytes outside the description" }),
    ).getByRole("row", {
      name: /0x816000/,
    });
    expect(line.textContent).toContain("ECU_Code, CODE");
    // Of the context AA BB CC DD the range is what follows the two bytes in front of it.
    expect([...line.querySelectorAll("strong")].map((bytes) => bytes.textContent)).toEqual([
      "AA BB CC DD",
      "AA BB CC DE",
    ]);
  });

  it("draws each kind in its own way", () => {
    const text = {
      ...change("Label", side([], [], []), side([], [], []), { type: "ASCII", cells: 8, changed: 1 }),
    };
    const named = (characters: string) => ({ ...side([], [], []), characters });
    const changes = changeSet({
      characteristics: [VALUE, CURVE, MAP, { ...text, before: named("A1"), after: named("A2") }],
    });
    const shown = (name: string) => {
      cleanup();
      render(section(view({ changes }), { change: name }));
      return document.getElementById("change")?.textContent ?? "";
    };
    expect(shown("Limit_Speed")).toContain("+100");
    expect(shown("Label")).toContain("“A1”");
    expect(shown("Fuel.Lambda")).toContain("1 of 3 points changed, by +0.02\u202f1.");
  });

  it("tells a moved axis in words with both sides' points", () => {
    const points = (x: number[]) => side([3], [axis(x)], [1, 2, 3]);
    const moved = change("Curve_moved", points([1, 2, 3]), points([1, 2.5, 3]), { axisChanged: true });
    render(section(view({ changes: changeSet({ characteristics: [moved] }) })));
    expect(screen.getByText("Axis points moved: the values hold at other places.")).toBeTruthy();
    expect(screen.getByText("before: 1.0, 2.0, 3.0 1/min")).toBeTruthy();
  });

  it("prints both sides of an axis whose stored points are read otherwise than before", () => {
    const raw = [1, 2, 3];
    const points = (x: number[]) => side([3], [axis(x, { raw })], [1, 2, 3]);
    const moved = change("KL_Rescaled", points([10, 20, 30]), points([10, 25, 30]), {
      type: "VAL_BLK",
      axisChanged: true,
    });
    render(section(view({ changes: changeSet({ characteristics: [moved] }) })));
    expect(screen.getByText("before: 10, 20, 30 1/min")).toBeTruthy();
    expect(screen.getByText("after: 10, 25, 30 1/min")).toBeTruthy();
    expect(screen.getByRole("columnheader", { name: /n_engine, 1\/min, before/ })).toBeTruthy();
  });

  it("works without a description, and calls for one", () => {
    const changes = changeSet({
      readBy: "none",
      characteristics: [],
      uncovered: [BYTES],
      uncoveredRanges: 1,
      uncoveredBytes: 4,
    });
    render(section(view({ changes })));
    expect(screen.getByText("Add a description.")).toBeTruthy();
    expect(screen.getByRole("table", { name: "Changed bytes" })).toBeTruthy();
    expect(screen.queryByRole("navigation", { name: "Changes" })).toBeNull();
  });

  it("says how far it is while nothing is there, and why it failed", () => {
    render(section(view({ state: "computing", changes: null })));
    expect(screen.getByText("watching")).toBeTruthy();
    cleanup();
    render(section(view({ state: "not_asked", changes: null })));
    expect(screen.getByRole("button", { name: "Set R3 against R2" })).toBeTruthy();
    cleanup();
    render(section(view({ state: "failed", changes: null, failure: "Line 8 is cut off." })));
    expect(screen.getByText("Line 8 is cut off.")).toBeTruthy();
    cleanup();
    render(section(view({ state: "nothing_to_compare", against: null, changes: null })));
    expect(screen.getByText(/nothing to set it against/)).toBeTruthy();
  });

  it("shows what differs in the text of the descriptions, where it does", () => {
    const words = "The text of the description differs";
    render(section(withBytes()));
    expect(screen.queryByText(words)).toBeNull();
    cleanup();
    const hunks = [{ fromA: 1, fromB: 1, lines: [{ kind: "+" as const, text: "new" }] }];
    const descriptionDifference = { hunks, added: 1, removed: 0, truncated: false };
    render(section(view({ changes: changeSet({ descriptionDifference }) })));
    expect(screen.getByText(words)).toBeTruthy();
  });

  it("carries no style attribute", () => {
    expect(renderToStaticMarkup(section(withBytes()))).not.toMatch(/\sstyle=/);
  });
});

describe("the keys", () => {
  const press = (key: string, at: Element = document.body) => fireEvent.keyDown(at, { key });

  it("walk from change to change, and stop at the ends with a word", () => {
    render(section(withBytes()));
    press("p");
    expect(push).not.toHaveBeenCalled();
    expect(screen.getByText("This is the first change.")).toBeTruthy();
    press("n");
    press("n");
    expect(
      push.mock.calls.map(([href]) => new URL(href, "http://localhost").searchParams.get("change")),
    ).toEqual([...["Fuel.Lambda", "Limit_Speed"]]);
  });

  it("move focus to the change that was opened and speak where it is", () => {
    const { rerender } = render(section(withBytes()));
    press("n");
    rerender(section(withBytes(), { change: "Fuel.Lambda" }));
    expect(document.activeElement?.textContent).toBe("Fuel.Lambda");
    expect(screen.getByText("Change 2 of 4. Fuel.Lambda, curve, 1 of 3 cells changed.")).toBeTruthy();
  });

  it("are text where text is typed, and belong to a dialog while it is open", () => {
    render(
      <>
        <input aria-label="words" />
        {section(withBytes())}
      </>,
    );
    press("n", screen.getByLabelText("words"));
    expect(push).not.toHaveBeenCalled();
    press("?");
    expect(screen.getByRole("dialog", { name: "Keys" })).toBeTruthy();
    press("n");
    expect(push).not.toHaveBeenCalled();
  });

  it("can all be switched off on this device (WCAG 2.1.4); the button for their list stays", () => {
    render(section(withBytes()));
    press("?");
    fireEvent.click(screen.getByLabelText("Use single keys on this device"));
    fireEvent.click(screen.getByRole("button", { name: "Close" }));
    press("n");
    expect(push).not.toHaveBeenCalled();
    cleanup();
    render(section(withBytes()));
    press("n");
    expect(push).not.toHaveBeenCalled();
    press("?");
    expect(screen.queryByRole("dialog")).toBeNull();
    fireEvent.click(screen.getByRole("button", { name: "Keys" }));
    expect(screen.getByRole("dialog", { name: "Keys" })).toBeTruthy();
  });

  it("mark nothing for who keeps no marks, and are not listed for them", () => {
    look.mockClear();
    render(
      <ChangeSetSection
        {...section(withBytes()).props}
        refused={{ ask: null, look: "Readers keep no marks." }}
      />,
    );
    press("l");
    expect(look).not.toHaveBeenCalled();
    expect(screen.queryByText(/arked as looked at/)).toBeNull();
    press("?");
    expect(screen.getByRole("dialog", { name: "Keys" }).textContent).not.toMatch(/looked at/);
  });
});

describe("looked at", () => {
  it("counts what holds, marks at once, sends the digest, and says when it was refused", async () => {
    let answer: (state: { ok: boolean; message?: string }) => void = () => undefined;
    look.mockImplementationOnce(
      () =>
        new Promise<{ ok: boolean; message?: string }>((resolve) => {
          answer = resolve;
        }),
    );
    render(section({ ...withBytes(), lookedAt: [CURVE.digest, "0".repeat(64)] }));
    expect(screen.getByText("1 of 4 looked at")).toBeTruthy();
    fireEvent.keyDown(document.body, { key: "l" });
    await waitFor(() => expect(screen.getByText("2 of 4 looked at")).toBeTruthy());
    const form = look.mock.calls.at(-1)?.[1];
    expect([form?.getAll("digest"), form?.get("looked"), form?.get("changeSetId")]).toEqual([
      [MAP.digest],
      "yes",
      "44444444-4444-4444-8444-444444444444",
    ]);
    await act(async () => answer({ ok: false, message: "The change set moved." }));
    await waitFor(() => expect(screen.getByText("1 of 4 looked at")).toBeTruthy());
    expect(screen.getByText("The change set moved.")).toBeTruthy();
  });

  it("is a form that works without script: revision, change set and every digest of the opened one", () => {
    const box = document.createElement("div");
    box.innerHTML = renderToStaticMarkup(section(withBytes(), { change: BYTES_KEY }));
    const form = box.querySelector("#change form");
    const fields = [...(form?.querySelectorAll("input") ?? [])].map((input) => [input.name, input.value]);
    expect(fields).toEqual([
      ["revisionId", "11111111-1111-4111-8111-111111111111"],
      ["changeSetId", "44444444-4444-4444-8444-444444444444"],
      ["digest", BYTES.digest],
      ["looked", "yes"],
    ]);
  });
});
