import { describe, expect, it } from "vitest";
import { pointsOf } from "@/db/seed/control-unit/item";
import { CHECKSUM_REGION, ITEMS, MEMORY } from "@/db/seed/control-unit/place";
import { CHANGES, type ImageName, imageBytes, itemsOf } from "@/db/seed/control-unit/revisions";
import { SCALES } from "@/db/seed/control-unit/scales";
import { writeDescription } from "@/db/seed/control-unit/write-description";
import { EFFECTS } from "@/db/seed/demo-effects";
import { demoImage } from "@/db/seed/demo-image";
import { readDescription } from "@/lib/calibration/a2l/read-description";
import { changeSetOf } from "@/lib/calibration/changes/change-set";
import { suggestedLinks } from "@/lib/calibration/coverage/suggest-links";
import { checkRegions } from "@/lib/calibration/image/checksum-regions";
import { readImage } from "@/lib/calibration/image/read-image";
import { readImageByDescription } from "@/lib/calibration/values/read-image-by-description";

// The definition in db/seed/control-unit is the truth; the bytes and the text come from it by a writer that shares nothing with the readers.
const NAMES = Object.keys(CHANGES) as ImageName[];
const description = readDescription([{ name: "marlin.a2l", bytes: new Uint8Array(writeDescription()) }]);
const imageOf = (name: ImageName) => readImage(new Uint8Array(demoImage(name)), { fileName: "marlin.hex" });
const readingOf = (name: ImageName) => readImageByDescription(description, imageOf(name));
const isWord = (scale: keyof typeof SCALES) => SCALES[scale].method.type === "TAB_VERB";

describe("the description of the demo's control unit", () => {
  it("is read without a note, whole", () => {
    expect([description.notes, description.notRead, description.missingIncludes]).toEqual([[], [], []]);
    expect(description.modules[0].characteristics.size).toBe(ITEMS.length);
    expect(ITEMS.length).toBeGreaterThanOrEqual(40);
  });
  it("has every kind of axis, of characteristic up to cuboids, and of conversion", () => {
    const [{ characteristics, conversions, functions }] = description.modules;
    const all = [...characteristics.values()];
    expect(new Set(all.flatMap(({ axes }) => axes.map(({ kind }) => kind)))).toEqual(
      new Set(["STD_AXIS", "COM_AXIS", "FIX_AXIS", "RES_AXIS", "CURVE_AXIS"]),
    );
    expect(new Set(all.map(({ type }) => type))).toEqual(
      new Set(["VALUE", "CURVE", "MAP", "CUBOID", "VAL_BLK", "ASCII"]),
    );
    expect(new Set(Array.from(conversions.values(), ({ kind }) => kind))).toEqual(
      new Set(["identical", "linear", "rational", "table", "words", "formula"]),
    );
    expect(new Set(all.map(({ derived }) => derived?.kind))).toEqual(
      new Set([undefined, "virtual", "dependent"]),
    );
    expect([...functions.keys()]).toEqual(["Boost", "Fuel", "Ignition", "Torque", "Limiter"]);
  });
});

describe.each(NAMES)("image %s", (name) => {
  const reading = readingOf(name);
  const read = new Map(reading.characteristics.map((each) => [each.name, each]));
  const items = itemsOf(name);

  it("belongs to the description, and its checksum holds", () => {
    expect(reading.epk).toMatchObject({ state: "match", found: MEMORY.epk.text });
    expect(reading.problems).toEqual([]);
    expect(checkRegions(imageOf(name), [CHECKSUM_REGION])).toMatchObject([{ state: "holds" }]);
  });
  it("everything but what is virtual is read", () => {
    expect(reading.notRead.map((each) => each.name)).toEqual(["Fuel.Flow_of_all"]);
  });
  it("gives the physical values of the definition", () => {
    for (const item of items.filter(({ derived }) => derived?.kind !== "virtual")) {
      const found = read.get(item.name);
      if (item.characters) expect(found?.characters).toBe(item.characters.text);
      else if (isWord(item.scale)) expect(typeof found?.values[0]).toBe("string");
      else {
        expect(found?.values.length, item.name).toBe(item.values?.length);
        for (const [cell, value] of (item.values ?? []).entries())
          expect(found?.values[cell], item.name).toBeCloseTo(value, 9);
      }
      item.axes?.forEach((axis, at) => {
        expect(found?.axes[at].inputQuantity).toBe(axis.quantity);
        for (const [i, point] of pointsOf(axis).entries())
          expect(found?.axes[at].points[i], item.name).toBeCloseTo(point, 9);
      });
    }
    expect(read.get("Boost.Control_kind")?.values).toEqual(["closed loop"]);
    expect(read.get("Fuel.Lambda_control")?.values).toEqual(["on"]);
    expect(read.get("Limiter.Stage")?.values).toEqual(["firm"]);
  });
  it("no value lies outside of its limits", () => {
    for (const { name: key, values, limits } of reading.characteristics)
      for (const value of values)
        if (typeof value === "number") expect(value >= limits.lower && value <= limits.upper, key).toBe(true);
  });
});

describe("what the revisions change", () => {
  const side = (name: ImageName) => ({ image: imageOf(name), reading: readingOf(name) });
  const changes = (a: ImageName, b: ImageName) =>
    changeSetOf(side(a), side(b), { readBy: "both", descriptionDifference: null });
  const namesOf = (a: ImageName, b: ImageName) =>
    changes(a, b)
      .characteristics.map(({ name }) => name)
      .sort();

  it.each([
    ["asFound", "midRange", ["Boost.Target", "Data_label", "Fuel.Lambda_target"]],
    ["asFound", "topEnd", ["Data_label", "Ignition.Base"]],
    ["midRange", "ignition", ["Boost.Target", "Data_label", "Fuel.Lambda_target", "Ignition.Base"]],
    [
      ...(["ignition", "visitor"] as const),
      ["Boost.Overshoot_most", "Boost.Target", "Data_label", "Fuel.Lambda_target", "Ignition.Air_correction"],
    ],
  ] as const)("%s to %s", (a, b, names) => {
    expect(namesOf(a, b)).toEqual(names);
  });
  it("only the last one touches bytes that nobody described, beside the checksum", () => {
    expect(changes("asFound", "midRange").uncovered.map(({ address }) => address)).toEqual([
      MEMORY.checksumAt,
    ]);
    expect(changes("ignition", "visitor").uncovered.map(({ segment }) => segment)).toEqual([
      MEMORY.code.name,
      MEMORY.data.name,
    ]);
    expect(changes("ignition", "visitor").characteristics.find(({ axisChanged }) => axisChanged)?.name).toBe(
      "Ignition.Air_correction",
    );
  });
  it("at full pedal the pressure asked for is what the simulated engine builds up, to what a workshop types", () => {
    for (const name of NAMES) {
      const target = readingOf(name).characteristics.find((each) => each.name === "Boost.Target");
      const speeds = target?.axes[0].points ?? [];
      speeds.forEach((rpm, at) => {
        if (typeof rpm !== "number" || rpm < 2500) return;
        const asked = Number(target?.values[at + 7 * speeds.length]);
        expect(Math.abs(asked - EFFECTS[name].engine.boostKpa(rpm)), `${name} at ${rpm}`).toBeLessThan(4.5);
      });
    }
  });
  it("with boost the air ratio asked for is the one that the simulated engine runs at, to what a workshop types", () => {
    for (const name of NAMES) {
      const target = readingOf(name).characteristics.find((each) => each.name === "Fuel.Lambda_target");
      const [speeds, pressures] = target?.axes.map(({ points }) => points.map(Number)) ?? [];
      const boosted = pressures.findIndex((kPa) => kPa >= 160);
      expect(boosted).toBeGreaterThan(0);
      speeds.forEach((rpm, at) => {
        const asked = Number(target?.values[at + boosted * speeds.length]);
        expect(Math.abs(asked - EFFECTS[name].engine.lambda(rpm)), `${name} at ${rpm}`).toBeLessThan(0.00051);
      });
    }
  });
  it("ignition is later exactly where the simulated engine loses torque at the top", () => {
    const base = (name: ImageName) =>
      readingOf(name).characteristics.find((each) => each.name === "Ignition.Base");
    const [before, after] = [base("asFound"), base("topEnd")];
    const speeds = before?.axes[0].points.map(Number) ?? [];
    const last = (before?.values.length ?? 0) - speeds.length;
    const later = speeds.filter(
      (_, at) => Number(after?.values[last + at]) < Number(before?.values[last + at]),
    );
    expect(later).toEqual(speeds.filter((rpm) => EFFECTS.topEnd.gain(rpm) < -0.005));
    expect(later.length).toBeGreaterThan(0);
  });
});

describe("what moves along the axes", () => {
  it.each([
    ["engine_speed", "1/min", "engine_speed"],
    ["manifold_pressure_absolute", "kPa", "manifold_pressure"],
    ["pedal_position", "%", "pedal"],
    ["intake_air_temperature", "°C", "intake_temperature"],
    ["coolant_temperature", "°C", "coolant_temperature"],
    ["exhaust_gas_temperature", "°C", "exhaust_temperature"],
  ])("%s is found among the channels of the demo's logs", (quantity, unit, channel) => {
    const columns = [{ title: "one of the log", channel }];
    expect(suggestedLinks({ quantity, unit }, columns)).toEqual([{ quantity, channel, by: "title" }]);
  });
  it("the image is as long as its two parts of memory", () => {
    expect(imageBytes("asFound").length).toBe(MEMORY.code.length + MEMORY.data.length);
  });
});
