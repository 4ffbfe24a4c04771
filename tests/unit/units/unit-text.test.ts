import { describe, expect, it } from "vitest";
import { differenceToCanonical, parseUnit, toCanonical } from "@/lib/units/unit-text";
import { expectClose } from "../../support/expect-close";

const convert = (value: number, unit: string) => {
  const parsed = parseUnit(unit);
  if (!parsed) throw new Error(`unknown unit ${unit}`);
  return toCanonical(value, parsed);
};

describe("units become canonical by exact definitions", () => {
  it.each([
    // NIST SP 811 (2008), appendix B.8: factors as printed there, to their printed digits.
    ["km/h", 1, 0.2777778, 5e-8, "SP 811"],
    ["mph", 1, 0.44704, 0, "SP 811, exact"],
    ["knot", 1, 0.5144444, 5e-8, "SP 811"],
    ["ft/s", 1, 0.3048, 0, "SP 811, exact"],
    ["psi", 1, 6.894757, 5e-7, "SP 811"],
    ["lb/in²", 1, 6.894757, 5e-7, "SP 811"],
    ["inHg", 1, 3.386389, 0, "SP 811"],
    ["mmHg", 1, 0.1333224, 0, "SP 811"],
    ["atm", 1, 101.325, 0, "SP 811, exact"],
    ["kgf/cm²", 1, 98.0665, 1e-12, "SP 811, exact"],
    ["bar", 1, 100, 0, "SI brochure, exact"],
    ["mbar", 1013.25, 101.325, 1e-12, "SI brochure, exact"],
    ["hPa", 1013.25, 101.325, 1e-12, "SI prefix"],
    ["g", 1, 9.80665, 0, "CGPM 1901, exact"],
    ["ft", 1, 0.3048, 0, "exact"],
    ["rad/s", Math.PI, 30, 1e-12, "half a turn a second"],
    ["1/s", 50, 3000, 0, "turns a second"],
    ["rad", Math.PI, 180, 1e-12, "half a turn"],
    ["ms", 40, 0.04, 1e-15, "SI prefix"],
    ["min", 2, 120, 0, "exact"],
  ])("1 %s", (unit, value, expected, tolerance) => {
    expectClose(convert(value, unit), expected, { abs: tolerance + 1e-15 });
  });

  it.each([
    // Fixed points by definition of the scales: ice point, boiling point, equal reading at -40, absolute zero.
    ["°F", 32, 0],
    ["°F", 212, 100],
    ["°F", -40, -40],
    ["K", 273.15, 0],
    ["K", 0, -273.15],
    ["°C", 21.5, 21.5],
  ])("%s %d", (unit, value, celsius) => {
    expectClose(convert(value, unit), celsius, { abs: 1e-12 });
  });

  it("a temperature difference takes no offset: 9 °F are 5 K", () => {
    const fahrenheit = parseUnit("°F");
    expectClose(fahrenheit && differenceToCanonical(9, fahrenheit), 5, { abs: 1e-12 });
  });
});

describe("unit texts as loggers write them", () => {
  it.each([
    ["KM/H", "speed"],
    ["km / h", "speed"],
    ["U/min", "rotation"],
    ["min⁻¹", "rotation"],
    ["1/min", "rotation"],
    ["rpm", "rotation"],
    ["℃", "temperature"],
    ["degC", "temperature"],
    ["º", "angle"],
    ["°KW", "angle"],
    ["m/s²", "acceleration"],
    ["m/s^2", "acceleration"],
    ["%", "ratio"],
    ["-", "number"],
    ["", null],
    ["furlong", null],
    [null, null],
  ])("%j", (text, dimension) => {
    expect(parseUnit(text)?.dimension ?? null).toBe(dimension);
  });

  it.each([
    ["bar", null],
    ["bar abs", "absolute"],
    ["bar(a)", "absolute"],
    ["kPa absolute", "absolute"],
    ["psia", "absolute"],
    ["psig", "gauge"],
    ["bar (rel)", "gauge"],
    ["mbar gauge", "gauge"],
  ])("%s says %s", (text, reference) => {
    const parsed = parseUnit(text);
    expect(parsed?.dimension).toBe("pressure");
    expect(parsed?.reference).toBe(reference);
  });
});
