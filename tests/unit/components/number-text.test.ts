import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { dateTimeText } from "@/components/ui/data/date-time";
import { counted, decimalsForHalfWidth, listed, numberText } from "@/components/ui/data/number-text";

describe("counted and listed", () => {
  it("takes one thing by its own word, and joins the last part with and", () => {
    expect(counted(1, "byte")).toBe("1 byte");
    expect(counted(1234, "shared axis", "shared axes")).toBe("1\u202f234 shared axes");
    expect([listed([]), listed(["a"]), listed(["a", "b", "c"])]).toEqual(["", "a", "a, b and c"]);
  });
});

describe("numberText", () => {
  it("parts thousands by a narrow no-break space and uses the real minus", () => {
    expect(numberText(18204)).toBe("18\u202f204");
    expect(numberText(1234567.891, { decimals: 2 })).toBe("1\u202f234\u202f567.89");
    expect(numberText(-1500)).toBe("\u22121\u202f500");
    expect(numberText(999)).toBe("999");
  });

  it("does not part the digits behind the point", () => {
    expect(numberText(0.12345, { decimals: 5 })).toBe("0.12345");
  });

  it("signs differences, but never a value that rounds to zero", () => {
    expect(numberText(4.66, { decimals: 1, signed: true })).toBe("+4.7");
    expect(numberText(-0.13, { decimals: 2, signed: true })).toBe("\u22120.13");
    expect(numberText(-0.04, { decimals: 1, signed: true })).toBe("0.0");
    expect(numberText(-0)).toBe("0");
  });

  it("shows a gap as a gap", () => {
    for (const gap of [null, undefined, Number.NaN, Number.POSITIVE_INFINITY])
      expect(numberText(gap)).toBe("–");
  });

  it("reads back to the rounded value", () => {
    fc.assert(
      fc.property(
        fc.double({ min: -1e9, max: 1e9, noNaN: true }),
        fc.integer({ min: 0, max: 4 }),
        (value, decimals) => {
          const text = numberText(value, { decimals }).replaceAll("\u202f", "").replace("\u2212", "-");
          expect(Number(text)).toBeCloseTo(value, decimals - 1e-9);
        },
      ),
    );
  });
});

describe("decimalsForHalfWidth", () => {
  it("makes the last digit worth about a third of the half-width", () => {
    expect([0.05, 0.8, 2.5, 4, 40].map((half) => decimalsForHalfWidth(half, 9))).toEqual([2, 1, 1, 0, 0]);
  });

  it("falls back where no half-width is known, and stops at four digits", () => {
    expect([null, undefined, 0].map((half) => decimalsForHalfWidth(half, 3))).toEqual([3, 3, 3]);
    expect(decimalsForHalfWidth(1e-9, 1)).toBe(4);
  });
});

describe("dateTimeText", () => {
  it("shows the time at the place with its zone, summer and winter", () => {
    expect(dateTimeText(new Date("2026-11-19T13:32:00Z"), "Europe/Berlin")).toBe("19 Nov 2026 14:32 CET");
    expect(dateTimeText(new Date("2026-07-19T13:32:05Z"), "Europe/Berlin", "second")).toBe(
      "19 Jul 2026 15:32:05 CEST",
    );
    expect(dateTimeText(new Date("2026-11-19T23:32:00Z"), "Europe/Berlin", "day")).toBe("20 Nov 2026");
  });
});
