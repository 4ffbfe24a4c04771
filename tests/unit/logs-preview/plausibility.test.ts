import { describe, expect, test } from "vitest";
import { plausibility } from "@/lib/logs/preview/plausibility";
import { requiredChannels, whatIsMissing } from "@/lib/logs/preview/required-channels";
import type { KnownChannel } from "@/lib/logs/types";

// The ranges are common practice for a road car, no source; the words are those of the page's design.
const CASES: [KnownChannel, number, number, boolean, string][] = [
  ["engine_speed", 0, 8200, true, "engine speed 0 to 8\u202f200 1/min: looks right"],
  ["lambda", 98, 140, false, "lambda 98 to 140: decimal mark?"],
  ["engine_speed", 0.8, 6.5, false, "engine speed 0.8 to 6.5 1/min: decimal mark?"],
  ["gps_speed", 0, 38.9, true, "GPS speed 0 to 140 km/h: looks right"],
  ["gps_speed", 0, 3890, false, "GPS speed 0 to 14\u202f000 km/h: unit or decimal mark?"],
  ["gps_speed", 0, 0, false, "GPS speed 0 to 0 km/h: it never changes; is the sensor connected?"],
  ["pedal", 0, 1, false, "pedal 0 to 1 %: a fraction instead of per cent?"],
  ["coolant_temperature", 353, 371, false, "coolant temperature 353 to 371 °C: unit or decimal mark?"],
  // Inside the range of any car, but the reader knows the slip by name: the page must not call it right.
  ["coolant_temperature", 140, 190, false, "coolant temperature 140 to 190 °C: in °F?"],
  ["lambda", 11.2, 14.7, false, "lambda 11.2 to 14.7: an air-fuel ratio instead of lambda?"],
  ["latitude", 200, 201, false, "latitude 200 to 201 deg: decimal mark?"],
  ["intake_temperature", -12.5, 31, true, "intake temperature \u221212.5 to 31 °C: looks right"],
];

describe("plausibility", () => {
  for (const [channel, min, max, looksRight, sentence] of CASES)
    test(sentence, () => {
      expect(plausibility(channel, { min, max })).toEqual({ looksRight, sentence });
    });

  test("of a column without values says so", () => {
    expect(plausibility("lambda", null)).toEqual({
      looksRight: false,
      sentence: "lambda: the column holds no value",
    });
  });
});

describe("what a run needs", () => {
  const missing = (kind: "pull" | "coast-down" | "sprint", channels: string[], fromSheet = false) =>
    whatIsMissing(requiredChannels(kind, fromSheet), { time: true, channels: new Set(channels) });

  test("is time, a road speed, and for a pull engine speed unless the sheet tells it", () => {
    expect(missing("pull", ["gps_speed", "engine_speed"])).toBeNull();
    expect(missing("pull", ["gps_speed"])).toBe("Still missing: engine speed. Say which column holds it.");
    expect(missing("pull", ["gps_speed"], true)).toBeNull();
    expect(missing("coast-down", ["engine_speed"])).toContain("a road speed");
    expect(missing("sprint", ["wheel_speed_undriven"])).toBeNull();
    expect(whatIsMissing([], { time: false, channels: new Set() })).toContain("a time column");
  });
});
