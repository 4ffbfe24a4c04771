import { describe, expect, it } from "vitest";
import {
  axisQuantities,
  type LogColumn,
  linksInUse,
  suggestedLinks,
} from "@/lib/calibration/coverage/suggest-links";
import { change, changeSet, side } from "@/tests/support/change-set-sample";

const COLUMNS: LogColumn[] = [
  { title: " nEng ", channel: "engine_speed" },
  { title: "Boost abs", channel: "manifold_pressure" },
  { title: "GPS speed", channel: "gps_speed" },
  { title: "air_charge", channel: null },
];
const suggested = (quantity: string, unit: string, columns = COLUMNS) =>
  suggestedLinks({ quantity, unit }, columns).map(({ channel, by }) => [by, channel]);

describe("Suggestions", () => {
  it("are a column of the same title first, whatever its letter case", () => {
    expect(suggested("AIR_CHARGE", "%")).toEqual([["column", "air_charge"]]);
    expect(suggested("neng", "1/min")[0]).toEqual(["column", " nEng "]);
  });

  it("are the channel that the name means, where a log has it", () => {
    expect(suggested("EngineSpeed", "rpm")).toEqual([["title", "engine_speed"]]);
    expect(suggested("EngineSpeed", "rpm", COLUMNS.slice(1))).toEqual([]);
    expect(suggested("EngineSpeed_target", "rpm")).toEqual([]);
    expect(suggested("VehicleSpeed", "km/h")).toEqual([["title", "gps_speed"]]);
  });

  it("need a unit that converts, or none where the channel is clear without", () => {
    expect(suggested("EngineSpeed", "kPa")).toEqual([]);
    expect(suggested("EngineSpeed", "")).toEqual([["title", "engine_speed"]]);
    expect(suggested("ManifoldPressure", "")).toEqual([]);
    expect(suggested("ManifoldPressure", "hPa")).toEqual([["title", "manifold_pressure"]]);
  });

  it("hold gauge and absolute pressure apart", () => {
    expect(suggested("ManifoldPressure", "kPa gauge")).toEqual([]);
    const gauge = [...COLUMNS, { title: "Boost", channel: "manifold_pressure_gauge" }];
    expect(suggested("ManifoldPressure", "kPa gauge", gauge)).toEqual([["title", "manifold_pressure_gauge"]]);
  });
});

describe("Links in use", () => {
  const named = (quantities: [string, string][]) => {
    const axes = side([1, 2, 3, 4], [0, 1], [0, 1]);
    for (const [k, [quantity, unit]] of quantities.entries())
      Object.assign(axes.axes[k], { inputQuantity: quantity || null, unit });
    return changeSet([change("map", axes, axes), change("again", axes, axes)]);
  };

  it("prefer what a person chose, and take only what is sure", () => {
    const set = named([
      ["EngineSpeed", "rpm"],
      ["BoostPressure", "kPa"],
    ]);
    const found = linksInUse(set, { chosen: [], columns: COLUMNS });
    // Nobody says whether that boost pressure is absolute, so it is offered and not taken.
    expect(found).toEqual([{ quantity: "EngineSpeed", channel: "engine_speed", by: "title" }]);
    expect(suggested("BoostPressure", "kPa")).toEqual([["title", "manifold_pressure"]]);
    const byHand = { quantity: "BoostPressure", channel: "Boost abs", by: "hand" as const };
    expect(linksInUse(set, { chosen: [byHand], columns: COLUMNS })).toContainEqual(byHand);
  });

  it("ask once for a quantity, and by name and axis where there is none", () => {
    const set = named([
      ["EngineSpeed", "rpm"],
      ["", "kPa"],
    ]);
    expect(axisQuantities(set).map(({ quantity }) => quantity)).toEqual(["EngineSpeed", "map/y", "again/y"]);
    expect(axisQuantities(set)[0].text).toBe("engine speed");
  });
});
