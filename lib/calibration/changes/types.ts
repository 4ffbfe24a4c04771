import type { CalibrationImage } from "@/lib/calibration/image/types";
import type {
  ByteRange,
  ImageReading,
  PhysicalValue,
  ReadCharacteristic,
} from "@/lib/calibration/values/types";

/** One revision: its image, and what a description tells of it where there is one. */
export interface RevisionContent {
  reading: ImageReading | null;
  image: Pick<CalibrationImage, "segments">;
}

/** Where a value lies towards the description's limits; outside soft limits but inside the extended ones is "extended". */
export type LimitState = "ok" | "extended" | "below" | "above";

export interface CellChange {
  /** Cell by axis: x, y, z …; [] for one value. */
  index: number[];
  before: PhysicalValue;
  after: PhysicalValue;
  limit: LimitState;
}

/** One side of a changed characteristic, whole, so that it can be drawn. */
export type ChangeSide = Pick<ReadCharacteristic, "dims" | "axes" | "values" | "characters">;

export interface CharacteristicChange {
  name: string;
  text: string;
  type: ReadCharacteristic["type"];
  address: number;
  unit: string;
  decimals: number;
  /** Of either description: those of the one after come first. */
  functions: string[];
  groups: string[];
  /** added / removed: only one of the two descriptions knows it. The same content at another address is no change (a problem tells it). */
  kind: "changed" | "added" | "removed";
  cells: number;
  /** Cells whose raw value differs (logical place by place where the shapes are alike). */
  changed: number;
  /** Own or shared axis points differ: values then hold at other places; cells are compared by index only where the shape is alike. */
  axisChanged: boolean;
  shapeChanged: boolean;
  before: ChangeSide | null;
  after: ChangeSide | null;
  changes: CellChange[];
  /** Largest rise and fall in its own unit, after − before; null for words. */
  largestRise: number | null;
  largestFall: number | null;
  /** Largest change relative to the span of the limits or of the values before, 0 to 1 and more: what the list is sorted by. */
  effect: number;
  /** SHA-256 of what changed (name, before, after): a mark "looked at" holds only for this. */
  digest: string;
}

/** Changed bytes that no characteristic covers. */
export interface UncoveredRange extends ByteRange {
  kind: "differs" | "only a" | "only b";
  /** Memory segment of the description that holds it, or null. */
  segment: string | null;
  programType: string | null;
  /** Hex digits, two a byte, "--" where the image has none: 8 bytes in front, up to 16 of the range and, if that is all of it, 8 behind. */
  before: string | null;
  after: string | null;
  contextAddress: number;
  digest: string;
}

export interface TextDifference {
  /** Null where the texts are too different to be worked out within its bounds. */
  hunks: { fromA: number; fromB: number; lines: { kind: " " | "+" | "-"; text: string }[] }[] | null;
  added: number;
  removed: number;
  truncated: boolean;
}

/** The difference between two revisions' images, and what it means. */
export interface ChangeSet {
  change_set: 1;
  /** Whether characteristics were read: "both" by own description, "b" both images by B's, "a" both by A's, "none" bytes only. */
  readBy: "both" | "a" | "b" | "none";
  identical: boolean;
  changedBytes: number;
  changedRanges: number;
  characteristics: CharacteristicChange[];
  uncovered: UncoveredRange[];
  /** How many uncovered ranges and bytes there are, if more than are listed. */
  uncoveredRanges: number;
  uncoveredBytes: number;
  descriptionDifference: TextDifference | null;
  /** `sets`: functions and groups that name it. */
  notRead: { name: string; reason: string; sets?: string[] }[];
  problems: string[];
}
