import { describe, expect, it } from "vitest";
import { CHECKSUM_REGION } from "@/db/seed/control-unit/place";
import type { ChangeSet, UncoveredRange } from "@/lib/calibration/changes/types";
import { withoutChecksums } from "@/lib/calibration/changes/uncovered/without-checksums";

const AT = CHECKSUM_REGION.storedAt;
const range = (
  address: number,
  length: number,
  kind: UncoveredRange["kind"] = "differs",
): UncoveredRange => ({
  ...{ address, length, kind, segment: null, programType: null, before: null, after: null },
  ...{ contextAddress: address, digest: "" },
});
const changes = (...uncovered: UncoveredRange[]): ChangeSet => ({
  ...{
    change_set: 1,
    readBy: "both",
    identical: false,
    changedBytes: 0,
    changedRanges: 0,
    characteristics: [],
  },
  ...{ uncovered, uncoveredRanges: uncovered.length, descriptionDifference: null, notRead: [], problems: [] },
  uncoveredBytes: uncovered.reduce((sum, { length }) => sum + length, 0),
});
const left = ({ uncovered, uncoveredBytes, uncoveredRanges }: ChangeSet) => [
  uncovered.map(({ address }) => address),
  uncoveredBytes,
  uncoveredRanges,
];

describe("stored values of declared checksums", () => {
  it("are no bytes that nobody described, whole or in part", () => {
    expect(left(withoutChecksums(changes(range(AT, 4), range(16, 2)), [CHECKSUM_REGION]))).toEqual([
      [16],
      2,
      1,
    ]);
    expect(left(withoutChecksums(changes(range(AT + 1, 1), range(AT + 3, 1)), [CHECKSUM_REGION]))).toEqual([
      [],
      0,
      0,
    ]);
  });
  it("leave what goes beyond them", () => {
    expect(left(withoutChecksums(changes(range(AT - 3, 5)), [CHECKSUM_REGION]))).toEqual([[AT - 3], 3, 1]);
  });
  it("count once where two regions share a value", () => {
    expect(left(withoutChecksums(changes(range(AT, 6)), [CHECKSUM_REGION, CHECKSUM_REGION]))).toEqual([
      [AT],
      2,
      1,
    ]);
  });
  it("are not taken for granted without a declaration, or where the bytes are new", () => {
    expect(left(withoutChecksums(changes(range(AT, 4)), []))).toEqual([[AT], 4, 1]);
    expect(
      left(withoutChecksums(changes(range(AT, 4)), [{ ...CHECKSUM_REGION, storedAt: null, expected: 1 }])),
    ).toEqual([[AT], 4, 1]);
    expect(left(withoutChecksums(changes(range(AT, 4, "only b")), [CHECKSUM_REGION]))).toEqual([[AT], 4, 1]);
  });
});
