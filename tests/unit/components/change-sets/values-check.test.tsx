import { cleanup, fireEvent, render, screen, waitFor, within } from "@testing-library/react";
import { afterEach, describe, expect, it, vi } from "vitest";
import { CheckValuesFile } from "@/components/features/change-sets/check-values-file";
import {
  checkSentence,
  differenceTexts,
  leftOutOf,
  placeText,
} from "@/components/features/change-sets/words/values-check-words";
import { checkValues, type ValuesCheck } from "@/lib/calibration/cdf/check-values";
import type { CdfInstance } from "@/lib/calibration/cdf/types";
import { LARGEST_VALUES_FILE_BYTES } from "@/lib/services/change-sets/schema";
import { madeCharacteristic, madeReading } from "../../../support/made-reading";

const fetched = vi.fn<(path: string, init: RequestInit) => Promise<Response>>();
vi.stubGlobal("fetch", fetched);
afterEach(() => {
  cleanup();
  fetched.mockReset();
});

const reading = madeReading(
  madeCharacteristic({ name: "Table", type: "MAP", unit: "kPa", dims: [2, 2], values: [100, 110, 120, 130] }),
  madeCharacteristic({ name: "Limit", unit: "-", values: [6400], rawStep: 1, decimals: 0 }),
);
const instance = (name: string, dims: number[], values: CdfInstance["values"], unit = ""): CdfInstance => ({
  ...{ name, text: "", category: "VALUE", unit, dims, values, axes: [], functions: [] },
});
const checkOf = (...instances: CdfInstance[]): ValuesCheck =>
  checkValues(
    { ...reading, notRead: [{ name: "Far", reason: "No bytes.", address: 0 }] },
    { instances, notes: [], problems: [] },
    2,
  );
const same = instance("Table", [2, 2], [100, 110, 120, 130], "kPa");

describe("the words of a check", () => {
  it("says agreement only with what was compared", () => {
    expect(checkSentence(checkOf(same))).toBe("The file and the image agree in all 4 values (1 name).");
    expect(checkSentence(checkOf(same, instance("Strange", [], [1])))).toBe(
      "The file and the image agree in all 4 values that could be compared (1 name).",
    );
    expect(checkSentence({ ...checkOf(same), problems: ["Table is there more than once."] })).toContain(
      "could be",
    );
    expect(checkSentence(checkOf(instance("Limit", [], [6400])))).toBe(
      "The file and the image agree in the one value (1 name).",
    );
    expect(checkSentence(checkOf())).toBe("The file holds no values.");
    expect(checkSentence(checkOf(instance("Strange", [], [1])))).toMatch(/^Nothing was compared/);
  });

  it("counts values and names that differ", () => {
    const check = checkOf(
      instance("Table", [2, 2], [100, 111, 121, 131], "bar"),
      instance("Limit", [], [6400]),
    );
    expect(checkSentence(check)).toBe("3 of 5 values differ, in 1 of 2 names.");
    expect(leftOutOf(check).map(({ listed }) => listed.first)).toEqual([
      [{ name: "Table", why: "bar in the file, kPa in the image" }],
    ]);
  });

  it("names a place, and prints as many digits as show the difference", () => {
    expect(placeText({ axis: null, index: [] })).toBe("");
    expect(placeText({ axis: null, index: [1, 0] })).toBe("x 1, y 0");
    expect(placeText({ axis: "x", index: [2] })).toBe("axis x, point 2");
    const at = { name: "a", axis: null, index: [], unit: "", decimals: 1 };
    expect(differenceTexts({ ...at, image: 1.25, file: 1.2, difference: -0.05 })).toEqual({
      ...{ image: "1.25", file: "1.20", difference: "\u22120.05" },
    });
    expect(differenceTexts({ ...at, image: "on", file: null, difference: null })).toEqual({
      ...{ image: "on", file: "–", difference: "–" },
    });
  });
});

describe("the card", () => {
  const card = (described: Parameters<typeof CheckValuesFile>[0]["described"] = "read") =>
    render(<CheckValuesFile revision={{ id: "r-1", number: 7 }} described={described} />);
  const choose = (name: string, sizeBytes = 20) => {
    const file = new File(["<MSRSW/>"], name);
    Object.defineProperty(file, "size", { value: sizeBytes });
    fireEvent.change(screen.getByLabelText("Values file to hold against R7"), { target: { files: [file] } });
    return file;
  };

  it("sends the file as it is and lists what differs, in units, with what was not compared", async () => {
    const check = checkOf(
      instance("Table", [2, 2], [100, 111, 121, 131], "kPa"),
      instance("Limit", [], [6500]),
      instance("Strange", [], [1]),
      instance("Far", [], [1]),
    );
    fetched.mockResolvedValue(Response.json(check));
    card();
    const file = choose("values.cdfx");
    await waitFor(() => expect(screen.getByText("4 of 5 values differ, in 2 of 2 names.")).toBeTruthy());
    expect(fetched.mock.calls[0]?.[0]).toBe("/api/revisions/r-1/values-check");
    expect(fetched.mock.calls[0]?.[1]).toMatchObject({ method: "POST", body: file });
    const table = screen.getByRole("table", { name: /Values that differ/ });
    const rows = within(table).getAllByRole("row").slice(1);
    expect(rows.map((row) => row.textContent)).toEqual([
      "Tablex 1, y 0111.0110.0+1.0kPa",
      "Tablex 0, y 1121.0120.0+1.0kPa",
    ]);
    expect(screen.getByText("The first 2 of 4 are listed.")).toBeTruthy();
    expect(screen.getByText("Strange")).toBeTruthy();
    expect(screen.getByText("No bytes.")).toBeTruthy();
  });

  it("says that both agree", async () => {
    fetched.mockResolvedValue(Response.json(checkOf(same, instance("Limit", [], [6400]))));
    card();
    choose("values.cdfx");
    await waitFor(() =>
      expect(screen.getByRole("status").textContent).toContain("agree in all 5 values (2 names)."),
    );
    expect(screen.queryByRole("table")).toBeNull();
  });

  it("shows the server's sentence for a refused file, and sends none that is too large or empty", async () => {
    const message = "The file is XML but no ASAM CDF values file: it has no MSRSW element.";
    fetched.mockResolvedValue(Response.json({ error: "not_cdf", message }, { status: 422 }));
    card();
    choose("page.xml");
    await waitFor(() => expect(screen.getByRole("alert").textContent).toContain(message));
    choose("large.cdfx", LARGEST_VALUES_FILE_BYTES + 1);
    await waitFor(() => expect(screen.getByRole("alert").textContent).toContain("the limit is 16 MB"));
    choose("none.cdfx", 0);
    await waitFor(() => expect(screen.getByRole("alert").textContent).toContain("is empty"));
    expect(fetched).toHaveBeenCalledTimes(1);
  });

  it.each([
    [null, /A description is needed/],
    ["reading", /still being read/],
    ["refused", /was refused/],
  ] as const)(
    "with a description that is %s says what is needed and takes no file",
    (described, sentence) => {
      card(described);
      expect(screen.getByText(sentence)).toBeTruthy();
      expect(screen.queryByRole("button")).toBeNull();
    },
  );
});
