import type { AxisKind, CharacteristicType } from "@/lib/calibration/a2l/types";

/** A physical value: a number, a text (words, ASCII), or null where the conversion has none for this raw value. */
export type PhysicalValue = number | string | null;

export interface ReadAxis {
  kind: AxisKind;
  /** Shared axis or curve it rests on, else null. */
  reference: string | null;
  inputQuantity: string | null;
  unit: string;
  decimals: number;
  /** Physical points in logical order. */
  points: PhysicalValue[];
  /** One a point, to tell a change from a rounding; text as in `raw` of cells, "none" where nothing leads to a cell. */
  raw: (number | string)[];
}

/** One stretch of an image. */
export interface ByteRange {
  address: number;
  length: number;
}

/** A characteristic or a shared axis, read from an image. Cells run with x fastest, then y, then z. */
export interface ReadCharacteristic {
  name: string;
  text: string;
  type: CharacteristicType | "AXIS_PTS";
  address: number;
  unit: string;
  /** Decimals to show, from FORMAT or the conversion, 0 to 6. */
  decimals: number;
  /** Cells by axis; [] for one value, [n] for a curve, a block or a shared axis, [2, n] for the pairs of a rescale axis. */
  dims: number[];
  axes: ReadAxis[];
  /** One a cell; [] for ASCII. */
  values: PhysicalValue[];
  /** Raw, one a cell, for exact comparison; text where JSON has no number: beyond 2^53 in decimal, "-0", "NaN", "Infinity". */
  raw: (number | string)[];
  /** ASCII: the characters up to the first NUL. */
  characters: string | null;
  limits: { lower: number; upper: number; extended: readonly [number, number] | null };
  /** Size of one raw step in physical units near the middle of the range, null where it has none (words, float). */
  rawStep: number | null;
  /** Functions and groups that name it, functions first. */
  functions: string[];
  groups: string[];
  readOnly: boolean;
  /** DEPENDENT_CHARACTERISTIC: its formula. */
  formula: string | null;
  /** One value that is some bits of a word: mask and whole word, as hexadecimal text. */
  bits?: { mask: string; word: string };
  /** All bytes that it rests on in its own record (not those of a shared axis). */
  bytes: ByteRange[];
}

/** Everything that a description tells of an image. */
export interface ImageReading {
  reading: 1;
  /** Sorted by name. */
  characteristics: ReadCharacteristic[];
  /** `address`: where it would begin, null where it has no memory of its own; `sets`: functions and groups that name it. */
  notRead: { name: string; reason: string; address: number | null; sets?: string[] }[];
  memorySegments: { name: string; programType: string; address: number; length: number }[];
  /** Whether description and image belong together by their EPK; "none" where the description has none. */
  epk: { state: "match" | "mismatch" | "none"; expected: string | null; found: string | null };
  problems: string[];
}
