import { describe, expect, it } from "vitest";
import { readTypedNumber } from "@/lib/format/typed-number";

describe("a typed number", () => {
  for (const [text, value] of [
    ["12", 12],
    ["12.5", 12.5],
    ["12,5", 12.5],
    ["0,435", 0.435],
    ["1 286,5", 1286.5],
    ["1\u202f286.5", 1286.5],
    ["-3.1", -3.1],
    ["\u22123,1", -3.1],
    ["+4", 4],
    [" 7 ", 7],
  ] as const) {
    it(`${JSON.stringify(text)} is ${value}`, () => {
      expect(readTypedNumber(text)).toBe(value);
    });
  }

  for (const text of [
    "",
    " ",
    "1,286.5",
    "1.286,5",
    "1,2,3",
    "1e5",
    "0x10",
    "12 kg",
    "--1",
    ".5",
    "5.",
    "Infinity",
  ]) {
    it(`${JSON.stringify(text)} is none`, () => {
      expect(readTypedNumber(text)).toBeNaN();
    });
  }
});
