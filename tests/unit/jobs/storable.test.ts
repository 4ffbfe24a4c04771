import { expect, test } from "vitest";
import { storable } from "@/lib/jobs/calibration/storable";

// PostgreSQL's manual, 8.14 "JSON Types": jsonb refuses \\u0000 and halves of surrogate pairs.
test("what the database can't keep becomes the replacement character, and nothing else changes", () => {
  const value = { a: "x\0y", b: ["\ud800", "\udc00z", "\ud83d\ude00"], c: undefined, d: 1.5, e: null };
  expect(storable(value)).toEqual({
    a: "x\ufffdy",
    b: ["\ufffd", "\ufffdz", "\ud83d\ude00"],
    d: 1.5,
    e: null,
  });
});
