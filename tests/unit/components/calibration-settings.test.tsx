import { cleanup, fireEvent, render, screen, waitFor, within } from "@testing-library/react";
import { afterEach, describe, expect, it, vi } from "vitest";
import { LinksForm } from "@/components/features/programmes/calibration/links-form";
import { MarksForm } from "@/components/features/programmes/calibration/marks-form";
import {
  NEW_REGION,
  regionOf,
  typedOf,
  typedRegion,
} from "@/components/features/programmes/calibration/region-values";
import { parametersText } from "@/components/features/programmes/calibration/region-words";
import { RegionsForm } from "@/components/features/programmes/calibration/regions-form";
import type { ChecksumRegion } from "@/lib/calibration/image/checksum-regions";

afterEach(cleanup);

const programmeId = "6f0c0c5e-2a0b-4d52-9f0f-0a4b2d1c9e11";
const saving = () => vi.fn(async (_input: unknown) => ({ ok: true, value: { version: 3 } }));
const press = (name: string | RegExp) => fireEvent.click(screen.getByRole("button", { name }));

describe("MarksForm", () => {
  const fuel = { set: "function" as const, name: "Fuel", relevance: "emission" as const, note: "" };

  it("offers the functions of the descriptions that are not marked, and saves what was picked and typed", async () => {
    const action = saving();
    render(
      <MarksForm
        {...{ programmeId, action }}
        version={2}
        marks={[fuel]}
        known={["Boost", "Fuel"]}
        blockedBecause={null}
      />,
    );
    const list = screen.getByRole("combobox", { name: "Function or group of the description" });
    expect(
      within(list)
        .getAllByRole("option")
        .map((option) => option.textContent),
    ).toEqual(["Choose one", "Boost"]);
    fireEvent.change(list, { target: { value: "Boost" } });
    press("Mark it");
    fireEvent.change(screen.getByLabelText("By its name"), { target: { value: " Limit_Speed " } });
    press("Mark the characteristic");
    fireEvent.change(screen.getByRole("combobox", { name: "Limit_Speed is relevant for" }), {
      target: { value: "safety" },
    });
    press("Save as version 3");
    await waitFor(() => expect(action).toHaveBeenCalledOnce());
    expect(action).toHaveBeenCalledWith({
      programmeId,
      basedOnVersion: 2,
      marks: [
        fuel,
        { ...fuel, name: "Boost" },
        { set: "characteristic", name: "Limit_Speed", relevance: "safety", note: "" },
      ],
    });
  });

  it("says why a version was refused", async () => {
    const action = vi.fn(async () => ({
      ok: false,
      message: "Somebody else saved a newer version meanwhile.",
    }));
    render(
      <MarksForm {...{ programmeId, action }} version={2} marks={[fuel]} known={[]} blockedBecause={null} />,
    );
    press("Take out: Fuel");
    press("Save as version 3");
    await screen.findByText("Somebody else saved a newer version meanwhile.");
  });
});

describe("MarksForm that sends nothing", () => {
  it("says why: a name that is too long, a note that is", async () => {
    const action = saving();
    render(
      <MarksForm {...{ programmeId, action }} version={2} marks={[]} known={[]} blockedBecause={null} />,
    );
    fireEvent.change(screen.getByLabelText("By its name"), { target: { value: "x".repeat(201) } });
    press("Mark the function");
    press("Save as version 3");
    await screen.findByText("A name has at most 200 characters.");
    press(/^Take out/);
    fireEvent.change(screen.getByLabelText("By its name"), { target: { value: "Fuel" } });
    press("Mark the function");
    fireEvent.change(screen.getByLabelText("Note on Fuel"), { target: { value: "x".repeat(501) } });
    press("Save as version 3");
    await screen.findByText("Some fields need another look: each says why.");
    expect(action).not.toHaveBeenCalled();
  });
});

describe("LinksForm", () => {
  const quantity = (name: string, parts = {}) => ({
    ...{ quantity: name, text: "", unit: "1/min", link: null, suggestions: [] },
    ...parts,
  });

  it("saves a suggestion at one tap, beside what is linked already", async () => {
    const action = saving();
    const link = { quantity: "n", channel: "engine_speed", by: "title" as const };
    const links = [{ quantity: "old", channel: "pedal", by: "hand" as const }];
    render(
      <LinksForm
        {...{ programmeId, action, links }}
        version={1}
        quantities={[quantity("n", { suggestions: [link] })]}
        blockedBecause={null}
      />,
    );
    press("Use engine speed");
    await waitFor(() =>
      expect(action).toHaveBeenCalledWith({ programmeId, basedOnVersion: 1, links: [...links, link] }),
    );
  });

  it("says what is linked by itself, and takes a channel or a column's title by hand", async () => {
    const action = saving();
    const link = { quantity: "n", channel: "engine_speed", by: "title" as const };
    render(
      <LinksForm
        {...{ programmeId, action }}
        links={[]}
        version={0}
        quantities={[quantity("n", { link }), quantity("air_charge", { unit: "%" })]}
        blockedBecause={null}
      />,
    );
    expect(screen.getByText("Linked by itself to engine speed, by its name.")).toBeTruthy();
    const list = screen.getByRole("combobox", { name: "Channel of air_charge" });
    fireEvent.change(list, {
      target: {
        value: within(list)
          .getByText(/by its title/)
          .getAttribute("value"),
      },
    });
    fireEvent.change(screen.getByLabelText("Title of the column for air_charge"), {
      target: { value: "air_charge_w [%]" },
    });
    press("Save as version 1");
    await waitFor(() =>
      expect(action).toHaveBeenCalledWith({
        programmeId,
        basedOnVersion: 0,
        links: [{ quantity: "air_charge", channel: "air_charge_w [%]", by: "hand" }],
      }),
    );
  });
});

describe("regions", () => {
  const crc: ChecksumRegion = {
    ...{ name: "data", from: 0x810000, to: 0x81ffff, storedAt: 0x81fffc, expected: null, byteOrder: "big" },
    excluded: [{ from: 0x810010, to: 0x810013 }],
    algorithm: "crc16",
    parameters: { polynomial: 0x1021, initial: 0xffff, finalXor: 0, reflectIn: false, reflectOut: false },
  };
  const sum: ChecksumRegion = {
    ...{
      name: "code",
      from: 0x16000,
      to: 0x1686b,
      storedAt: null,
      expected: 0x12345678,
      byteOrder: "little",
    },
    algorithm: "sum32",
    parameters: { wordBytes: 4, wordOrder: "little", complement: "twos" },
  };

  it("come back from the form as they went into it", () => {
    for (const region of [crc, sum]) expect(regionOf(typedRegion.parse(typedOf(region)))).toEqual(region);
  });

  it("are refused with what is wrong and where", () => {
    const faults = (parts: object) => {
      const result = typedRegion.safeParse({
        ...NEW_REGION,
        name: "x",
        from: "0x10",
        to: "0x20",
        storedAt: "0x1C",
        ...parts,
      });
      return result.success
        ? []
        : result.error.issues.map(({ path, message }) => `${path.join(".")}: ${message}`);
    };
    expect(faults({})).toEqual([]);
    expect(faults({ to: "0x8" })).toEqual(["to: It lies before the first address."]);
    expect(faults({ from: "810000h" })).toEqual(["from: Write it as 0x810000 or as a whole number."]);
    expect(faults({ from: "4294967296" })).toEqual([
      "from: It has more than 32 bits.",
      "to: It lies before the first address.",
    ]);
    expect(faults({ storedAt: "" })).toEqual([
      "storedAt: Say where the value is stored, or what it must be.",
    ]);
    expect(faults({ excluded: "0x11-0x12, 0x14-0x13" })).toEqual([
      'excluded: "0x14-0x13" is no stretch: write 0x810000-0x81000F.',
    ]);
    expect(faults({ polynomial: "" })).toEqual(["polynomial: A CRC needs its polynomial."]);
  });

  it("are told in one line", () => {
    expect(parametersText(crc)).toBe("polynomial 0x1021, start 0xFFFF, nothing reflected, final XOR 0x0");
    expect(parametersText(sum)).toBe("sum of words of 4 bytes, low byte first, twos' complement");
  });

  it("are declared by a form", async () => {
    const action = saving();
    render(<RegionsForm {...{ programmeId, action }} version={0} regions={[]} blockedBecause={null} />);
    press("Add a region");
    press("Save as version 1");
    await screen.findByText("Give it a name.");
    expect(action).not.toHaveBeenCalled();
    const type = (label: RegExp, value: string) =>
      fireEvent.change(screen.getByLabelText(label), { target: { value } });
    type(/^Name/, "data");
    type(/^First address/, "0x810000");
    type(/^Last address/, "0x81FFFF");
    type(/^Stored at/, "0x81FFFC");
    // The document of these tests does not show what a form starts with in its lists.
    type(/^Checksum/, "crc32");
    type(/^Stored with/, "big");
    press("Save as version 1");
    await waitFor(() => expect(action).toHaveBeenCalledOnce());
    expect(action.mock.calls[0]?.[0]).toMatchObject({
      regions: [
        {
          name: "data",
          from: 0x810000,
          to: 0x81ffff,
          storedAt: 0x81fffc,
          algorithm: "crc32",
          byteOrder: "big",
        },
      ],
    });
  });
});
