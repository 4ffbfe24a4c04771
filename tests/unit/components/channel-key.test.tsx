import { QueryClient, QueryClientProvider } from "@tanstack/react-query";
import { cleanup, configure, fireEvent, render, screen, waitFor, within } from "@testing-library/react";
import { afterEach, describe, expect, it, vi } from "vitest";
import { appliedWords } from "@/components/features/channel-keys/applied-words";
import { ChannelKeyWork } from "@/components/features/channel-keys/channel-key-work";
import { UnitLists } from "@/components/features/channel-keys/unit-lists";
import { UploadReadingLine } from "@/components/features/channel-keys/upload-reading";
import { RefusedRowsCard } from "@/components/features/runs/refused-rows";
import { previewLog } from "@/lib/logs/preview/preview-log";
import type { ChannelKey } from "@/lib/logs/types";
import type { StatedKey, UploadReading } from "@/lib/services/channel-keys/schema";
import { parseUnit } from "@/lib/units/unit-text";

const RUN = "6f0c0c5e-2a0b-4d52-9f0f-0a4b2d1c9e11";
const KEY = "6f0c0c5e-2a0b-4d52-9f0f-0a4b2d1c9e22";

// The page waits a moment before it asks; a busy machine takes longer.
configure({ asyncUtilTimeout: 10_000 });
vi.setConfig({ testTimeout: 30_000 });
afterEach(() => {
  cleanup();
  vi.unstubAllGlobals();
});

/** A log whose titles no reader knows; the decimal comma is beyond doubt. */
const LOG = Buffer.from(
  [
    "Time [s];Rad h;Kurbel;Bemerkung",
    ...Array.from({ length: 60 }, (_, i) =>
      `${i / 10};${30 + i},5;${1500 + 40 * i};gut`.replaceAll(".", ","),
    ),
  ].join("\n"),
);
const previewWith = (key: ChannelKey) => previewLog({ bytes: LOG, complete: true }, { key });

/** The form on this log. The answer of the server is the parser's own, as on the real page. */
function open(
  versions: { id: string; name: string; version: number; savedBy: string; savedAt: string }[] = [],
) {
  const fetched = vi.fn(async (_: string, init: RequestInit) => {
    const { key } = JSON.parse(String(init.body)) as { key: StatedKey };
    return Response.json({ preview: previewWith(key), missing: null });
  });
  vi.stubGlobal("fetch", fetched);
  const save = vi.fn(async () => ({ ok: true, value: { judgedAgain: [3, 4], cited: [1] } }));
  const apply = vi.fn(async () => ({ ok: true, value: { judgedAgain: [3], cited: [] } }));
  render(
    <ChannelKeyWork
      versions={{ runId: RUN, used: null, versions, action: apply }}
      form={{
        ...{ runId: RUN, kind: "pull", engineSpeedFromSheet: false, initialKey: {}, initialName: "" },
        ...{ newestVersion: versions.length, action: save },
        initial: { preview: previewWith({}), missing: "Still missing: engine speed." },
      }}
    />,
  );
  return { save, apply, fetched };
}
const choose = (name: string, value: string) =>
  fireEvent.change(screen.getByRole("combobox", { name }), { target: { value } });

describe("the channel-key page", () => {
  it("shows every column with what it was read as, and blocks saving while something is missing", () => {
    const { save } = open();
    const columns = within(screen.getByRole("list", { name: "Columns" })).getAllByRole("listitem");
    expect(columns.map((column) => column.getAttribute("aria-label"))).toEqual([
      "Time [s]",
      "Rad h",
      "Kurbel",
      "Bemerkung",
    ]);
    expect(columns[0]?.textContent).toContain("The time column");
    expect(columns[1]?.textContent).toContain("30,5");
    expect(columns[3]?.textContent).toContain("no cell of it is a number");
    expect(screen.getByText("Left out: Rad h, Kurbel, Bemerkung.")).toBeTruthy();
    const table = screen.getByRole("table", { name: "First rows as parsed" });
    expect(within(table).getAllByRole("row")).toHaveLength(21);
    fireEvent.click(screen.getByRole("button", { name: /Save version 1/ }));
    expect(save).not.toHaveBeenCalled();
    expect(screen.getByText("Still missing: engine speed.")).toBeTruthy();
  });

  it("reads the log anew with each choice and saves what was stated", async () => {
    const { save, fetched } = open();
    choose("Channel of Rad h", "wheel_speed_undriven");
    fireEvent.change(screen.getByRole("textbox", { name: "Name of the logger required" }), {
      target: { value: "Black box" },
    });
    fireEvent.change(await screen.findByRole("combobox", { name: "Unit of Rad h" }), {
      target: { value: "km/h" },
    });
    choose("Channel of Kurbel", "engine_speed");
    await screen.findByText(/undriven wheel speed 30\.5 to 89\.5 km\/h: looks right/);
    await screen.findByText(/engine speed 1\s500 to 3\s860 1\/min: looks right/);
    const asked = JSON.parse(String(fetched.mock.calls.at(-1)?.[1].body));
    expect(asked.key.columns).toEqual({
      "Rad h": { channel: "wheel_speed_undriven", unit: "km/h" },
      Kurbel: { channel: "engine_speed" },
    });
    expect(screen.getByText("Left out: Bemerkung.")).toBeTruthy();
    fireEvent.click(screen.getByRole("button", { name: "Save version 1 and judge again" }));
    await screen.findByText(/The key is saved\. Runs 3, 4 are judged again\. Run 1 stays as it is/);
    expect(save).toHaveBeenCalledWith({
      runId: RUN,
      name: "Black box",
      basedOnVersion: 0,
      everyRun: true,
      key: {
        columns: {
          "Rad h": { channel: "wheel_speed_undriven", unit: "km/h" },
          Kurbel: { channel: "engine_speed" },
        },
      },
    });
  });

  it("marks what looks wrong: a decimal mark said wrongly shows at once", async () => {
    open();
    choose("Channel of Rad h", "lambda");
    // In the column's own line, and above among what is in doubt.
    expect(await screen.findAllByText("lambda 30.5 to 89.5: decimal mark?")).toHaveLength(2);
    choose("Delimiter", "|");
    await screen.findByText("The log can’t be read like this");
  });

  it("offers the versions that are there, one tap to use one", async () => {
    const { apply } = open([
      { id: KEY, name: "Black box", version: 2, savedBy: "A tester", savedAt: "1 Jan 2030" },
    ]);
    expect(screen.getByRole("heading", { name: "Key “Black box” v2 fits" })).toBeTruthy();
    fireEvent.click(screen.getByRole("button", { name: "Use Black box version 2" }));
    await screen.findByText("Run 3 is judged again.");
    expect(apply).toHaveBeenCalledWith({ runId: RUN, channelKeyId: KEY, everyRun: false });
  });

  it("says when nothing changes", () => {
    expect(appliedWords({ judgedAgain: [], cited: [] })).toBe("No run is read differently.");
  });
});

it("offers only units that the reader knows", () => {
  const { container } = render(<UnitLists />);
  const options = [...container.querySelectorAll("option")].map((option) => option.value);
  expect(options.length).toBeGreaterThan(20);
  for (const unit of options) expect(parseUnit(unit), unit).not.toBeNull();
});

describe("the line below a sent log", () => {
  const READING: UploadReading = {
    ...{ wholeFile: true, rateHz: 50, rowsRead: 900, columnCount: 12, columns: [] },
    ...{ found: ["engine speed"], leftOut: ["Sats"], inDoubt: ["“Tempo” states no unit."] },
    fitting: { id: KEY, name: "Black box", version: 2 },
    withKey: {
      ...{ rateHz: 50, rowsRead: 900, columnCount: 12, leftOut: [], inDoubt: [] },
      found: ["engine speed", "GPS speed"],
    },
  };

  function show(usedKeyId: string | null) {
    vi.stubGlobal("fetch", async () => Response.json(READING));
    const onUse = vi.fn();
    render(
      <QueryClientProvider client={new QueryClient()}>
        <UploadReadingLine {...{ uploadId: RUN, roadDayId: RUN, fileName: "a.csv", usedKeyId, onUse }} />
      </QueryClientProvider>,
    );
    return onUse;
  }

  it("says what was found, left out and is in doubt, and offers the key that fits", async () => {
    const onUse = show(null);
    await screen.findByText("12 columns, 50 rows a second; engine speed; left out: Sats.");
    expect(screen.getByText(/In doubt: “Tempo” states no unit/)).toBeTruthy();
    expect(screen.getByText("Key “Black box” v2 fits.")).toBeTruthy();
    fireEvent.click(screen.getByRole("button", { name: "Use key Black box for a.csv" }));
    expect(onUse).toHaveBeenCalledWith(READING.fitting);
  });

  it("shows the reading under the key once it is used, which can be taken back", async () => {
    const onUse = show(KEY);
    await screen.findByText("12 columns, 50 rows a second; engine speed, GPS speed; nothing left out.");
    expect(screen.queryByText(/In doubt/)).toBeNull();
    fireEvent.click(screen.getByRole("button", { name: "Do not use key Black box for a.csv" }));
    await waitFor(() => expect(onUse).toHaveBeenCalledWith(null));
  });
});

it("lists the first rows that a run went on without, and where all can be had", () => {
  const first = [{ row: 18204, column: "Time [s]", raw: "12,x", reason: "has no readable time" }];
  render(
    <RefusedRowsCard runId={RUN} refused={{ total: 14, atLeast: false, first }} blockedBecause={null} />,
  );
  expect(screen.getByText(/The run went on without 14 bad rows/)).toBeTruthy();
  const table = screen.getByRole("table");
  for (const text of ["18204", "Time [s]", "12,x", "has no readable time"])
    expect(within(table).getByText(text)).toBeTruthy();
  const link = screen.getByRole("link", { name: "Download all as CSV" });
  expect(link.getAttribute("href")).toBe(`/api/runs/${RUN}/refused-rows`);
});
